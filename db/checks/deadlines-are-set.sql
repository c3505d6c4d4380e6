-- A booking that waits for money or a signature says until when.
SELECT number AS what, status FROM booking WHERE (status = 'agreed' AND pay_by IS NULL) OR (status = 'tallied' AND sign_by IS NULL) OR (status = 'queried' AND sign_by IS NOT NULL)
