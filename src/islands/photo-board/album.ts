import { mostPhotos, mostWorkPhotos } from '~/domain/photo.ts';

/** What a board of photographs is of: where it asks, how much it holds, and how it words that. */
export interface Album {
  readonly listAt: string;
  readonly beginAt: string;
  readonly orderAt: string;
  /** Said with every request: what the photographs belong to. */
  readonly of: Readonly<Record<string, string>>;
  readonly most: number;
  readonly full: string;
  readonly empty: string;
  readonly order: string;
}

/** The photographs of a listing, or those of the reader's own work when it is null. */
export const albumOf = (listingId: string | null): Album =>
  listingId === null
    ? {
        listAt: '/api/work-photos', beginAt: '/api/work-photos', orderAt: '/api/work-photos/order', of: {}, most: mostWorkPhotos,
        full: `your page has at most ${mostWorkPhotos} photographs`,
        empty: 'No photographs yet. Show the mill set up on a landing, a log on the bed, a stack of what came off it with a tape beside the widest board, and something that was built of it.',
        order: 'The first ones are seen first on your page.',
      }
    : {
        listAt: `/api/photos?listingId=${listingId}`, beginAt: '/api/photos', orderAt: '/api/photos/order', of: { listingId }, most: mostPhotos,
        full: `a listing has at most ${mostPhotos} photographs`,
        empty: 'No photographs yet. Logs with pictures of both ends get closer bids.',
        order: 'The first one is shown in lists.',
      };
