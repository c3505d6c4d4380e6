import type { NoShowState } from '~/domain/states/no-show.ts';
import { filled, id, instant, nullable, ref, table, text, type Row } from './table.ts';

export const NoShow = table('no_show', {
  id: id(),
  bookingId: ref(),
  absent: text<'landowner' | 'sawyer'>(),
  startsAt: instant(),
  says: text(),
  status: filled(text<NoShowState>()),
  reportedAt: instant(),
  answerBy: instant(),
  answer: nullable(text()),
  answeredAt: nullable(instant()),
  decidedBy: nullable(ref()),
  because: nullable(text()),
  decidedAt: nullable(instant()),
});
export type NoShow = Row<typeof NoShow>;
