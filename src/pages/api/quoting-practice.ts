import { quotingPracticeQuery } from '~/schemas/quoting-practice.ts';
import { invalid } from '~/server/errors.ts';
import { openEndpoint } from '~/server/http/endpoint.ts';
import { quotingPractice } from '~/server/queries/quoting-practice.ts';
import { pointOfZip } from '~/server/services/places.ts';

export const GET = openEndpoint({
  query: quotingPracticeQuery,
  async run({ query }) {
    const point = pointOfZip(query.zip);
    if (!point) throw invalid([{ path: 'zip', message: 'That ZIP code has no area of its own. Use a neighbouring one.' }]);
    return quotingPractice(point);
  },
});
