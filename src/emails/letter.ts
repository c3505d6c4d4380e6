import type { MailMessage } from '~/server/services/mail.ts';

/** One part of a letter: a paragraph, a list of facts (label and value), a button that leads somewhere, or a plain link. */
export type Part = string | { readonly facts: readonly (readonly [label: string, value: string])[] } | { readonly button: string; readonly href: string } | { readonly link: string; readonly href: string };

const escape = (text: string): string => text.replaceAll('&', '&amp;').replaceAll('<', '&lt;').replaceAll('>', '&gt;').replaceAll('"', '&quot;');

function partText(part: Part): string {
  if (typeof part === 'string') return part;
  if ('facts' in part) return part.facts.map(([label, value]) => `${label}: ${value}`).join('\n');
  return `${'link' in part ? part.link : part.button}: ${part.href}`;
}

function partHtml(part: Part): string {
  if (typeof part === 'string') return `<p style="margin:0 0 16px">${escape(part)}</p>`;
  if ('facts' in part) {
    const row = ([label, value]: readonly [string, string]): string =>
      `<tr><td style="padding:6px 16px 6px 0;color:#55605A">${escape(label)}</td><td style="padding:6px 0;font-family:monospace">${escape(value)}</td></tr>`;
    return `<table role="presentation" style="margin:0 0 16px;border-collapse:collapse">${part.facts.map(row).join('')}</table>`;
  }
  if ('link' in part) return `<p style="margin:0 0 8px"><a href="${escape(part.href)}" style="color:#1B559B">${escape(part.link)}</a></p>`;
  return `<p style="margin:0 0 16px"><a href="${escape(part.href)}" style="display:inline-block;padding:12px 20px;background:#1B559B;color:#FFFFFF;text-decoration:none;border-radius:4px;font-weight:bold">${escape(part.button)}</a></p>`;
}

/**
 * Words a letter once for both of its forms, text and HTML.
 * @param greeting the reader's name
 */
export function letter(to: string, subject: string, greeting: string, parts: readonly Part[]): MailMessage {
  const closing = 'Skidway. You get this because it concerns your account, a listing, a bid or a booking of yours.';
  const text = [`Hello ${greeting},`, ...parts.map(partText), `-- \n${closing}`].join('\n\n');
  const html =
    `<!doctype html><html lang="en"><body style="margin:0;background:#FAF7F0;color:#1C2420;font:16px/1.5 sans-serif"><div style="max-width:560px;margin:0 auto;padding:24px">` +
    `<p style="margin:0 0 16px">Hello ${escape(greeting)},</p>${parts.map(partHtml).join('')}<p style="margin:24px 0 0;padding-top:12px;border-top:1px solid #DDD5C4;color:#55605A;font-size:14px">${closing}</p></div></body></html>`;
  return { to, subject, text, html };
}
