import { z } from 'zod';
import { fieldOf, list, text, ticked } from './fields.ts';
import { logLengthFt, smallEndIn, speciesCode, between } from './timber-fields.ts';

const inches = (most: number) => z.number().positive('This must be more than zero.').max(most, `At most ${most} in.`);
const logId = z.uuid().nullable();

/** Boards, slabs or boards out of size, of one size, from one log. Ids are made where they are typed; a repeated send adds nothing. */
const board = z.strictObject({
  kind: z.literal('board'),
  id: z.uuid(),
  logId,
  boardKind: z.enum(['board', 'slab', 'out-of-size']).default('board'),
  thicknessIn: inches(24),
  widthIn: inches(60),
  secondWidthIn: inches(60).nullable().default(null),
  lengthFt: z.number().min(1, 'At least 1 ft.').max(40, 'At most 40 ft.'),
  count: z.number().int().min(1, 'At least one.').max(500, 'At most 500 in one entry.'),
});
const hit = z.strictObject({ kind: z.literal('hit'), id: z.uuid(), logId, outcome: z.enum(['re-sharpened', 'destroyed']), note: z.string().max(500).default('') });
const cull = z.strictObject({
  kind: z.literal('cull'), id: z.uuid(), logId, reason: z.string().trim().min(1, 'Say why it is a cull log.').max(500),
  openingMinutes: z.number().int().min(0).max(600).default(0), passes: z.number().int().min(0).max(100).default(0),
});
const clock = z.strictObject({ kind: z.literal('clock'), id: z.uuid(), activity: z.enum(['preparing', 'sawing', 'waiting', 'breakdown', 'sharpening']), startsAt: z.iso.datetime({ offset: true }), endsAt: z.iso.datetime({ offset: true }) });
/** Hours put right before the tally is signed, with a reason; what was first written stays in sight. */
const correctClock = z.strictObject({
  kind: z.literal('correctClock'), id: z.uuid(), clockId: z.uuid(), startsAt: z.iso.datetime({ offset: true }), endsAt: z.iso.datetime({ offset: true }),
  reason: z.string().trim().min(1, 'Say why the hours are put right.').max(200, 'At most 200 characters.'),
});
const remove = z.strictObject({ kind: z.literal('remove'), id: z.uuid() });
const logIds = z.array(z.uuid()).max(200);
/** What is charged beside the sawing. Only what changed is sent, so that two phones do not undo each other. */
const extras = z.strictObject({
  kind: z.literal('extras'), id: z.uuid(),
  millMoves: z.number().int().min(0).max(20).optional(), stickers: z.number().int().min(0).max(5000).optional(), deliveryLoads: z.number().int().min(0).max(50).optional(),
  wasteDone: z.enum(['left', 'hauled', 'bundled']).optional(), quartersawnLogIds: logIds.optional(), draggedLogIds: logIds.optional(),
  rainReturns: z.number().int().min(0).max(10).optional(),
});
const measures = { smallEndIn, largeEndIn: between(4, 60, 'The large end, in inches,').nullable().default(null), lengthFt: logLengthFt };
const largeEndHolds = (log: { readonly smallEndIn: number; readonly largeEndIn: number | null }): boolean => log.largeEndIn === null || log.largeEndIn >= log.smallEndIn;
const largeEndProblem = { path: ['largeEndIn'], error: 'The large end is smaller than the small end. Swap them, or measure again.' };
/** A log measured again on the day, inside bark. */
const measure = z.strictObject({ kind: z.literal('measure'), id: z.uuid(), logId: z.uuid(), ...measures }).refine(largeEndHolds, largeEndProblem);
/** A log that is not on the listing; `id` becomes the log's. It is sawn once the landowner has accepted it. */
const addLog = z.strictObject({ kind: z.literal('addLog'), id: z.uuid(), label: z.string().trim().max(40).default(''), species: speciesCode, ...measures }).refine(largeEndHolds, largeEndProblem);

/** A signature drawn with a finger: an SVG path of whole numbers, nothing else. */
export const signaturePath = z.string().max(40_000).regex(/^(?:M\d{1,4} \d{1,4}(?:L\d{1,4} \d{1,4})*)+$/, 'This is not a drawn signature.');
const signedBy = { name: z.string().trim().min(1, 'Write your name as your signature.').max(120), signature: signaturePath.nullable() };
/** What the landowner allows, on their own phone or on the sawyer's. `limitCents` is the whole limit, not what is added. */
const allow = z.strictObject({
  kind: z.literal('allow'), id: z.uuid(), what: z.enum(['metal', 'increase', 'larger-log', 'added-log', 'set-up-again']),
  logId: logId.default(null), limitCents: z.number().int().min(100).max(100_000_00).nullable().default(null), ...signedBy,
});
const sha256 = z.string().regex(/^[0-9a-f]{64}$/);
/** The tally so far is signed, when rain stops the saw: its lines stand. */
const part = z.strictObject({ kind: z.literal('part'), id: z.uuid(), sha256, ...signedBy });
/** The sawyer offers the tally for signing. */
const offer = z.strictObject({ kind: z.literal('offer'), id: z.uuid(), endedBySawyer: z.boolean(), note: z.string().trim().max(1000).default('') });
/** The landowner signs the tally. `code` is theirs alone and asked for on the sawyer's phone. */
const sign = z.strictObject({ kind: z.literal('sign'), id: z.uuid(), sha256, code: z.string().regex(/^\d{6}$/, 'The code has six figures.').nullable().default(null), ...signedBy });
/** The check-list has been gone through: sawing begins. */
const start = z.strictObject({ kind: z.literal('start'), id: z.uuid() });

export const tallyEntry = z.discriminatedUnion('kind', [board, hit, cull, clock, correctClock, remove, extras, start, measure, addLog, allow, part, offer, sign]);
export type TallyEntry = z.infer<typeof tallyEntry>;

/** What a phone or page sends: entries in the order they were made. `account` is who made them: nobody else's session may send them. */
export const tallyEntriesBody = z.strictObject({ account: z.uuid().optional(), entries: z.array(tallyEntry).min(1).max(500) });

export const signForm = z.object({
  sha256: z.string().regex(/^[0-9a-f]{64}$/),
  name: z.string().trim().min(1, 'Write your name as your signature.').max(120),
  agreed: z.literal('yes', { error: 'Tick that you have read the tally.' }),
});

const asList = (value: unknown): unknown => (value === undefined ? [] : Array.isArray(value) ? value : [value]);
/** Queried lines as `board:ID`, with one sentence for each under the same position. */
export const queryForm = z.object({
  lines: z.preprocess(asList, z.array(z.string().regex(/^(board|hit|cull|clock|extras)(:[0-9a-f-]{36})?$/)).min(1, 'Choose the lines you query.').max(200)),
  says: z.string().trim().min(1, 'Say what is wrong with these lines.').max(1000),
});
export const answerForm = z.object({ query: z.uuid(), answer: z.string().trim().min(1, 'Write an answer.').max(1000) });
/** The check-list gone through, without a script: every point is ticked. */
export const startForm = (points: number) => z.object({ check: list.refine((ticks) => ticks.length >= points, 'Go through every point of the check-list before sawing begins.') });
/** The tally offered for signing, without a script. */
export const offerTallyForm = z.object({ endedBySawyer: ticked, note: fieldOf(text(1000)) });
