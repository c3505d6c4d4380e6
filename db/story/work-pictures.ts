import { frame, grain, grass, HEIGHT, numbersFrom, tintOf, toJpeg, WIDTH, type Tint } from './pictures.ts';

// What sawyers of the demo show of their work, drawn by numbers like every other picture of it.

export type WorkPicture = 'stack' | 'mill' | 'slab';

type Random = () => number;

const wood = (random: Random, { heart, sap }: Tint): string => (random() > 0.25 ? heart : sap);

/** A sky, a row of trees and grass from `ground` down. */
function outdoors(random: Random, ground: number): string {
  const trees = Array.from({ length: 16 }, (_, index) => {
    const [x, height] = [(index + random()) * (WIDTH / 16), 120 + random() * 150];
    return `<path d="M${x - 55} ${ground}Q${x} ${ground - height * 1.9} ${x + 55} ${ground}Z" fill="${random() > 0.4 ? '#4d5b36' : '#5f6b3f'}"/>`;
  }).join('');
  return `<rect width="100%" height="100%" fill="#c9d6dc"/>${trees}<rect y="${ground}" width="100%" height="${HEIGHT - ground}" fill="#75803f"/>${grass(random, ground + 20)}`;
}

/** The end of a board: its rings are arcs round a pith below or above it. */
function boardEnd(x: number, y: number, width: number, thick: number, fill: string, random: Random, name: string): string {
  const [pithX, pithY] = [x + width * (0.2 + random() * 0.6), y + (random() > 0.5 ? 1 : -1) * (90 + random() * 160)];
  const rings = Array.from({ length: 26 }, (_, index) => `<circle cx="${pithX.toFixed(0)}" cy="${pithY.toFixed(0)}" r="${30 + index * 11}" fill="none" stroke="#3a2412" stroke-opacity="0.28" stroke-width="2"/>`).join('');
  return `<clipPath id="${name}"><rect x="${x.toFixed(1)}" y="${y}" width="${width.toFixed(1)}" height="${thick}"/></clipPath><rect x="${x.toFixed(1)}" y="${y}" width="${width.toFixed(1)}" height="${thick}" fill="${fill}" stroke="#2d261f" stroke-opacity="0.55" stroke-width="2"/><g clip-path="url(#${name})">${rings}</g>`;
}

/** Boards on stickers, seen from their ends and a little from the side, under sheets of roofing. */
function stack(tint: Tint, random: Random): string {
  const [left, right, back, rise] = [150, 860, 250, 120];
  const [thick, gap, courses] = [44, 20, 8];
  const bottom = HEIGHT * 0.84;
  const top = bottom - courses * (thick + gap);
  const parts: string[] = [];
  for (const x of [left + 10, (left + right) / 2 - 45, right - 100]) parts.push(`<rect x="${x}" y="${bottom}" width="90" height="62" fill="#8d8a83"/><rect x="${x}" y="${bottom}" width="90" height="10" fill="#a9a69e"/>`);
  parts.push(`<path d="M${right} ${bottom}l${back} ${-rise}v62l${-back} ${rise}Z" fill="#4b4338" fill-opacity="0.6"/>`);
  for (let course = 0; course < courses; course += 1) {
    const y = bottom - (course + 1) * (thick + gap) + gap;
    const fill = wood(random, tint);
    // The side that goes back, then the ends, so that the ends cover the corner.
    parts.push(`<path d="M${right} ${y}l${back} ${-rise}v${thick}l${-back} ${rise}Z" fill="${fill}"/><path d="M${right} ${y}l${back} ${-rise}v${thick}l${-back} ${rise}Z" fill="#2a1a0e" fill-opacity="0.3"/>`);
    parts.push(`<path d="M${right} ${y + thick * 0.4}l${back} ${-rise}" stroke="#2a1a0e" stroke-opacity="0.25" stroke-width="3"/>`);
    for (let x = left, board = 0; x < right - 60; board += 1) {
      const rest = right - x;
      const width = rest < 190 ? rest : Math.min(rest - 70, 90 + random() * 110);
      parts.push(boardEnd(x, y, width - 5, thick, wood(random, tint), random, `b${course}-${board}`));
      x += width;
    }
    if (course === 0) continue;
    const sticker = y + thick;
    parts.push(`<rect x="${left - 14}" y="${sticker}" width="${right - left + 14}" height="${gap}" fill="#cdb78d"/><rect x="${left - 14}" y="${sticker + gap * 0.6}" width="${right - left + 14}" height="${gap * 0.4}" fill="#8f7c58"/>`);
    for (const along of [0.33, 0.66, 0.98]) parts.push(`<rect x="${right + back * along - 12}" y="${sticker - rise * along}" width="22" height="${gap}" fill="#cdb78d"/>`);
  }
  parts.push(`<path d="M${left - 40} ${top - 2}H${right + 24}l${back + 30} ${-rise - 14}H${left + back - 60}Z" fill="#9aa3a3"/>`);
  for (let ridge = 0; ridge < 18; ridge += 1) parts.push(`<path d="M${left - 40 + ridge * 45} ${top - 2}l${back + 20} ${-rise - 14}" stroke="#6d7676" stroke-width="4"/>`);
  parts.push(`<rect x="${left - 40}" y="${top - 4}" width="${right - left + 64}" height="14" fill="#7c8585"/>`);
  return parts.join('');
}

