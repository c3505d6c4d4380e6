/** A message as the local mailbox gives it. */
export interface ReadMail {
  readonly id: string;
  readonly receivedAt: string;
  readonly to: readonly string[];
  readonly subject: string;
  readonly text: string;
  readonly html: string | null;
  /** Every address a link in the message leads to, in order. */
  readonly links: readonly string[];
}

/** What is posted by a form: one value a name, or several. */
export type Fields = Readonly<Record<string, string | readonly string[]>>;

/** A password that the sign-up form takes. */
export const PASSWORD = 'sound white oak 1842';

/**
 * The newest message to an address whose subject has these words; waits for the worker to send it.
 * @throws after thirty seconds without one.
 */
export async function readMail(mailPage: string, to: string, subject = ''): Promise<ReadMail> {
  const until = Date.now() + 30_000;
  for (;;) {
    const answer = await fetch(`${mailPage}/messages?to=${encodeURIComponent(to)}`);
    const { messages } = (await answer.json()) as { messages: ReadMail[] };
    const found = messages.find((message) => message.subject.includes(subject));
    if (found) return (await (await fetch(`${mailPage}/messages/${found.id}`)).json()) as ReadMail;
    if (Date.now() > until) throw new Error(`No message to ${to}${subject ? ` about "${subject}"` : ''} came within thirty seconds.`);
    await new Promise((resolve) => setTimeout(resolve, 100));
  }
}

/** A browser without pictures or scripts: keeps cookies, says where its posts come from, follows redirects only when asked. */
export class Browser {
  readonly cookies = new Map<string, string>();

  constructor(readonly origin: string) {}

  /** One request as a browser would send it. `path` may be a whole address of the same origin. */
  async request(path: string, init: RequestInit = {}): Promise<Response> {
    const url = new URL(path, this.origin);
    const headers = new Headers(init.headers);
    if (!headers.has('accept')) headers.set('accept', 'text/html,application/json');
    if (this.cookies.size > 0) headers.set('cookie', [...this.cookies].map(([name, value]) => `${name}=${value}`).join('; '));
    if (init.method !== undefined && init.method !== 'GET' && !headers.has('origin')) headers.set('origin', this.origin);
    const answer = await fetch(url, { redirect: 'manual', ...init, headers });
    for (const line of answer.headers.getSetCookie()) {
      const [pair = '', ...attributes] = line.split(';');
      const [name = '', ...value] = pair.split('=');
      const gone = attributes.some((one) => /^\s*max-age=0\s*$/i.test(one)) || value.join('=') === '';
      if (gone) this.cookies.delete(name.trim());
      else this.cookies.set(name.trim(), value.join('='));
    }
    return answer;
  }

  get(path: string, headers: Record<string, string> = {}): Promise<Response> {
    return this.request(path, { headers });
  }

  /** Posts a form. */
  post(path: string, fields: Fields = {}): Promise<Response> {
    const body = new URLSearchParams();
    for (const [name, value] of Object.entries(fields)) for (const one of Array.isArray(value) ? (value as readonly string[]) : [value as string]) body.append(name, one);
    return this.request(path, { method: 'POST', body });
  }

  /** Sends JSON to an endpoint. */
  send(method: 'POST' | 'PUT' | 'PATCH' | 'DELETE', path: string, body?: unknown): Promise<Response> {
    return this.request(path, { method, headers: { 'content-type': 'application/json', accept: 'application/json' }, ...(body === undefined ? {} : { body: JSON.stringify(body) }) });
  }

  /** Follows redirects until a page comes. */
  async follow(answer: Response): Promise<Response> {
    let last = answer;
    for (let step = 0; step < 10; step += 1) {
      const to = last.headers.get('location');
      if (last.status < 300 || last.status > 399 || to === null) return last;
      last = await this.get(to);
    }
    throw new Error(`The redirects after ${answer.url} do not end.`);
  }

  /**
   * Signs up by the form, and confirms the address by the link in the letter when `mailPage` is given. Signed in afterwards.
   * @throws when the form refuses.
   */
  async signUp(who: { name: string; email: string; as: readonly ('landowner' | 'sawyer')[]; password?: string }, mailPage?: string): Promise<void> {
    const answer = await this.post('/sign-up', { name: who.name, email: who.email, password: who.password ?? PASSWORD, 'as[]': who.as, terms: 'on' });
    if (answer.status !== 303) throw new Error(`Signing up answered ${answer.status}: ${await answer.text()}`);
    if (mailPage === undefined) return;
    const letter = await readMail(mailPage, who.email, 'Confirm');
    const link = letter.links.find((one) => one.includes('/confirm-email/'));
    if (!link) throw new Error('The letter has no link to confirm the address.');
    const confirmed = await this.post(new URL(link).pathname);
    if (confirmed.status !== 303) throw new Error(`Confirming answered ${confirmed.status}: ${await confirmed.text()}`);
  }

  /** Signs in by the form. @throws when the form refuses. */
  async signIn(email: string, password: string = PASSWORD): Promise<void> {
    const answer = await this.post('/sign-in', { email, password });
    if (answer.status !== 303) throw new Error(`Signing in answered ${answer.status}: ${await answer.text()}`);
  }
}
