import type { Message, Summary } from './store.ts';

export const STYLE = `
:root { color-scheme: light; }
* { box-sizing: border-box; }
body { margin: 0; background: #faf7f0; color: #1c2420; font: 1.0625rem/1.5 system-ui, sans-serif; }
header, main { max-width: 60rem; margin: 0 auto; padding: 1rem; }
header { border-bottom: 1px solid #ddd5c4; display: flex; flex-wrap: wrap; gap: .5rem 1.5rem; align-items: baseline; }
header p { margin: 0; color: #55605a; }
header .name { font-weight: 700; font-size: 1.25rem; color: #1c2420; }
h1 { font-size: 1.5rem; margin: .5rem 0 1rem; overflow-wrap: anywhere; }
h2 { font-size: 1.0625rem; margin: 2rem 0 .5rem; }
a { color: #1b559b; }
a:focus-visible, input:focus-visible, button:focus-visible, summary:focus-visible { outline: 3px solid #1b559b; outline-offset: 2px; }
form { display: flex; flex-wrap: wrap; gap: .75rem; align-items: end; margin-bottom: 1rem; }
label { display: grid; gap: .25rem; font-weight: 600; flex: 1 1 16rem; max-width: 26rem; }
input { font: inherit; min-height: 44px; padding: 0 .75rem; border: 2px solid #1c2420; border-radius: 4px; background: #fff; width: 100%; }
button, .button { font: inherit; font-weight: 600; min-height: 44px; padding: 0 1rem; display: inline-flex; align-items: center; border: 2px solid #1b559b; border-radius: 4px; background: #1b559b; color: #fff; cursor: pointer; text-decoration: none; }
.button { background: none; color: #1b559b; }
ol { list-style: none; margin: 0; padding: 0; border-top: 1px solid #ddd5c4; }
ol li { border-bottom: 1px solid #ddd5c4; }
ol a { display: grid; grid-template-columns: minmax(0, 1fr) auto; gap: 0 1rem; padding: .75rem .25rem; text-decoration: none; }
ol a:hover { background: #fff; }
ol .subject { font-weight: 600; overflow-wrap: anywhere; text-decoration: underline; }
ol small { font-size: .9375rem; color: #55605a; overflow-wrap: anywhere; }
ol time { color: #55605a; font-variant-numeric: tabular-nums; }
dl { display: grid; grid-template-columns: auto minmax(0, 1fr); gap: .25rem 1rem; margin: 0 0 1.5rem; }
dt { color: #55605a; } dd { margin: 0; overflow-wrap: anywhere; }
.body { background: #fff; border: 1px solid #ddd5c4; padding: 1rem; white-space: pre-wrap; overflow-wrap: anywhere; }
iframe { width: 100%; height: 32rem; border: 1px solid #ddd5c4; background: #fff; }
.empty { padding: 2rem 0; color: #55605a; }
`;

function escape(text: string): string {
  return text.replaceAll('&', '&amp;').replaceAll('<', '&lt;').replaceAll('>', '&gt;').replaceAll('"', '&quot;');
}

function layout(title: string, main: string): string {
  return `<!doctype html>
<html lang="en"><head><meta charset="utf-8"><meta name="viewport" content="width=device-width, initial-scale=1">
<title>${escape(title)}</title><link rel="stylesheet" href="/style.css"></head>
<body><header><p class="name"><a href="/">Local mailbox</a></p><p>Mail sent on this machine stays here. None of it leaves.</p></header>
<main>${main}</main></body></html>`;
}

function time(iso: string): string {
  return `<time datetime="${iso}">${iso.slice(0, 10)} ${iso.slice(11, 16)} UTC</time>`;
}

const subjectOf = (summary: Summary): string => escape(summary.subject || '(no subject)');

function row(summary: Summary): string {
  const attached = summary.attachments.length === 0 ? '' : ` · ${summary.attachments.length} attached`;
  return `<li><a href="/mail/${summary.id}"><span class="subject">${subjectOf(summary)}</span>${time(summary.receivedAt)}
<small>to ${escape(summary.to.join(', '))}${attached}</small></a></li>`;
}

export interface ListPage {
  messages: readonly Summary[];
  total: number;
  to: string | null;
  /** Where the older ones are, when there are more. */
  older: string | null;
}

export function listPage({ messages, total, to, older }: ListPage): string {
  const nothing = to === null ? 'No mail yet. A message appears here as soon as it is sent.' : `Nothing for ${escape(to)}.`;
  return layout('Mailbox', `
<h1>Mailbox</h1>
<form method="get" action="/"><label>Show mail to<input type="email" name="to" value="${escape(to ?? '')}" autocomplete="off"></label>
<button>Show</button>${to === null ? '<a class="button" href="/">Look again</a>' : '<a class="button" href="/">Show all</a>'}</form>
<p>${total === 1 ? '1 message' : `${total} messages`}, newest first</p>
${messages.length === 0 ? `<p class="empty">${nothing}</p>` : `<ol>${messages.map(row).join('')}</ol>`}
${older === null ? '' : `<p><a class="button" href="${escape(older)}">Older</a></p>`}`);
}

function clickable(text: string): string {
  const pattern = /https?:\/\/[^\s<>"]+[^\s<>".,;:!?)\]]/g;
  let html = '';
  let from = 0;
  for (const match of text.matchAll(pattern)) {
    html += escape(text.slice(from, match.index)) + `<a href="${escape(match[0])}">${escape(match[0])}</a>`;
    from = match.index + match[0].length;
  }
  return html + escape(text.slice(from));
}

function attachmentRow(id: string, name: string, contentType: string, size: number, index: number): string {
  return `<li><a href="/messages/${id}/attachments/${index}"><span class="subject">${escape(name)}</span><small>${escape(contentType)}, ${size.toLocaleString('en-US')} bytes</small></a></li>`;
}

export function messagePage(message: Message): string {
  const { id, attachments, html, text } = message;
  const rows = attachments.map((one, index) => attachmentRow(id, one.name, one.contentType, one.size, index)).join('');
  return layout(message.subject || '(no subject)', `
<p><a href="/">All mail</a></p>
<h1>${subjectOf(message)}</h1>
<dl><dt>From</dt><dd>${escape(message.from)}</dd><dt>To</dt><dd>${message.to.map((one) => `<a href="/?to=${encodeURIComponent(one)}">${escape(one)}</a>`).join(', ')}</dd>
<dt>Arrived</dt><dd>${time(message.receivedAt)}</dd></dl>
${text.trim() === '' ? '' : `<h2>Plain text</h2><div class="body">${clickable(text.trim())}</div>`}
${html === null ? '' : `<h2>As designed</h2><iframe title="The message as designed" src="/mail/${id}/html" sandbox="allow-popups allow-popups-to-escape-sandbox allow-top-navigation-by-user-activation"></iframe>`}
${rows === '' ? '' : `<h2>Attached</h2><ol>${rows}</ol>`}
<p><a href="/messages/${id}/source">Source of the message</a></p>`);
}

/** The HTML part as a page of its own. Its links leave the frame; it is served so that it can do nothing else. */
export function htmlPart(html: string): string {
  return `<!doctype html><meta charset="utf-8"><base target="_top">${html}`;
}

export function notFoundPage(): string {
  return layout('Not here', '<h1>Not here</h1><p>There is no such message. <a href="/">See all mail</a>.</p>');
}
