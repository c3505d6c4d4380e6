/** Small things people build from their own logs, as pieces for a cut list. Sizes are the house's own simple designs. */

export type ProjectKind = 'raised-bed' | 'bench' | 'shed-frame' | 'deck' | 'shelves' | 'table-top' | 'stall-boards';

export interface ProjectField {
  readonly name: string;
  readonly label: string;
  readonly unit: 'ft' | 'in' | '';
  readonly least: number;
  readonly most: number;
  readonly usual: number;
}

export interface ProjectPiece {
  readonly label: string;
  readonly thicknessIn: number;
  readonly widthIn: number;
  readonly lengthFt: number;
  readonly count: number;
  readonly sizing: 'full-sawn' | 'store-size';
}

export interface Project {
  readonly kind: ProjectKind;
  readonly name: string;
  readonly fields: readonly ProjectField[];
  /** True where it carries people or a roof. */
  readonly loadBearing: boolean;
  readonly caution?: string;
  readonly pieces: (size: Readonly<Record<string, number>>) => readonly Omit<ProjectPiece, 'sizing'>[];
}

/** Written under every project that carries people or a roof. */
export const LOAD_CAUTION = 'What carries people, snow or a roof follows local code and a licensed professional: these counts are no design.';

const field = (name: string, label: string, unit: ProjectField['unit'], least: number, most: number, usual: number): ProjectField => ({ name, label, unit, least, most, usual });
const piece = (label: string, thicknessIn: number, widthIn: number, lengthFt: number, count: number): Omit<ProjectPiece, 'sizing'> => ({ label, thicknessIn, widthIn, lengthFt, count });
/** Boards of a width that cover a run. */
const boardsOver = (runIn: number, widthIn: number): number => Math.max(1, Math.ceil(runIn / widthIn - 1e-9));
/** Members at a spacing along a run, one at each end. */
const membersAlong = (runFt: number, spacingIn: number): number => Math.ceil((runFt * 12) / spacingIn - 1e-9) + 1;

