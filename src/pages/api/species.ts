import { speciesList } from '~/domain/timber/species.ts';
import { speciesAnswer } from '~/schemas/species.ts';
import { openEndpoint } from '~/server/http/endpoint.ts';

// The schema leaves out what only our own pages use.
const answer = speciesAnswer.parse(speciesList);

export const GET = openEndpoint({ run: async () => answer });
