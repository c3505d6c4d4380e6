const NAMESPACE = 'http://s3.amazonaws.com/doc/2006-03-01/';
export const XML_DECLARATION = '<?xml version="1.0" encoding="UTF-8"?>\n';

function escape(text: string): string {
  return text
    .replaceAll('&', '&amp;')
    .replaceAll('<', '&lt;')
    .replaceAll('>', '&gt;')
    .replaceAll('"', '&quot;')
    // Control characters that XML 1.0 forbids are sent as references, as S3 does.
    .replace(/[\u0000-\u0008\u000b\u000c\u000d\u000e-\u001f]/g, (c) => `&#x${c.charCodeAt(0).toString(16)};`);
}

/** One element: a string or number is text (escaped), an array is children already rendered. */
export function element(name: string, content: string | number | boolean | readonly string[]): string {
  const inner = Array.isArray(content) ? content.join('') : escape(String(content));
  return `<${name}>${inner}</${name}>`;
}

/** The root element of an answer, with S3's namespace and the XML declaration. */
export function document(name: string, children: readonly string[]): string {
  return `${XML_DECLARATION}<${name} xmlns="${NAMESPACE}">${children.join('')}</${name}>`;
}

function unescape(text: string): string {
  return text.replace(/&(#x[0-9a-f]+|#\d+|lt|gt|amp|quot|apos);/gi, (whole, name: string) => {
    if (name.startsWith('#x') || name.startsWith('#X')) return String.fromCodePoint(parseInt(name.slice(2), 16));
    if (name.startsWith('#')) return String.fromCodePoint(parseInt(name.slice(1), 10));
    return { lt: '<', gt: '>', amp: '&', quot: '"', apos: "'" }[name.toLowerCase()] ?? whole;
  });
}

/** The raw inner text of every element of that name. Enough for the three small documents clients send. */
export function innerOf(xml: string, name: string): string[] {
  const pattern = new RegExp(`<${name}(?:\\s[^>]*)?>([\\s\\S]*?)</${name}>`, 'g');
  return [...xml.matchAll(pattern)].map((match) => match[1] ?? '');
}

/** The unescaped text of the first element of that name, or null. */
export function textOf(xml: string, name: string): string | null {
  const [first] = innerOf(xml, name);
  return first === undefined ? null : unescape(first);
}