export const projects: readonly Project[] = [
  {
    kind: 'raised-bed', name: 'Raised bed', loadBearing: false,
    fields: [field('lengthFt', 'Length', 'ft', 2, 16, 8), field('widthFt', 'Width', 'ft', 2, 6, 4), field('heightIn', 'Height', 'in', 6, 36, 16)],
    pieces: ({ lengthFt = 8, widthFt = 4, heightIn = 16 }) => [
      piece('Bed, long sides', 2, 8, lengthFt, 2 * boardsOver(heightIn, 8)),
      piece('Bed, ends', 2, 8, widthFt, 2 * boardsOver(heightIn, 8)),
      piece('Bed, corner posts', 4, 4, Math.max(1, Math.ceil(heightIn / 6) / 2), 4),
    ],
  },
  {
    kind: 'bench', name: 'Bench', loadBearing: false,
    fields: [field('lengthFt', 'Length', 'ft', 2, 10, 5), field('deepIn', 'Depth of the seat', 'in', 10, 24, 16)],
    pieces: ({ lengthFt = 5, deepIn = 16 }) => [
      piece('Bench, seat', 2, 8, lengthFt, boardsOver(deepIn, 8)),
      piece('Bench, legs', 4, 4, 1.5, lengthFt > 6 ? 6 : 4),
      piece('Bench, rails under the seat', 2, 4, lengthFt, 2),
      piece('Bench, rails across', 2, 4, Math.ceil(deepIn / 6) / 2, lengthFt > 6 ? 3 : 2),
    ],
  },
  {
    kind: 'shed-frame', name: 'Shed frame', loadBearing: true,
    fields: [field('lengthFt', 'Length', 'ft', 4, 16, 10), field('widthFt', 'Width', 'ft', 4, 12, 8), field('heightFt', 'Wall height', 'ft', 6, 10, 8)],
    pieces: ({ lengthFt = 10, widthFt = 8, heightFt = 8 }) => [
      piece('Shed, studs', 2, 4, heightFt, 2 * membersAlong(lengthFt, 24) + 2 * membersAlong(widthFt, 24)),
      piece('Shed, plates along', 2, 4, lengthFt, 6),
      piece('Shed, plates across', 2, 4, widthFt, 6),
      piece('Shed, floor joists', 2, 6, widthFt, membersAlong(lengthFt, 16)),
      piece('Shed, skids', 4, 6, lengthFt, 3),
      piece('Shed, rafters', 2, 6, Math.ceil(widthFt * 0.62 + 1), 2 * membersAlong(lengthFt, 24)),
    ],
  },
  {
    kind: 'deck', name: 'Deck', loadBearing: true,
    fields: [field('lengthFt', 'Length along the boards', 'ft', 4, 16, 12), field('widthFt', 'Width', 'ft', 4, 16, 8)],
    pieces: ({ lengthFt = 12, widthFt = 8 }) => [
      piece('Deck, boards', 1.25, 6, lengthFt, boardsOver(widthFt * 12, 6)),
      piece('Deck, joists', 2, 8, widthFt, membersAlong(lengthFt, 16)),
      piece('Deck, rims', 2, 8, lengthFt, 2),
      piece('Deck, beam, two plies', 2, 10, lengthFt, 4),
      piece('Deck, posts', 6, 6, 4, 2 * membersAlong(lengthFt, 72)),
    ],
  },
  {
    kind: 'shelves', name: 'Shelves', loadBearing: false,
    fields: [field('lengthFt', 'Width', 'ft', 1, 8, 3), field('deepIn', 'Depth', 'in', 6, 24, 12), field('heightFt', 'Height', 'ft', 2, 8, 6), field('shelves', 'Shelves', '', 2, 10, 5)],
    pieces: ({ lengthFt = 3, deepIn = 12, heightFt = 6, shelves = 5 }) => [
      piece('Shelves, boards', 1, 6, lengthFt, shelves * boardsOver(deepIn, 6)),
      piece('Shelves, sides', 1, 6, heightFt, 2 * boardsOver(deepIn, 6)),
      piece('Shelves, cleats', 1, 2, Math.ceil(deepIn / 6) / 2, 2 * shelves),
    ],
  },
  {
    kind: 'table-top', name: 'Table top', loadBearing: false,
    fields: [field('lengthFt', 'Length', 'ft', 2, 12, 6), field('widthIn', 'Width', 'in', 18, 48, 36)],
    pieces: ({ lengthFt = 6, widthIn = 36 }) => [piece('Table top', 1.5, 6, lengthFt + 0.5, boardsOver(widthIn + 1, 5.5))],
  },
  {
    kind: 'stall-boards', name: 'Stall boards', loadBearing: true,
    caution: 'Never walnut for horses: walnut wood and shavings founder them. Ask a vet about cherry too.',
    fields: [field('lengthFt', 'Length of the wall', 'ft', 4, 16, 12), field('heightFt', 'Height', 'ft', 3, 8, 5), field('walls', 'Walls', '', 1, 12, 2)],
    pieces: ({ lengthFt = 12, heightFt = 5, walls = 2 }) => [piece('Stall boards', 2, 8, lengthFt, walls * boardsOver(heightFt * 12, 8))],
  },
];

export const projectOf = (kind: string): Project | undefined => projects.find((each) => each.kind === kind);

/**
 * The pieces of a project for the cut list.
 * @param wastePct more of each size, for defects and cutting out, per cent; counts go up to whole pieces.
 * @param dressed whether the sizes are those of a store, planed and dry.
 */
export function projectPieces(project: Project, size: Readonly<Record<string, number>>, wastePct: number, dressed: boolean): ProjectPiece[] {
  return project.pieces(size).map((each) => ({ ...each, count: Math.ceil(each.count * (1 + wastePct / 100) - 1e-9), sizing: dressed ? 'store-size' : 'full-sawn' }));
}
