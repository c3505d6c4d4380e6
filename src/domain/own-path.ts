/**
 * The address to go on to after signing in, when it is one of ours: a path with query and fragment. Anything that a browser
 * could read as another host (`//elsewhere`, a backslash, a scheme, control characters) is null.
 */
export function ownPath(text: string | null | undefined): string | null {
  if (!text || !text.startsWith('/') || text.length > 2000 || /[\\\u0000-\u0020\u007f]/.test(text)) return null;
  const base = 'https://own.invalid';
  if (!URL.canParse(text, base)) return null;
  const url = new URL(text, base);
  return url.origin === base && !url.pathname.startsWith('//') ? url.pathname + url.search + url.hash : null;
}
