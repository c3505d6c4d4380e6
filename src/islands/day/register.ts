import { Workbox } from 'workbox-window';
import { refresh } from './send.ts';
import { holderOf, letGo, unsentCount } from './store.ts';

/** A new worker takes over while a page has only just been opened: later its scripts could be gone from under somebody's hands. */
const JUST_OPENED_MS = 10_000;
/** Signed-in pages keep the days to come on the phone, at most this often. */
const KEEP_EVERY_MS = 30 * 60_000;

async function registerWorker(): Promise<void> {
  if (!('serviceWorker' in navigator)) return;
  const openedAt = performance.now();
  const hadWorker = navigator.serviceWorker.controller !== null;
  const workbox = new Workbox('/service-worker.js', { updateViaCache: 'none' });
  const fresh = (): boolean => performance.now() - openedAt < JUST_OPENED_MS;
  workbox.addEventListener('waiting', () => {
    if (!hadWorker || !fresh()) return;
    workbox.addEventListener('controlling', () => location.reload());
    workbox.messageSkipWaiting();
  });
  await workbox.register();
  await askToBeTakenIn();
}

/**
 * A worker takes in the pages that are open at the moment it begins. A page that was on its way then is left without one for as long
 * as it stays open, unless it asks.
 */
async function askToBeTakenIn(): Promise<void> {
  const { active } = await navigator.serviceWorker.ready;
  if (navigator.serviceWorker.controller === null) active?.postMessage({ type: 'CLAIM' });
}

/** Whether this page was made for somebody who is signed in. */
const isSignedIn = (): boolean => document.body.dataset['account'] !== undefined;

async function keepDays(): Promise<void> {
  const holder = await holderOf();
  const isKept = holder !== undefined && holder.accountId === document.body.dataset['account'] && !holder.signedOut;
  if (!isKept || Date.now() - new Date(holder.heardAt).getTime() > KEEP_EVERY_MS) await refresh();
}

/** Signing out takes the days off the phone, and asks first when entries have not been sent. */
async function onSignOut(event: SubmitEvent): Promise<void> {
  const { target: form } = event;
  if (!(form instanceof HTMLFormElement) || new URL(form.action).pathname !== '/sign-out') return;
  event.preventDefault();
  try {
    const holder = await holderOf();
    const unsent = holder ? await unsentCount(holder.accountId) : 0;
    if (unsent > 0 && !confirm(`${unsent} ${unsent === 1 ? 'entry is' : 'entries are'} saved on this phone and not sent yet. Sign out? They stay here and are sent when you sign in again.`)) return;
    await letGo();
  } catch {
    // Storage that is shut keeps nothing, so there is nothing to let go.
  }
  form.submit();
}

document.addEventListener('submit', (event) => void onSignOut(event));
window.addEventListener('load', () => {
  registerWorker().catch(() => undefined);
  if (isSignedIn()) keepDays().catch(() => undefined);
});
