import type { z } from 'zod';
import { cutListAnswer, cutListRequest } from './cut-list.ts';
import { beginDayPhotoAnswer, beginDayPhotoSchema } from './day-photo.ts';
import { dryingAnswer, dryingRequest } from './drying.ts';
import { estimateAnswer, estimateRequest } from './estimate.ts';
import { draftAnswer, draftRequest } from './listing-draft.ts';
import { listingsAnswer, listingsQuery } from './listings.ts';
import { placeAnswer, placeQuery } from './place.ts';
import { beginPhotoAnswerSchema, beginPhotoSchema, beginWorkPhotoSchema, changePhotoSchema, listPhotosSchema, orderPhotosSchema, orderWorkPhotosSchema, photosAnswerSchema, photoViewSchema } from './photo.ts';
import { tileQuery } from './tiles.ts';
import { speciesAnswer } from './species.ts';
import { quotingPracticeAnswer, quotingPracticeQuery } from './quoting-practice.ts';
import { sawPlanAnswer, sawPlanRequest } from './saw-plan.ts';
import { tallyAnswer, tallyRequest } from './tally.ts';
import { tallyEntriesBody } from './tally-entries.ts';
import { treeVolumeAnswer, treeVolumeRequest } from './tree-volume.ts';

/** One public or signed-in endpoint as `GET /api/openapi.json` describes it. */
export interface Operation {
  readonly method: 'get' | 'post' | 'put' | 'patch' | 'delete';
  /** As OpenAPI writes it: `/api/photos/{id}`. */
  readonly path: string;
  readonly summary: string;
  /** Whether a session is needed. */
  readonly signedIn?: boolean;
  readonly query?: z.ZodType;
  readonly body?: z.ZodType;
  /** The answer's schema; absent for one without a body. */
  readonly answer?: z.ZodType;
  readonly answerType?: string;
}

/** Every endpoint. A check compares this list with the files of `pages/api`. */
export const operations: readonly Operation[] = [
  { method: 'get', path: '/api/health', summary: 'Whether the parts this server needs answer' },
  { method: 'get', path: '/api/health/live', summary: 'Whether the process lives' },
  { method: 'get', path: '/api/openapi.json', summary: 'This description' },
  { method: 'get', path: '/api/species', summary: 'The species, with density, bark and shrinkage', answer: speciesAnswer },
  { method: 'post', path: '/api/estimate', summary: 'Scale, cubic content and green weight of logs', body: estimateRequest, answer: estimateAnswer },
  { method: 'post', path: '/api/tally', summary: 'Board feet of boards by the hardwood or the softwood rule', body: tallyRequest, answer: tallyAnswer },
  { method: 'post', path: '/api/tree-volume', summary: 'Board feet in a standing tree, form class 78', body: treeVolumeRequest, answer: treeVolumeAnswer },
  { method: 'post', path: '/api/drying', summary: 'What a board comes to in the air it dries in', body: dryingRequest, answer: dryingAnswer },
  { method: 'post', path: '/api/saw-plan', summary: 'The best boards of a log on a mill, with an upper bound that no plan of the pattern passes (for a cant: wherever its faces lie), and the order of cuts', body: sawPlanRequest, answer: sawPlanAnswer },
  { method: 'post', path: '/api/cut-list', summary: 'A plan for each log that together cover a cut list: least board feet short first, then least log volume used, with a bound for every plan of the patterns', body: cutListRequest, answer: cutListAnswer },
  { method: 'get', path: '/api/listings', summary: 'Open listings by distance, a page at a time', query: listingsQuery, answer: listingsAnswer },
  { method: 'get', path: '/api/tiles/{z}/{x}/{y}', summary: 'Open listings as a vector tile (layer `logs`): points of the coarse grid, gathered at low zooms, with how many listings each stands for', query: tileQuery },
  { method: 'get', path: '/api/photos', summary: "A listing's photographs for its owner, unfinished and refused ones included", signedIn: true, query: listPhotosSchema, answer: photosAnswerSchema },
  { method: 'post', path: '/api/photos', summary: 'Begin an upload: a photograph and the form to send its file with', signedIn: true, body: beginPhotoSchema, answer: beginPhotoAnswerSchema },
  { method: 'put', path: '/api/photos/order', summary: "Put a listing's photographs in order", signedIn: true, body: orderPhotosSchema, answer: photosAnswerSchema },
  { method: 'patch', path: '/api/photos/{id}', summary: "Change a photograph's caption or which log it shows", signedIn: true, body: changePhotoSchema, answer: photoViewSchema },
  { method: 'delete', path: '/api/photos/{id}', summary: "Take a photograph off its listing, its day or the sawyer's page", signedIn: true },
  { method: 'post', path: '/api/photos/{id}/arrived', summary: 'Say that the file is in storage; it is checked next', signedIn: true, answer: photoViewSchema },
  { method: 'get', path: '/api/work-photos', summary: "A sawyer's photographs of their own work, unfinished and refused ones included", signedIn: true, answer: photosAnswerSchema },
  { method: 'post', path: '/api/work-photos', summary: "Begin the upload of a photograph of one's own work for one's own page", signedIn: true, body: beginWorkPhotoSchema, answer: beginPhotoAnswerSchema },
  { method: 'put', path: '/api/work-photos/order', summary: "Put the photographs of one's own work in order", signedIn: true, body: orderWorkPhotosSchema, answer: photosAnswerSchema },
  { method: 'post', path: '/api/webhooks/payments', summary: "The payment provider's signed messages" },
  { method: 'get', path: '/api/day', summary: 'The bookings to come with all that a phone keeps of them for the milling day', signedIn: true },
  { method: 'get', path: '/api/bookings/{number}/tally', summary: 'The tally of a booking, for its two sides', signedIn: true },
  { method: 'put', path: '/api/bookings/{number}/tally', summary: 'Enter boards, hits, cull logs, hours; each once by its id', signedIn: true, body: tallyEntriesBody },
  { method: 'get', path: '/api/bookings/{number}/cut-sheet', summary: 'The cut sheet of a booking with its drawing, for its two sides', signedIn: true },
  { method: 'post', path: '/api/bookings/{number}/photos', summary: 'Begin the upload of a photograph of the milling day, under an id of its own', signedIn: true, body: beginDayPhotoSchema, answer: beginDayPhotoAnswer },
  { method: 'get', path: '/api/places', summary: 'What a ZIP code is called and where it lies', query: placeQuery, answer: placeAnswer },
  { method: 'get', path: '/api/quoting-practice', summary: 'What the sawyers near a ZIP code charge by: counts, and none where they are few', query: quotingPracticeQuery, answer: quotingPracticeAnswer },
  { method: 'post', path: '/api/listings/draft', summary: 'Keep a draft of a listing as it was typed', signedIn: true, body: draftRequest, answer: draftAnswer },
];