/** A band mill over a cant, from the side of its bed. */
function mill(tint: Tint, random: Random): string {
  const [bed, logTop, cut] = [HEIGHT * 0.8, HEIGHT * 0.535, HEIGHT * 0.575];
  const bolts = Array.from({ length: 7 }, (_, index) => `<rect x="${110 + index * 170}" y="${bed + 44}" width="46" height="72" fill="#5b5f5c"/>`).join('');
  const bark = Array.from({ length: 46 }, () => {
    const [x, y] = [140 + random() * 820, cut + 40 + random() * (bed - cut - 60)];
    return `<path d="M${x.toFixed(0)} ${y.toFixed(0)}q${(30 + random() * 50).toFixed(0)} ${(-8 + random() * 16).toFixed(0)} ${(70 + random() * 90).toFixed(0)} 0" fill="none" stroke="#1f1913" stroke-opacity="0.45" stroke-width="${(3 + random() * 4).toFixed(1)}"/>`;
  }).join('');
  const facing = Array.from({ length: 9 }, (_, index) => `<path d="M130 ${logTop + 6 + index * 3.6}q480 ${(random() - 0.5) * 22} 1010 0" fill="none" stroke="#3a2412" stroke-opacity="0.22" stroke-width="2"/>`).join('');
  const wheel = (x: number): string => `<circle cx="${x}" cy="${cut - 96}" r="112" fill="#a3471f"/><circle cx="${x}" cy="${cut - 96}" r="112" fill="none" stroke="#6e2d12" stroke-width="10"/><circle cx="${x}" cy="${cut - 96}" r="20" fill="#3b3b39"/>`;
  const head = `<rect x="520" y="150" width="30" height="${bed - 150}" fill="#4b4f4d"/><rect x="850" y="150" width="30" height="${bed - 150}" fill="#4b4f4d"/><rect x="500" y="140" width="400" height="34" fill="#3b3e3c"/><rect x="560" y="${cut - 208}" width="280" height="120" fill="#a3471f"/>${wheel(560)}${wheel(840)}<rect x="610" y="${cut - 300}" width="170" height="96" rx="10" fill="#33363a"/><rect x="640" y="${cut - 324}" width="60" height="28" rx="6" fill="#55595d"/><rect x="560" y="${cut - 4}" width="280" height="7" fill="#e4e6e2"/>`;
  const dust = Array.from({ length: 130 }, () => `<circle cx="${(890 + random() * 170).toFixed(0)}" cy="${(cut + random() * (bed + 90 - cut)).toFixed(0)}" r="${(1.5 + random() * 3).toFixed(1)}" fill="#e3c891" fill-opacity="0.8"/>`).join('');
  return `${bolts}<rect x="60" y="${bed}" width="1160" height="46" fill="#6b706c"/><rect x="60" y="${bed}" width="1160" height="10" fill="#8b908c"/>
    <path d="M130 ${logTop + 34}H1140q26 ${(bed - logTop) / 2} 0 ${bed - logTop - 34}H130q-26 ${-(bed - logTop) / 2} 0 ${-(bed - logTop - 34)}Z" fill="${tint.bark}"/>${bark}
    <path d="M130 ${logTop + 38}L190 ${logTop}H1086L1140 ${logTop + 38}Z" fill="${tint.heart}"/>${facing}<path d="M130 ${logTop + 38}H1140" stroke="${tint.sap}" stroke-width="9"/>${head}${dust}`;
}

