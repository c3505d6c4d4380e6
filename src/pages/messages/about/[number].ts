import type { APIRoute } from 'astro';
import { paths } from '~/domain/paths.ts';
import { now } from '~/server/clock.ts';
import { openConversation } from '~/server/commands/send-message.ts';
import { signedOut } from '~/server/errors.ts';

/** "Ask the landowner": opens the conversation about a listing, or finds it, and goes there. */
export const POST: APIRoute = async ({ locals, params, redirect }) => {
  if (!locals.viewer) throw signedOut();
  const conversation = await openConversation(locals.viewer, Number(params['number']), now());
  return redirect(paths.conversation(conversation.id), 303);
};
