import { messageWaiting } from '~/emails/booking-letters.ts';
import { paths } from '~/domain/paths.ts';
import { authorize, rolesOnListing } from '../authorize.ts';
import { boardsLeftOn } from '../boards-left.ts';
import { refuseBlocked } from '../blocks.ts';
import { inTransaction } from '../db.ts';
import { forbidden, invalid, notFound } from '../errors.ts';
import { countTry } from '../http/limits.ts';
import { enqueue } from '../jobs/queue.ts';
import { lockListing } from '../locks.ts';
import { Account, Conversation, Listing, Message } from '../models/index.ts';
import { linkTo } from '../parties.ts';
import type { Viewer } from '../viewer.ts';

const LONGEST_MESSAGE = 4000;

function checkedBody(text: string): string {
  const body = text.trim();
  if (body === '') throw invalid([{ path: 'body', message: 'Write something first.' }]);
  if (body.length > LONGEST_MESSAGE) throw invalid([{ path: 'body', message: `Keep it under ${LONGEST_MESSAGE.toLocaleString('en-US')} characters.` }]);
  return body;
}

/** Opens the conversation of a sawyer about a listing, or of anybody about boards left over from it, or finds it. */
export async function openConversation(by: Viewer, listingNumber: number, at: Date): Promise<Conversation> {
  return inTransaction(async () => {
    const listing = await lockListing(listingNumber);
    if (listing.status === 'draft' || listing.hiddenAt) throw notFound('listing');
    authorize(by, 'listing', (await boardsLeftOn(listing.id)) ? 'askAboutBoards' : 'ask', rolesOnListing(by, listing), listing.status);
    if (by.id === listing.ownerId) throw forbidden('Others write to you about your listing; answer them under Messages.');
    await refuseBlocked(by.id, listing.ownerId);
    const known = await Conversation.findOne({ where: { listingId: listing.id, sawyerId: by.id } });
    return known ?? Conversation.create({ listingId: listing.id, landownerId: listing.ownerId, sawyerId: by.id, lastMessageAt: at });
  });
}

/**
 * Writes a message in a conversation. The other side gets one mail for as long as earlier messages wait unread.
 * @throws Refusal `notFound` for a conversation of others, `invalid` for an empty or overlong message, `tooMany`
 */
export async function sendMessage(by: Viewer, input: { readonly conversation: string; readonly body: string }, at: Date): Promise<void> {
  const body = checkedBody(input.body);
  if (!by.active) throw forbidden('This account is suspended.');
  await countTry('message', by.id);
  await inTransaction(async () => {
    const conversation = await Conversation.findByPk(input.conversation, { lock: true });
    if (!conversation || (conversation.landownerId !== by.id && conversation.sawyerId !== by.id)) throw notFound('conversation');
    const recipientId = conversation.landownerId === by.id ? conversation.sawyerId : conversation.landownerId;
    await refuseBlocked(by.id, recipientId);
    const waiting = await Message.count({ where: { conversationId: conversation.id, recipientId, readAt: null, hiddenAt: null } });
    await Message.create({ conversationId: conversation.id, senderId: by.id, recipientId, body, sentAt: at });
    await conversation.update({ lastMessageAt: at });
    if (waiting > 0) return;
    const recipient = await Account.findByPk(recipientId, { rejectOnEmpty: true });
    const listing = await Listing.findByPk(conversation.listingId, { rejectOnEmpty: true });
    await enqueue('send-mail', messageWaiting(recipient, by, listing.title ?? 'your logs', body, linkTo(paths.conversation(conversation.id))));
  });
}

/** Marks what the reader has now seen of a conversation. */
export async function markRead(by: Viewer, conversationId: string, at: Date): Promise<void> {
  await Message.update({ readAt: at }, { where: { conversationId, recipientId: by.id, readAt: null } });
}