/** A live-edge slab on two sawhorses, a tape across it. */
function slab(tint: Tint, random: Random): string {
  const [x0, x1, middle] = [90, 1190, HEIGHT * 0.52];
  const edge = (side: number, inset: number): string[] =>
    Array.from({ length: 45 }, (_, index) => {
      const along = index / 44;
      const half = 205 + 34 * Math.sin(along * 7 + side) + 18 * Math.sin(along * 17 + side * 2) + 70 * Math.max(0, along - 0.72) * 3 - inset;
      return `${(x0 + (x1 - x0) * along).toFixed(0)} ${(middle + side * half).toFixed(0)}`;
    });
  const outline = (inset: number): string => `M${edge(-1, inset).join('L')}L${edge(1, inset).reverse().join('L')}Z`;
  const lines = Array.from({ length: 38 }, (_, index) => {
    const offset = ((index + random() * 0.6) / 38 - 0.5) * 2;
    const points = Array.from({ length: 45 }, (_unused, step) => {
      const along = step / 44;
      const half = 175 + 30 * Math.sin(along * 7 + (offset < 0 ? -1 : 1)) + 60 * Math.max(0, along - 0.72) * 3;
      return `${(x0 + (x1 - x0) * along).toFixed(0)} ${(middle + offset * half * (1 - 0.16 * Math.sin(along * 3.1))).toFixed(0)}`;
    });
    return `<path d="M${points.join('L')}" fill="none" stroke="#2a160a" stroke-opacity="${(0.14 + random() * 0.24).toFixed(2)}" stroke-width="${(1.5 + random() * 3).toFixed(1)}"/>`;
  }).join('');
  const horse = (x: number): string => `<path d="M${x} ${middle - 60}L${x - 46} ${HEIGHT * 0.95}h30L${x + 22} ${middle}ZM${x + 34} ${middle - 60}l46 ${HEIGHT * 0.95 - middle + 60}h-30L${x + 12} ${middle}Z" fill="#a98c5d"/>`;
  const marks = Array.from({ length: 21 }, (_, index) => `<path d="M-15 ${-230 + index * 23}h${index % 4 === 0 ? 22 : 12}" stroke="#222" stroke-width="3"/>`).join('');
  return `${horse(300)}${horse(950)}<path d="${outline(0)}" transform="translate(0 20)" fill="#1f1913" fill-opacity="0.45"/><path d="${outline(0)}" fill="${tint.bark}"/><path d="${outline(14)}" fill="${tint.sap}"/><path d="${outline(48)}" fill="${tint.heart}"/>${lines}
    <g transform="translate(520 ${middle})"><rect x="-17" y="-246" width="34" height="492" rx="3" fill="#e8c23a"/>${marks}</g>`;
}

const drawings = { stack, mill, slab } as const satisfies Readonly<Record<WorkPicture, (tint: Tint, random: Random) => string>>;

/** A picture of a sawyer's work. JPEG, 960 × 720. @param species whose colours the wood has */
export function drawWork(what: WorkPicture, species: string, seed: number): Promise<Buffer> {
  const random = numbersFrom(seed);
  return toJpeg(frame(`${outdoors(random, HEIGHT * 0.4)}${drawings[what](tintOf(species), random)}${grass(random, HEIGHT * 0.9)}${grain(seed)}`));
}
