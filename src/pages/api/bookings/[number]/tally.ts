import { tallyEntriesBody } from '~/schemas/tally-entries.ts';
import { takeEntries } from '~/server/commands/take-entries.ts';
import { Refusal } from '~/server/errors.ts';
import { accountEndpoint } from '~/server/http/endpoint.ts';
import { tallyPage } from '~/server/queries/tally-page.ts';

/** The tally as it stands. */
export const GET = accountEndpoint({ run: async ({ viewer, params }) => (await tallyPage(viewer, Number(params['number']))).view });

/** Takes entries, each once by its id, and answers with the tally as it then stands. */
export const PUT = accountEndpoint({
  body: tallyEntriesBody,
  async run({ viewer, params, body, at }) {
    const booking = Number(params['number']);
    if (body.account !== undefined && body.account !== viewer.id) throw new Refusal('signedOut', 'These entries were made by another account. Sign in as the one that made them.');
    await takeEntries(viewer, { booking, entries: body.entries }, at);
    return (await tallyPage(viewer, booking)).view;
  },
});
