/** The password of every account of the demo. */
export const DEMO_PASSWORD = 'boards-in-hand';

/**
 * The demo moderator's second-factor secret (RFC 6238, base32). Fixed and published in the README, so that anybody may try the
 * desk; a real moderator's is made by `db/make-moderator.ts` and said once.
 */
export const DEMO_SECOND_FACTOR = 'ONVWSZDXMF4S2ZDFNVXS23LPMRSXEYLU';
