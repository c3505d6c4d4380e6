/** An address with these parameters; empty ones are left out. */
export function addressWith(path: string, parameters: Readonly<Record<string, string>>): string {
  const query = new URLSearchParams(Object.entries(parameters).filter(([, value]) => value !== ''));
  return query.size === 0 ? path : `${path}?${query}`;
}

/** What a desk list was asked for: the words looked for, and a whole number, both safe to use. */
export const searched = (parameters: URLSearchParams): string => (parameters.get('q') ?? '').trim().slice(0, 100);
export const wholeIn = (parameters: URLSearchParams, name: string): number | null => {
  const typed = parameters.get(name) ?? '';
  return /^[1-9]\d{0,8}$/.test(typed) ? Number(typed) : null;
};
