/** Addresses whose last part is a secret: whoever reads the log must not be able to use them. */
const secretPart = /^(\/(?:calendar|reset-password|confirm-email|searches\/stop)\/).+$/;

/** What the log keeps of a request's target: the path without its query and without secrets. */
export const loggedPath = (target: string): string => (target.split('?', 1)[0] ?? '').replace(secretPart, '$1…');
