import type { AccountState } from './states/account.ts';
import type { BidState } from './states/bid.ts';
import type { BookingState } from './states/booking.ts';
import type { ListingState } from './states/listing.ts';
import type { TripState, TripStopState } from './states/trip.ts';

/**
 * What an account is to a thing. `owner` made the listing, `bidder` made the bid, `landowner` and `sawyer` are the two sides of
 * a booking, `member` is any active account with a confirmed address, `anySawyer` one that works as a sawyer. `suspended` takes away:
 * such an account reads its own things and finishes what has begun, nothing else.
 */
export type Role = 'owner' | 'bidder' | 'landowner' | 'sawyer' | 'anySawyer' | 'member' | 'moderator' | 'suspended';

interface Rule<State extends string> {
  readonly who: readonly Role[];
  /** The states in which the deed is allowed; absent means any. */
  readonly states?: readonly State[];
  /** Whether a suspended account may still do it: `true`, or only in these states. */
  readonly whileSuspended?: true | readonly State[];
}

const rules = <State extends string>() => <const Action extends string>(table: Readonly<Record<Action, Rule<State>>>) => table;

/** One row a deed: who may do it, in which state of the thing. Commands enforce it; queries send the answer along as `can`. */
export const permissions = {
  listing: rules<ListingState>()({
    create: { who: ['member'] },
    seeDraft: { who: ['owner'], states: ['draft'] },
    edit: { who: ['owner'], states: ['draft', 'open'] },
    publish: { who: ['owner'], states: ['draft'] },
    withdraw: { who: ['owner'], states: ['open'] },
    addPhoto: { who: ['owner'], states: ['draft', 'open', 'closed', 'matched'] },
    seeBids: { who: ['owner', 'moderator'], states: ['open', 'closed', 'matched', 'done', 'withdrawn', 'lapsed'], whileSuspended: true },
    chooseBid: { who: ['owner'], states: ['open', 'closed'] },
    seePlace: { who: ['owner', 'moderator'] },
    bid: { who: ['anySawyer'], states: ['open'] },
    askAboutBoards: { who: ['member'], states: ['matched', 'done'] },
    ask: { who: ['anySawyer', 'owner'], states: ['open', 'closed', 'matched'] },
    hide: { who: ['moderator'], states: ['open', 'closed', 'matched', 'done', 'withdrawn', 'lapsed'] },
  }),
  bid: rules<BidState>()({
    see: { who: ['bidder', 'owner', 'moderator'], whileSuspended: true },
    change: { who: ['bidder'], states: ['open', 'toConfirm'] },
    confirm: { who: ['bidder'], states: ['toConfirm'] },
    withdraw: { who: ['bidder'], states: ['open', 'toConfirm'] },
    choose: { who: ['owner'], states: ['open'] },
  }),
  booking: rules<BookingState>()({
    see: { who: ['landowner', 'sawyer', 'moderator'], whileSuspended: true },
    message: { who: ['landowner', 'sawyer'] },
    proposeDay: { who: ['landowner', 'sawyer'], states: ['proposed', 'agreed', 'held', 'sawing'] },
    confirmDay: { who: ['landowner', 'sawyer'], states: ['proposed', 'agreed', 'held', 'sawing'] },
    pay: { who: ['landowner'], states: ['agreed'] },
    cancel: { who: ['landowner', 'sawyer'], states: ['proposed', 'agreed', 'held'] },
    reportNoShow: { who: ['landowner', 'sawyer'], states: ['held'] },
    decideNoShow: { who: ['moderator'], states: ['held'] },
    cancelForBoth: { who: ['moderator'], states: ['proposed', 'agreed', 'held'] },
    seePlace: { who: ['landowner', 'sawyer', 'moderator'], states: ['held', 'sawing', 'tallied', 'queried', 'signed', 'settled'] },
    startSawing: { who: ['sawyer'], states: ['held'] },
    enterTally: { who: ['sawyer'], states: ['held', 'sawing'], whileSuspended: ['sawing'] },
    allowOnTheDay: { who: ['landowner', 'sawyer'], states: ['sawing'], whileSuspended: true },
    addDayPhoto: { who: ['landowner', 'sawyer'], states: ['sawing', 'tallied', 'queried', 'signed', 'settled'], whileSuspended: true },
    seeSigningCode: { who: ['landowner'], states: ['held', 'sawing', 'tallied'], whileSuspended: true },
    signPart: { who: ['landowner', 'sawyer'], states: ['sawing'], whileSuspended: true },
    signOnTheSpot: { who: ['landowner', 'sawyer'], states: ['tallied'], whileSuspended: true },
    allowMetal: { who: ['landowner'], states: ['sawing'], whileSuspended: true },
    offerTally: { who: ['sawyer', 'moderator'], states: ['sawing'], whileSuspended: true },
    amendTally: { who: ['sawyer'], states: ['queried'], whileSuspended: true },
    signTally: { who: ['landowner'], states: ['tallied', 'queried'], whileSuspended: true },
    queryTally: { who: ['landowner'], states: ['tallied'], whileSuspended: true },
    decideTally: { who: ['moderator'], states: ['queried'] },
    topUp: { who: ['landowner'], states: ['sawing', 'tallied', 'queried', 'signed'], whileSuspended: true },
    settleAsHeld: { who: ['moderator'], states: ['signed'] },
    acceptHeld: { who: ['sawyer'], states: ['signed'], whileSuspended: true },
    keepBoards: { who: ['landowner'], states: ['sawing', 'tallied', 'queried', 'signed', 'settled'] },
    review: { who: ['landowner', 'sawyer'], states: ['settled'] },
    offerBoardsLeft: { who: ['landowner'], states: ['settled'] },
    keepJobPage: { who: ['landowner'], states: ['settled'] },
    agreeToJobPage: { who: ['landowner', 'sawyer'], states: ['settled'], whileSuspended: true },
  }),
  sawyer: rules<never>()({
    keepProfile: { who: ['anySawyer'] },
    keepMill: { who: ['anySawyer'] },
    keepRates: { who: ['anySawyer'] },
    keepSearches: { who: ['anySawyer'] },
    keepCalendar: { who: ['anySawyer'] },
    planTrips: { who: ['anySawyer'] },
  }),
  trip: rules<TripState>()({
    see: { who: ['landowner', 'sawyer', 'moderator'] },
    withdraw: { who: ['sawyer'], states: ['offered'] },
  }),
  tripStop: rules<TripStopState>()({
    agree: { who: ['landowner'], states: ['asked'] },
    leave: { who: ['landowner'], states: ['asked', 'agreed'] },
  }),
  account: rules<AccountState>()({
    suspend: { who: ['moderator'], states: ['active'] },
    restore: { who: ['moderator'], states: ['suspended'] },
    seeCertificate: { who: ['moderator'], states: ['active', 'suspended'] },
    endSecondFactor: { who: ['moderator'], states: ['active', 'suspended'] },
  }),
  message: rules<never>()({
    takeOut: { who: ['moderator'] },
  }),
  review: rules<never>()({
    takeOut: { who: ['moderator'] },
  }),
  photo: rules<never>()({
    takeOut: { who: ['moderator'] },
  }),
  report: rules<never>()({
    handle: { who: ['moderator'] },
  }),
  desk: rules<never>()({
    open: { who: ['moderator'] },
    seeMoney: { who: ['moderator'] },
    retryCall: { who: ['moderator'] },
    reconcile: { who: ['moderator'] },
    adjustMoney: { who: ['moderator'] },
  }),
} as const;

export type Subject = keyof typeof permissions;
export type Action<S extends Subject> = keyof (typeof permissions)[S] & string;

/**
 * Whether someone with these roles may do the deed in this state. Pure; `server/authorize.ts` finds the roles and throws.
 */
export function may<S extends Subject>(subject: S, action: Action<S>, roles: ReadonlySet<Role>, state?: string): boolean {
  const rule = (permissions[subject] as Readonly<Record<string, Rule<string>>>)[action];
  if (!rule) return false;
  if (rule.states && (state === undefined || !rule.states.includes(state))) return false;
  if (roles.has('suspended') && rule.whileSuspended !== true && !(state !== undefined && rule.whileSuspended?.includes(state))) return false;
  return rule.who.some((role) => roles.has(role));
}

/** Every deed on a subject answered at once, for a page to read. */
export function abilities<S extends Subject>(subject: S, roles: ReadonlySet<Role>, state?: string): Record<Action<S>, boolean> {
  const actions = Object.keys(permissions[subject]) as Action<S>[];
  return Object.fromEntries(actions.map((action) => [action, may(subject, action, roles, state)])) as Record<Action<S>, boolean>;
}
