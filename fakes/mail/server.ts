import type { Server } from 'node:net';
import type { AddressInfo } from 'node:net';
import { SMTPServer } from 'smtp-server';
import { MailStore } from './store.ts';
import { createMailboxServer } from './web.ts';

export interface FakeMailOptions {
  /** Folder that keeps every message. */
  dataDir: string;
  /** 0 chooses a free port. */
  smtpPort?: number;
  webPort?: number;
  host?: string;
}

export interface FakeMail {
  smtpUrl: string;
  smtpPort: number;
  webUrl: string;
  webPort: number;
  close: () => Promise<void>;
}

const LARGEST_MESSAGE = 25 * 1024 ** 2;

/** Addresses in this domain do not exist: the server refuses them, as a real one refuses an unknown mailbox. */
const REFUSED_DOMAIN = /@refused\.example$/i;

function smtpError(code: number, message: string): Error {
  return Object.assign(new Error(message), { responseCode: code });
}

function createSmtpServer(store: MailStore): SMTPServer {
  return new SMTPServer({
    // Any name and password is accepted; giving one is not asked for. The line never leaves this machine.
    authOptional: true,
    allowInsecureAuth: true,
    onAuth: (auth, _session, done) => done(null, { user: auth.username ?? 'anyone' }),
    disabledCommands: ['STARTTLS'],
    disableReverseLookup: true,
    size: LARGEST_MESSAGE,
    onRcptTo: ({ address }, _session, done) => done(REFUSED_DOMAIN.test(address) ? smtpError(550, 'No such mailbox here') : null),
    onData(stream, session, done) {
      const pieces: Buffer[] = [];
      stream.on('data', (piece: Buffer) => pieces.push(piece));
      stream.once('error', done);
      stream.once('end', () => {
        if (stream.sizeExceeded) return done(smtpError(552, 'The message is larger than 25 MB'));
        const { mailFrom, rcptTo } = session.envelope;
        const envelope = { from: mailFrom === false ? '' : mailFrom.address, to: rcptTo.map((one) => one.address) };
        store.keep(Buffer.concat(pieces), envelope).then(
          ({ id }) => done(null, `Kept as ${id}`),
          (error: unknown) => done(error instanceof Error ? error : new Error(String(error))),
        );
      });
    },
  });
}

function listen(server: Server, port: number, host: string): Promise<number> {
  return new Promise((resolve, reject) => {
    server.once('error', reject);
    server.listen(port, host, () => resolve((server.address() as AddressInfo).port));
  });
}

/** Starts the SMTP server and the mailbox's pages, and answers once both listen. */
export async function startFakeMail(options: FakeMailOptions): Promise<FakeMail> {
  const store = new MailStore(options.dataDir);
  const host = options.host ?? '127.0.0.1';
  const smtp = createSmtpServer(store);
  const web = createMailboxServer(store);
  const smtpPort = await listen(smtp.server, options.smtpPort ?? 0, host);
  // A client that hangs up in the middle is its own affair; the server goes on.
  smtp.on('error', (error) => console.warn('mail:', error.message));
  const webPort = await listen(web, options.webPort ?? 0, host);
  const close = async (): Promise<void> => {
    await new Promise<void>((resolve) => smtp.close(() => resolve()));
    await new Promise<void>((resolve) => {
      web.close(() => resolve());
      web.closeAllConnections();
    });
  };
  return { smtpUrl: `smtp://${host}:${smtpPort}`, smtpPort, webUrl: `http://${host}:${webPort}`, webPort, close };
}
