import { accountEndpoint } from '~/server/http/endpoint.ts';
import { dayPack } from '~/server/queries/day-pack.ts';

/** What a phone keeps of the bookings to come, for its account only. */
export const GET = accountEndpoint({ run: ({ viewer, at }) => dayPack(viewer, at) });
