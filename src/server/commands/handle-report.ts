import { reportHandled } from '~/emails/desk-letters.ts';
import { authorize } from '../authorize.ts';
import { readerOf } from '../bidders.ts';
import { inTransaction } from '../db.ts';
import { conflict, notFound } from '../errors.ts';
import { enqueue } from '../jobs/queue.ts';
import { Report } from '../models/account.ts';
import { record } from '../transition.ts';
import { baseRoles, type Viewer } from '../viewer.ts';

/**
 * Closes a report with what came of it, in words that stay at the desk. The reporter is told that it was looked at.
 * @throws Refusal `conflict` when another moderator has closed it
 */
export async function handleReport(by: Viewer, input: { readonly report: string; readonly outcome: string }, at: Date): Promise<void> {
  authorize(by, 'report', 'handle', baseRoles(by));
  await inTransaction(async () => {
    const report = await Report.findByPk(input.report, { lock: true });
    if (!report) throw notFound('report');
    if (report.handledAt !== null) throw conflict('Another moderator has closed this report.');
    await report.update({ handledAt: at, handledBy: by.id, outcome: input.outcome });
    await record(by, 'handle', 'report', report.id, at, { data: { outcome: input.outcome } });
    if (report.reporterId !== null) await enqueue('send-mail', reportHandled(await readerOf(report.reporterId), report.createdAt));
  });
}
