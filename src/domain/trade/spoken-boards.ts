/** Boards as somebody says them beside the mill. */
export interface SpokenBoards {
  readonly thicknessIn: number;
  readonly widthIn: number;
  readonly lengthFt: number;
  readonly count: number;
}

const units: Readonly<Record<string, number>> = {
  zero: 0, one: 1, won: 1, two: 2, to: 2, too: 2, three: 3, four: 4, for: 4, fore: 4, five: 5, six: 6, seven: 7, eight: 8, ate: 8, nine: 9, ten: 10,
  eleven: 11, twelve: 12, thirteen: 13, fourteen: 14, fifteen: 15, sixteen: 16, seventeen: 17, eighteen: 18, nineteen: 19,
};
const tens: Readonly<Record<string, number>> = { twenty: 20, thirty: 30, forty: 40, fifty: 50 };
const parts: Readonly<Record<string, number>> = { half: 1 / 2, quarter: 1 / 4, quarters: 1 / 4, eighth: 1 / 8, eighths: 1 / 8 };
/** Words that say only what is plain already. */
const fillers: ReadonlySet<string> = new Set(['inch', 'inches', 'in', 'foot', 'feet', 'ft', 'wide', 'long', 'thick', 'board', 'boards', 'piece', 'pieces', 'of', 'please', 'add', 'them']);
const PAUSE = '|';
const between: ReadonlySet<string> = new Set(['by', 'x', 'times', '×']);

/** A plain whole or decimal number from words or figures; null when these are not one. */
function wholeOf(words: readonly string[]): number | null {
  const [first = '', second, ...more] = words;
  if (more.length > 0) return null;
  if (/^\d+(\.\d+)?$/.test(first)) return second === undefined ? Number(first) : null;
  if (tens[first] !== undefined) {
    if (second === undefined) return tens[first];
    const unit = units[second];
    return unit !== undefined && unit > 0 && unit < 10 ? tens[first] + unit : null;
  }
  return second === undefined ? (units[first] ?? null) : null;
}

/** A size from words: `seven and a half`, `seven 1/2`, `5/4`, `five quarter`, `twelve`. A number before `quarter` counts quarters. */
function sizeOf(words: readonly string[]): number | null {
  const joined = words.filter((word) => word !== 'a');
  const and = joined.indexOf('and');
  if (and > 0) {
    const [base, rest] = [wholeOf(joined.slice(0, and)), sizeOf(joined.slice(and + 1))];
    return base !== null && rest !== null && rest < 1 ? base + rest : null;
  }
  const last = joined.at(-1) ?? '';
  const fraction = /^(\d{1,2})\/(\d{1,2})$/.exec(last);
  if (fraction) {
    const value = Number(fraction[1]) / Number(fraction[2]);
    if (joined.length === 1) return Number.isFinite(value) ? value : null;
    const base = wholeOf(joined.slice(0, -1));
    return base !== null && value < 1 ? base + value : null;
  }
  const part = parts[last];
  if (part !== undefined) {
    if (joined.length === 1) return part;
    const before = wholeOf(joined.slice(0, -1));
    // `Five quarters` counts quarters; `ten half` is nothing that anybody says.
    return before === null || (last === 'half' && before !== 1) ? null : before * part;
  }
  return wholeOf(joined);
}

/** Takes the count off the end of the words of the length: `ten three` is ten feet, three boards. A pause, written as a comma, parts them for certain. */
function lengthAndCount(said: readonly string[]): { readonly lengthFt: number; readonly count: number } | null {
  const pause = said.indexOf(PAUSE);
  const words = said.filter((word) => word !== PAUSE);
  if (pause > 0 && pause < said.length - 1) {
    const [lengthFt, count] = [sizeOf(words.slice(0, pause)), wholeOf(words.slice(pause))];
    return lengthFt === null || count === null ? null : { lengthFt, count };
  }
  for (let at = words.length; at >= 1; at -= 1) {
    const lengthFt = sizeOf(words.slice(0, at));
    const rest = words.slice(at);
    const count = rest.length === 0 ? 1 : wholeOf(rest);
    if (lengthFt !== null && count !== null) return { lengthFt, count };
  }
  return null;
}

/**
 * Reads boards from what a phone heard: thickness, width, length, and how many when there is more than one. `five quarter by eight by ten,
 * three` is three boards 5/4 × 8 in × 10 ft; so are `5/4 x 8 x 10 times 3` and `five quarters by ate by ten three boards`.
 * @returns null when it is not understood, or not a size that can be: the buttons are always there
 */
export function readSpokenBoards(heard: string): SpokenBoards | null {
  const words = heard.toLowerCase().replace(/(\d)\s*[x×]\s*(?=\d)/g, '$1 x ').replace(/(\d)(?:'|′|ft\b)/g, '$1').replace(/["″]/g, '').replace(/-/g, ' ')
    .replace(/[,;:]|\.(?!\d)/g, ` ${PAUSE} `).split(/\s+/).filter((word) => word !== '' && !fillers.has(word));
  const groups: string[][] = [[]];
  for (const word of words) {
    if (between.has(word)) groups.push([]);
    else groups.at(-1)?.push(word);
  }
  const plain = (group: readonly string[]): string[] => group.filter((word) => word !== PAUSE);
  const [thickness, width, length, times, ...more] = groups.filter((group) => plain(group).length > 0);
  if (!thickness || !width || !length || more.length > 0) return null;
  const [thicknessIn, widthIn] = [sizeOf(plain(thickness)), sizeOf(plain(width))];
  const tail = times ? { lengthFt: sizeOf(plain(length)), count: wholeOf(plain(times)) } : lengthAndCount(length);
  if (thicknessIn === null || widthIn === null || tail === null || tail.lengthFt === null || tail.count === null) return null;
  const { lengthFt, count } = tail;
  const holds = thicknessIn > 0 && thicknessIn <= 24 && widthIn > 0 && widthIn <= 60 && lengthFt >= 1 && lengthFt <= 40 && Number.isInteger(count) && count >= 1 && count <= 500;
  return holds ? { thicknessIn, widthIn, lengthFt, count } : null;
}
