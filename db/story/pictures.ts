import sharp from 'sharp';

// Every picture of the demo is drawn here, by numbers: log ends with their rings and checks, and logs lying at a landing.

export const WIDTH = 1280;
export const HEIGHT = 960;

/** Colours of a species: heartwood, sapwood, bark. */
export interface Tint {
  readonly heart: string;
  readonly sap: string;
  readonly bark: string;
}

const TINTS: Readonly<Record<string, Tint>> = {
  'white-oak': { heart: '#b08a5c', sap: '#d9c29b', bark: '#75695b' },
  'northern-red-oak': { heart: '#b97f5e', sap: '#dcc0a0', bark: '#5b5149' },
  'sugar-maple': { heart: '#c9a377', sap: '#ead7b4', bark: '#7b736a' },
  'black-walnut': { heart: '#5b4032', sap: '#cbb592', bark: '#473d35' },
  'black-cherry': { heart: '#a3603f', sap: '#dcbf9a', bark: '#4a403b' },
  'white-ash': { heart: '#c3a479', sap: '#e6d5b0', bark: '#80776a' },
  'american-basswood': { heart: '#dcc59c', sap: '#efe2c4', bark: '#6f675d' },
};
const PINE: Tint = { heart: '#d09a62', sap: '#efd9ab', bark: '#7d5a45' };

export const tintOf = (species: string): Tint => TINTS[species] ?? PINE;

/** Numbers in [0, 1) that are the same for the same seed (mulberry32). */
export function numbersFrom(seed: number): () => number {
  let state = seed >>> 0;
  return () => {
    state = (state + 0x6d2b79f5) >>> 0;
    let mixed = Math.imul(state ^ (state >>> 15), 1 | state);
    mixed = (mixed + Math.imul(mixed ^ (mixed >>> 7), 61 | mixed)) ^ mixed;
    return ((mixed ^ (mixed >>> 14)) >>> 0) / 4_294_967_296;
  };
}

/** A closed, slightly uneven ring round a point, as an SVG path. @param wobble part of the radius it strays by */
function ring(x: number, y: number, radius: number, wobble: number, phase: number): string {
  const points = Array.from({ length: 73 }, (_, index) => {
    const angle = (index / 72) * Math.PI * 2;
    const stray = 1 + wobble * (0.6 * Math.sin(2 * angle + phase) + 0.3 * Math.sin(5 * angle + phase * 2.3) + 0.12 * Math.sin(11 * angle + phase * 0.7));
    return `${(x + Math.cos(angle) * radius * stray).toFixed(1)} ${(y + Math.sin(angle) * radius * stray).toFixed(1)}`;
  });
  return `M${points.join('L')}Z`;
}

/** The end of a log: bark, sapwood, heartwood, rings round an off-centre pith, rays and drying checks. */
function logEnd(x: number, y: number, radius: number, tint: Tint, random: () => number): string {
  const phase = random() * 6;
  const [pithX, pithY] = [x + (random() - 0.5) * radius * 0.14, y + (random() - 0.5) * radius * 0.14];
  const parts = [`<path d="${ring(x, y, radius * 1.06, 0.03, phase)}" fill="${tint.bark}"/>`, `<path d="${ring(x, y, radius, 0.022, phase)}" fill="${tint.sap}"/>`, `<path d="${ring(x, y, radius * 0.8, 0.03, phase)}" fill="${tint.heart}"/>`];
  let at = radius * 0.03;
  while (at < radius * 0.985) {
    const near = 1 - at / radius;
    parts.push(`<path d="${ring(pithX + (x - pithX) * (1 - near), pithY + (y - pithY) * (1 - near), at, 0.022, phase)}" fill="none" stroke="#3a2412" stroke-opacity="${(0.16 + random() * 0.2).toFixed(2)}" stroke-width="${(0.6 + random() * radius * 0.006).toFixed(1)}"/>`);
    at += radius * (0.012 + random() * 0.024);
  }
  for (let index = 0; index < 9; index += 1) {
    const angle = random() * Math.PI * 2;
    const [from, to] = [radius * random() * 0.2, radius * (0.3 + random() * 0.6)];
    const spread = 0.008 + random() * 0.012;
    const point = (reach: number, turn: number): string => `${(pithX + Math.cos(angle + turn) * reach).toFixed(1)} ${(pithY + Math.sin(angle + turn) * reach).toFixed(1)}`;
    parts.push(`<path d="M${point(from, 0)}L${point((from + to) / 2, spread)}L${point(to, 0)}L${point((from + to) / 2, -spread)}Z" fill="#2a1a0e" fill-opacity="0.7"/>`);
  }
  parts.push(`<circle cx="${pithX.toFixed(1)}" cy="${pithY.toFixed(1)}" r="${(radius * 0.012).toFixed(1)}" fill="#2a1a0e"/>`);
  return parts.join('');
}

/** Drawn on a field of 1280 × 960 and rendered at three quarters of it, so that telling the story stays quick. */
export const frame = (inner: string): string => `<svg xmlns="http://www.w3.org/2000/svg" width="960" height="720" viewBox="0 0 ${WIDTH} ${HEIGHT}">${inner}</svg>`;

