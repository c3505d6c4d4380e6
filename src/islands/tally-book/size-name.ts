import { formatFraction } from '~/domain/measure.ts';
import { tallyRuleOf } from '~/domain/trade/tally-count.ts';
import { thicknessName } from '~/domain/timber/tally.ts';
import type { TallyView } from '~/schemas/tally-view.ts';

/** `5/4 × 8 × 10`: hardwood in quarters, dimension lumber in inches, as the bid's rule has it. */
export const sizeName = (view: TallyView, row: { readonly thicknessIn: number; readonly widthIn: number; readonly lengthFt: number }): string =>
  `${thicknessName(row.thicknessIn, tallyRuleOf(view.terms) === 'hardwood' ? 'hardwood' : 'softwood').replace(' in', '')} × ${formatFraction(row.widthIn)} × ${formatFraction(row.lengthFt)}`;
