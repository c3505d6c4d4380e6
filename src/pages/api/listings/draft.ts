import { draftRequest, type DraftAnswer } from '~/schemas/listing-draft.ts';
import { saveDraft } from '~/server/commands/save-draft.ts';
import { accountEndpoint } from '~/server/http/endpoint.ts';

export const POST = accountEndpoint({
  body: draftRequest,
  async run({ body, viewer, at }): Promise<DraftAnswer> {
    const { number, typedVersion } = await saveDraft(viewer, body, at);
    return { number, typedVersion, savedAt: at.toISOString() };
  },
});
