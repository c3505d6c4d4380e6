import type { APIRoute } from 'astro';
import { paths } from '~/domain/paths.ts';
import { now } from '~/server/clock.ts';
import { signOut } from '~/server/commands/end-sessions.ts';
import { endSession, sessionCookieName } from '~/server/sessions.ts';

/** Signs out. Anyone may: without a session there is nothing to end. */
export const POST: APIRoute = async ({ cookies, locals, redirect }) => {
  if (locals.viewer) await signOut(locals.viewer, now());
  const blank = await endSession(cookies.get(sessionCookieName)?.value);
  cookies.set(blank.name, blank.value, blank.attributes);
  return redirect(paths.home, 303);
};
