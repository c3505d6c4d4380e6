/** The version of the terms an account accepts: the date they took effect. Changing the terms' meaning changes this. */
export const termsVersion = '2026-11-01';
