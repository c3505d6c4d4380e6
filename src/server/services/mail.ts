import { createTransport, type Transporter } from 'nodemailer';
import { env } from '../env.ts';

/** A message as it waits in the queue: already worded, so that sending needs nothing else. */
export interface MailMessage {
  readonly to: string;
  readonly subject: string;
  readonly text: string;
  readonly html: string;
  /** A calendar invitation or a receipt. `content` is base64. */
  readonly attachments?: readonly { readonly filename: string; readonly contentType: string; readonly content: string }[];
  /** A calendar event that mail programs offer to accept. */
  readonly calendar?: { readonly method: 'REQUEST' | 'CANCEL' | 'PUBLISH'; readonly ics: string };
  /** The address that ends such letters: mail programs post to it (RFC 2369, RFC 8058). */
  readonly unsubscribe?: string;
}

let transport: Transporter | undefined;

/** Hands one message to the mail server. @throws when it is not accepted; the queue tries again. */
export async function sendMail(message: MailMessage): Promise<void> {
  transport ??= createTransport(env().MAIL_URL);
  await transport.sendMail({
    from: env().MAIL_FROM,
    to: message.to,
    subject: message.subject,
    text: message.text,
    html: message.html,
    attachments: (message.attachments ?? []).map((file) => ({ filename: file.filename, contentType: file.contentType, content: Buffer.from(file.content, 'base64') })),
    ...(message.unsubscribe ? { headers: { 'List-Unsubscribe': `<${message.unsubscribe}>`, 'List-Unsubscribe-Post': 'List-Unsubscribe=One-Click' } } : {}),
    ...(message.calendar ? { icalEvent: { method: message.calendar.method, content: message.calendar.ics, filename: 'invitation.ics' } } : {}),
  });
}

/** Whether the mail server answers, for the health page. */
export async function mailAnswers(): Promise<boolean> {
  try {
    transport ??= createTransport(env().MAIL_URL);
    return await transport.verify();
  } catch {
    return false;
  }
}
