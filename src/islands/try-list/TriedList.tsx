import type { ReactElement } from 'react';
import { pieceSize } from '~/domain/listing/piece-words.ts';
import type { ListingPlan } from '~/domain/sawing/listing-plan.ts';
import { largeEnd } from '~/domain/sawing/log-shape.ts';
import { pieceKindWords } from '~/domain/sawing/piece-kind.ts';
import type { SawnPiece } from '~/domain/sawing/sawn-piece.ts';
import { LogEnd } from '~/islands/drawing/LogEnd.tsx';
import { countOf, wholeNumber } from '~/islands/logs/words.ts';

interface TriedListProps {
  readonly plan: ListingPlan;
  readonly pieces: readonly SawnPiece[];
  /** The number of each log by its id. */
  readonly positions: ReadonlyMap<string, number>;
}

const MOST_DRAWN = 40;

/** What a list comes to: each piece made or short, and the logs it takes with their boards. */
export function TriedList({ plan, pieces, positions }: TriedListProps): ReactElement {
  const covered = new Map(plan.list?.covered.map((each) => [each.id, each]));
  const mends = new Map(plan.shortfalls.map((each) => [each.id, each.mend]));
  const short = plan.list?.boardFeetShort ?? 0;
  const used = plan.logs.filter(({ use }) => use === 'cut-list');
  const frameIn = Math.max(1, ...used.map(({ core }) => (core ? largeEnd(core) * 1.16 : 0)));
  return (
    <div>
      <h3>{short === 0 ? `These logs make the whole list, from ${countOf(used.length, 'log')}` : `${wholeNumber(Math.max(1, short))} bf short`}</h3>
      <table className="ruled fold mt-2">
        <caption className="sr-only">Each piece of your list, made or short</caption>
        <thead><tr><th scope="col">Piece</th><th scope="col" className="num">Wanted</th><th scope="col" className="num">Made</th><th scope="col" className="num">Short</th><th scope="col">What would mend it</th></tr></thead>
        <tbody>
          {pieces.map((piece) => {
            const { made, short: missing } = covered.get(piece.id) ?? { made: 0, short: piece.count };
            return (
              <tr key={piece.id}>
                <th scope="row">{piece.label !== '' && <span className="font-semibold">{piece.label} </span>}<span className="figure whitespace-nowrap">{pieceSize(piece)}</span>{piece.kind !== 'board' && ` ${pieceKindWords[piece.kind]}`}</th>
                <td className="num" data-label="Wanted">{wholeNumber(piece.count)}</td>
                <td className="num" data-label="Made">{wholeNumber(made)}</td>
                <td className={missing > 0 ? 'num font-bold text-heartwood' : 'num'} data-label="Short">{wholeNumber(missing)}</td>
                <td>{(mends.get(piece.id) ?? []).join(' ')}</td>
              </tr>
            );
          })}
        </tbody>
      </table>
      {used.length > 0 && (
        <ul className="mt-5 flex flex-wrap gap-6">
          {used.slice(0, MOST_DRAWN).map(({ id, core, plan: { boards } }) => core && (
            <li key={id} className="text-center text-sm">
              <LogEnd smallEndIn={largeEnd(core)} heartDefectIn={core.heartDefectIn} seed={id} boards={boards} ringIn={core.smallEndIn} frameIn={frameIn} sizePx={140} />
              Log {positions.get(id)}, {countOf(boards.length, 'board')}
            </li>
          ))}
        </ul>
      )}
      {used.length > MOST_DRAWN && <p className="mt-2 text-sm text-ink-soft">and {used.length - MOST_DRAWN} more logs.</p>}
      {plan.list?.provenBest === true && short > 0 && <p className="mt-2 text-sm text-ink-soft">No other plan of these logs on this mill is shorter.</p>}
    </div>
  );
}
