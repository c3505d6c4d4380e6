/** Text made safe for HTML, in text and in quoted attributes. */
export const escape = (text: string): string =>
  text.replaceAll('&', '&amp;').replaceAll('<', '&lt;').replaceAll('>', '&gt;').replaceAll('"', '&quot;').replaceAll("'", '&#39;');

/** Dollars and cents. */
export const dollars = (cents: number): string => `$${(cents / 100).toFixed(2).replace(/\B(?=(\d{3})+\.)/g, ',')}`;

const STYLE = `
:root { color-scheme: light; font: 100%/1.5 system-ui, sans-serif; color: #20262b; background: #eef1f3; }
body { margin: 0; } main { max-width: 30rem; margin: 2rem auto; padding: 1.5rem; background: #fff; border: 1px solid #c5cdd3; border-radius: .5rem; }
.notice { margin: 0; padding: .6rem 1rem; background: #ffe9a8; border-bottom: 2px solid #8a6100; text-align: center; font-weight: 600; }
h1 { font-size: 1.35rem; margin: 0 0 .25rem; } .sum { font-size: 2rem; font-weight: 700; margin: .25rem 0 1rem; }
label, legend { display: block; font-weight: 600; margin-top: 1rem; } .hint { color: #4b565f; font-size: .9rem; margin: .1rem 0; }
input[type=text], input[type=email] { box-sizing: border-box; width: 100%; font: inherit; padding: .55rem; border: 1px solid #67737c; border-radius: .3rem; }
.pair { display: grid; grid-template-columns: 1fr 1fr; gap: 1rem; } fieldset { border: 0; padding: 0; margin: 1rem 0 0; }
button, .button { display: block; width: 100%; box-sizing: border-box; margin-top: 1.25rem; padding: .75rem; font: inherit; font-weight: 700; text-align: center; border-radius: .3rem; border: 2px solid #1d4f7c; background: #1d4f7c; color: #fff; cursor: pointer; text-decoration: none; }
.plain { background: #fff; color: #1d4f7c; } :focus-visible { outline: 3px solid #c26a00; outline-offset: 2px; }
.error { border-left: 4px solid #a3171d; background: #fdeceb; padding: .6rem .9rem; margin: 0 0 1rem; } table { border-collapse: collapse; width: 100%; font-size: .9rem; }
td, th { text-align: left; padding: .3rem .5rem .3rem 0; border-bottom: 1px solid #dde3e7; vertical-align: top; } code { font-size: .95em; } details { margin-top: 1.25rem; }
@media (max-width: 34rem) { main { margin: 0; border: 0; border-radius: 0; } }`;

/** A whole page of the stand-in. It sets no cookie and loads nothing. */
export function htmlPage(notice: string, title: string, body: string): string {
  return `<!doctype html>
<html lang="en"><head><meta charset="utf-8"><meta name="viewport" content="width=device-width, initial-scale=1"><meta name="robots" content="noindex">
<title>${escape(title)}</title><style>${STYLE}</style></head>
<body><p class="notice" role="note">${escape(notice)}</p><main>${body}</main></body></html>`;
}

/** A text field with its label, hint and what was typed. */
export function field(name: string, label: string, value: string, options: { hint?: string; mode?: 'numeric' | 'text'; type?: 'text' | 'email'; autocomplete?: string; required?: boolean } = {}): string {
  const hint = options.hint === undefined ? '' : `<p class="hint" id="${name}-hint">${escape(options.hint)}</p>`;
  const described = options.hint === undefined ? '' : ` aria-describedby="${name}-hint"`;
  return `<label for="${name}">${escape(label)}</label>${hint}<input id="${name}" name="${name}" type="${options.type ?? 'text'}" value="${escape(value)}" inputmode="${options.mode ?? 'text'}" autocomplete="${options.autocomplete ?? 'off'}"${options.required === false ? '' : ' required'}${described}>`;
}

/** A message that a form could not be taken. */
export const errorBox = (message: string | null): string => (message === null ? '' : `<div class="error" role="alert" tabindex="-1">${escape(message)}</div>`);
