import type { ReportReason } from '~/schemas/account-forms.ts';
import { inTransaction, refusedBy } from '../db.ts';
import { conflict, forbidden, notFound, signedOut } from '../errors.ts';
import { countTry } from '../http/limits.ts';
import { Report } from '../models/account.ts';
import { reportable, visitorsReport, type ReportableThing } from '../queries/report-page.ts';
import { record } from '../transition.ts';
import { system, type Viewer } from '../viewer.ts';

export interface Reporting {
  readonly thing: ReportableThing;
  readonly thingId: string;
  readonly reason: ReportReason;
  readonly note: string;
  /** Where a visitor who is not signed in comes from: their tries are counted by it. */
  readonly clientAddress: string;
}

/**
 * Reports a listing or a photograph of one (anyone), an account, a review or a message (signed in; a message only by its reader), as
 * far as the reporter sees it. A suspended account may not.
 * @throws Refusal `notFound` for what the reporter cannot see, `conflict` while an earlier report of theirs waits, `tooMany`
 */
export async function reportThing(by: Viewer | null, input: Reporting, at: Date): Promise<void> {
  if (!by && !visitorsReport.includes(input.thing)) throw signedOut();
  if (by && !by.active) throw forbidden('This account is suspended.');
  const seen = await reportable(by, input.thing, input.thingId);
  if (!seen) throw notFound(input.thing);
  await countTry('report', by?.id ?? `visitor ${input.clientAddress}`);
  try {
    await inTransaction(async () => {
      const report = await Report.create({ reporterId: by?.id ?? null, thing: input.thing, thingId: input.thingId, reason: input.reason, note: input.note, createdAt: at });
      await record(by ?? system('visitor'), 'report', 'report', report.id, at, { data: { thing: input.thing, thingId: input.thingId, reason: input.reason } });
    });
  } catch (error) {
    if (refusedBy(error, 'report_once')) throw conflict('You have reported this already. A moderator will look at it.');
    throw error;
  }
}
