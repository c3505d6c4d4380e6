import { formatFraction } from '~/domain/measure.ts';
import { formatCents } from '~/domain/money.ts';
import { formatInstant } from '~/domain/time.ts';
import { thicknessName } from '~/domain/timber/tally.ts';
import { countBoards, tallyRuleOf } from '~/domain/trade/tally-count.ts';
import { TALLY_RULE_NAMES } from '~/domain/trade/rate-card.ts';
import type { Settlement } from '~/domain/trade/settlement.ts';
import { withUnit } from '~/domain/trade/price.ts';
import type { TallyBoardView, TallyView } from '~/schemas/tally-view.ts';
import { openPaper } from './paper.ts';

/** What the tally's sheet says beside its lines. */
export interface TallySheet {
  readonly number: number;
  readonly title: string;
  readonly landownerName: string;
  readonly sawyerName: string;
  readonly timeZone: string;
  readonly view: TallyView;
  readonly settlement: Settlement;
  readonly sha256: string;
  readonly signedAt: Date | null;
  readonly signedName: string | null;
  readonly signedBy: string | null;
  /** The drawn signature as an SVG path on a field of 1000 × 400. */
  readonly signature: string | null;
  /** The sawyer's sheet shows the fee and their pay; the landowner's does not. */
  readonly side: 'landowner' | 'sawyer' | 'moderator';
}

const LEFT = 54;
const RIGHT = 558;
const howSigned: Readonly<Record<string, string>> = { landowner: 'Signed by', deadline: 'Counts as signed: not answered in 72 hours', moderator: 'Decided by a moderator, line by line' };
const figure = (value: number): string => Number(value.toFixed(2)).toLocaleString('en-US');

function sizeOf(view: TallyView, board: TallyBoardView): string {
  const thickness = thicknessName(board.thicknessIn, tallyRuleOf(view.terms) === 'hardwood' ? 'hardwood' : 'softwood');
  const kind = board.kind === 'slab' ? ', slab' : board.kind === 'out-of-size' ? ', out of size, not charged' : '';
  return `${thickness} × ${formatFraction(board.widthIn)}${board.secondWidthIn === null ? '' : ` and ${formatFraction(board.secondWidthIn)}`} in × ${formatFraction(board.lengthFt)} ft${kind}`;
}

/** Lines of equal size from one log told together: what they are and how many. */
function rowsOf(view: TallyView, boards: readonly TallyBoardView[]): (readonly [string, string])[] {
  const counts = new Map<string, number>();
  for (const board of boards) counts.set(sizeOf(view, board), (counts.get(sizeOf(view, board)) ?? 0) + board.count);
  return [...counts].map(([size, count]) => [size, String(count)]);
}

/** The tally by log and by size, the bill and the signature, as a Letter sheet for both sides. */
export function tallyPdf(sheet: TallySheet): Promise<Uint8Array<ArrayBuffer>> {
  const { paper, done } = openPaper(`Tally of booking ${sheet.number}`);
  const row = (label: string, value: string, bold = false): void => {
    if (paper.y > paper.page.height - 90) paper.addPage();
    paper.font(bold ? 'bold' : 'plain').fontSize(9.5);
    const tall = paper.heightOfString(label, { width: 380 });
    const top = paper.y;
    paper.text(label, LEFT, top, { width: 380 });
    paper.text(value, 440, top, { width: RIGHT - 440, align: 'right' });
    paper.moveTo(LEFT, top + tall + 3).lineTo(RIGHT, top + tall + 3).lineWidth(bold ? 1 : 0.4).stroke();
    paper.x = LEFT;
    paper.y = top + tall + 7;
  };
  const heading = (text: string): void => {
    if (paper.y > paper.page.height - 130) paper.addPage();
    paper.moveDown(0.8).font('bold').fontSize(12).text(text, LEFT);
    paper.moveDown(0.3);
  };

  const { view, settlement } = sheet;
  const rule = tallyRuleOf(view.terms);
  paper.font('bold').fontSize(20).text(`Tally of booking ${sheet.number}`);
  paper.font('plain').fontSize(10).text(`${sheet.title}. Landowner: ${sheet.landownerName}. Sawyer: ${sheet.sawyerName}.`);
  paper.text(`${figure(countBoards(rule, view.boards))} bf by the ${TALLY_RULE_NAMES[rule]}.`);
  for (const log of [...view.logs.map(({ id, label, speciesName, size }) => ({ id, title: `${label}: ${speciesName}, ${size}` })), { id: null, title: 'Whole job' }]) {
    const boards = view.boards.filter(({ logId }) => logId === log.id);
    const culls = view.culls.filter(({ logId }) => logId === log.id);
    const hits = view.hits.filter(({ logId }) => logId === log.id);
    if (boards.length + culls.length + hits.length === 0) continue;
    heading(log.title);
    for (const [size, count] of rowsOf(view, boards)) row(size, count);
    for (const cull of culls) row(`Cull log: ${cull.reason}`, cull.openingMinutes ? `${cull.openingMinutes} min` : '');
    for (const hit of hits) row(`Metal hit: blade ${hit.outcome}`, '1');
  }
  heading('What it comes to');
  for (const line of settlement.lines) row(`${line.label}: ${withUnit(figure(line.quantity), line.quantity, line.unit)} at ${formatCents(line.unitCents)}`, formatCents(line.amountCents));
  row('The work comes to', formatCents(settlement.costCents), true);
  row('Held', formatCents(view.heldCents));
  if (settlement.overHold) row('More than is held by', formatCents(settlement.overHold.lackingCents));
  else row("Back to the landowner's card", formatCents(settlement.refundCents));
  if (sheet.side !== 'landowner') {
    row("Skidway's fee, from the sawyer's pay", formatCents(settlement.feeCents));
    row('To the sawyer', formatCents(settlement.transferCents), true);
  }
  signatureOn(paper, sheet, heading);
  paper.end();
  return done;
}

function signatureOn(paper: PDFKit.PDFDocument, sheet: TallySheet, heading: (text: string) => void): void {
  heading(sheet.signedAt ? 'Signature' : 'Not signed yet');
  paper.font('plain').fontSize(10);
  if (sheet.signedAt) {
    paper.text(`${howSigned[sheet.signedBy ?? ''] ?? ''}${sheet.signedName ? ` ${sheet.signedName}` : ''}, ${formatInstant(sheet.signedAt, sheet.timeZone)}.`, LEFT);
    if (sheet.signature) {
      if (paper.y > paper.page.height - 160) paper.addPage();
      const top = paper.y + 6;
      paper.save().translate(LEFT, top).scale(0.2).path(sheet.signature).lineWidth(8).lineCap('round').lineJoin('round').stroke().restore();
      paper.y = top + 86;
    }
  }
  paper.fontSize(8).text(`Content ${sheet.sha256}. The signature is bound to this content; any later change gives another figure.`, LEFT, paper.y, { width: RIGHT - LEFT });
}