/** Grain over the whole picture, so that flat colour does not look like enamel. */
export const grain = (seed: number): string => `<filter id="g"><feTurbulence type="fractalNoise" baseFrequency="0.55" numOctaves="2" seed="${seed % 1000}"/><feColorMatrix values="0 0 0 0 0.25  0 0 0 0 0.2  0 0 0 0 0.12  0 0 0 0.5 -0.14"/></filter><rect width="100%" height="100%" filter="url(#g)"/>`;

export const grass = (random: () => number, from: number): string =>
  Array.from({ length: 240 }, () => {
    const [x, y] = [random() * WIDTH, from + random() * (HEIGHT - from)];
    return `<path d="M${x.toFixed(0)} ${y.toFixed(0)}l${((random() - 0.5) * 14).toFixed(1)} ${(-12 - random() * 26).toFixed(1)}" stroke="${random() > 0.5 ? '#6d7b3d' : '#8a8f4c'}" stroke-width="2.4"/>`;
  }).join('');

/** One log end filling the frame, a tape across it. */
function endPicture(species: string, seed: number): string {
  const random = numbersFrom(seed);
  const tint = tintOf(species);
  const radius = 330 + random() * 60;
  const [x, y] = [WIDTH / 2 + (random() - 0.5) * 90, HEIGHT / 2 + (random() - 0.5) * 50];
  const marks = Array.from({ length: 25 }, (_, index) => `<path d="M${(-radius * 1.1 + (index * radius * 2.2) / 24).toFixed(0)} -17v${index % 4 === 0 ? 22 : 12}" stroke="#222" stroke-width="3"/>`).join('');
  const tape = `<g transform="translate(${x.toFixed(0)} ${y.toFixed(0)}) rotate(${(-8 + random() * 16).toFixed(1)})"><rect x="${-radius * 1.18}" y="-17" width="${radius * 2.36}" height="34" rx="3" fill="#e8c23a"/>${marks}</g>`;
  return frame(`<rect width="100%" height="100%" fill="#5f6a3c"/><rect width="100%" height="${HEIGHT * 0.28}" fill="#49523a"/>${grass(random, HEIGHT * 0.3)}${logEnd(x, y, radius, tint, random)}${tape}${grain(seed)}`);
}

/** Logs side by side on two bearers, seen from their ends, with trees and a sky behind. */
function landingPicture(species: readonly string[], seed: number): string {
  const random = numbersFrom(seed);
  const ground = HEIGHT * 0.46;
  const trees = Array.from({ length: 16 }, (_, index) => {
    const [x, height] = [(index + random()) * (WIDTH / 16), 150 + random() * 190];
    return `<path d="M${x - 55} ${ground}Q${x} ${ground - height * 1.9} ${x + 55} ${ground}Z" fill="${random() > 0.4 ? '#4d5b36' : '#5f6b3f'}"/>`;
  }).join('');
  const count = Math.min(6, Math.max(3, species.length));
  const step = (WIDTH - 220) / count;
  const pile = Array.from({ length: count }, (_, index) => {
    const tint = tintOf(species[index % species.length] ?? '');
    const radius = step * (0.34 + random() * 0.12);
    const [x, y] = [150 + step * index + step * 0.4, HEIGHT * 0.78 - radius * 0.55];
    const [backX, backY, back] = [x + 90 - index * 14, ground + 46, radius * 0.55];
    const side = `<path d="M${x - radius} ${y}L${backX - back} ${backY}A${back} ${back} 0 0 1 ${backX + back} ${backY}L${x + radius} ${y}Z" fill="${tint.bark}"/><path d="M${x - radius * 0.4} ${y - radius * 0.6}L${backX - back * 0.3} ${backY - back * 0.5}M${x + radius * 0.5} ${y - radius * 0.5}L${backX + back * 0.5} ${backY - back * 0.3}" stroke="#2d261f" stroke-opacity="0.5" stroke-width="5"/>`;
    return side + logEnd(x, y, radius, tint, random);
  }).join('');
  const bearers = `<rect x="60" y="${HEIGHT * 0.8}" width="${WIDTH - 120}" height="34" rx="14" fill="#6a5a48"/>`;
  return frame(`<rect width="100%" height="100%" fill="#c9d6dc"/><rect width="100%" height="${ground}" fill="#bfd0d8"/>${trees}<rect y="${ground}" width="100%" height="${HEIGHT - ground}" fill="#75803f"/>${grass(random, ground + 20)}${bearers}${pile}${grass(random, HEIGHT * 0.86)}${grain(seed)}`);
}

/** JPEG, 960 × 720, of a drawing made by `frame`. */
export const toJpeg = (svg: string): Promise<Buffer> => sharp(Buffer.from(svg)).jpeg({ quality: 82 }).toBuffer();

/** A picture of the demo: of one log's end, or of the landing. */
export function drawPicture(what: { readonly kind: 'end'; readonly species: string } | { readonly kind: 'landing'; readonly species: readonly string[] }, seed: number): Promise<Buffer> {
  const svg = what.kind === 'end' ? endPicture(what.species, seed) : landingPicture(what.species, seed);
  return toJpeg(svg);
}
