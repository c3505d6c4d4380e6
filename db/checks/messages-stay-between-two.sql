-- A message goes from one side of its conversation to the other.
SELECT message.id AS what FROM message JOIN conversation ON conversation.id = message.conversation_id
WHERE NOT ((message.sender_id, message.recipient_id) IN ((conversation.landowner_id, conversation.sawyer_id), (conversation.sawyer_id, conversation.landowner_id)))
