import { oneRow, rows } from '../db.ts';
import { notFound } from '../errors.ts';
import type { Viewer } from '../viewer.ts';

export interface ConversationRow {
  readonly id: string;
  readonly otherName: string;
  readonly title: string;
  readonly listingNumber: number;
  readonly lastMessageAt: Date;
  readonly lastBody: string | null;
  readonly unread: number;
}

/** A reader's conversations, newest first. */
export const conversationsOf = (viewer: Viewer): Promise<ConversationRow[]> =>
  rows<ConversationRow>(
    `SELECT conversation.id, other.name AS "otherName", listing.title, listing.number AS "listingNumber", conversation.last_message_at AS "lastMessageAt",
       (SELECT body FROM message WHERE conversation_id = conversation.id AND hidden_at IS NULL ORDER BY sent_at DESC LIMIT 1) AS "lastBody",
       (SELECT count(*)::int FROM message WHERE conversation_id = conversation.id AND recipient_id = $1 AND read_at IS NULL AND hidden_at IS NULL) AS unread
     FROM conversation
     JOIN listing ON listing.id = conversation.listing_id
     JOIN account other ON other.id = CASE WHEN conversation.landowner_id = $1 THEN conversation.sawyer_id ELSE conversation.landowner_id END
     WHERE (conversation.landowner_id = $1 OR conversation.sawyer_id = $1)
       AND EXISTS (SELECT 1 FROM message WHERE conversation_id = conversation.id AND hidden_at IS NULL)
     ORDER BY conversation.last_message_at DESC LIMIT 200`,
    [viewer.id],
  );

export interface ConversationPage {
  readonly id: string;
  readonly otherId: string;
  readonly otherName: string;
  readonly title: string;
  readonly listingNumber: number;
  readonly bookingNumber: number | null;
  /** The site's own time zone, in which times are shown to both. */
  readonly timeZone: string;
  readonly messages: readonly { readonly id: string; readonly mine: boolean; readonly body: string; readonly sentAt: Date; readonly readAt: Date | null }[];
}

/** One conversation with its last 500 messages in order. @throws Refusal `notFound` for others */
export async function conversationPage(viewer: Viewer, id: string): Promise<ConversationPage> {
  if (!/^[0-9a-f-]{36}$/i.test(id)) throw notFound('conversation');
  const head = await oneRow<Omit<ConversationPage, 'messages'>>(
    `SELECT conversation.id, other.id AS "otherId", other.name AS "otherName", listing.title, listing.number AS "listingNumber", booking.number AS "bookingNumber", coalesce(listing.time_zone, 'UTC') AS "timeZone"
     FROM conversation
     JOIN listing ON listing.id = conversation.listing_id
     JOIN account other ON other.id = CASE WHEN conversation.landowner_id = $2 THEN conversation.sawyer_id ELSE conversation.landowner_id END
     LEFT JOIN booking ON booking.id = conversation.booking_id
     WHERE conversation.id = $1 AND (conversation.landowner_id = $2 OR conversation.sawyer_id = $2)`,
    [id, viewer.id],
  );
  if (!head) throw notFound('conversation');
  const messages = await rows<ConversationPage['messages'][number]>(
    `SELECT * FROM (SELECT id, sender_id = $2 AS mine, body, sent_at AS "sentAt", read_at AS "readAt" FROM message
       WHERE conversation_id = $1 AND hidden_at IS NULL ORDER BY sent_at DESC LIMIT 500) latest ORDER BY "sentAt"`,
    [id, viewer.id],
  );
  return { ...head, messages };
}
