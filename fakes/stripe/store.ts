import { closeSync, existsSync, fsyncSync, mkdirSync, openSync, readFileSync, renameSync, writeSync } from 'node:fs';
import { join } from 'node:path';
import type Stripe from 'stripe';

/** A one-time link to an onboarding page. `openedAs` is the page's own secret once the link was followed. */
export interface KeptLink {
  readonly token: string;
  readonly account: string;
  readonly expiresAt: number;
  readonly returnUrl: string;
  readonly refreshUrl: string;
  readonly openedAs: string | null;
  readonly purpose: 'onboarding' | 'dashboard';
}

/** One event on its way to one endpoint. `nextAt` is wall-clock milliseconds. */
export interface KeptDelivery {
  readonly id: string;
  readonly event: string;
  readonly endpoint: string;
  readonly attempts: number;
  readonly nextAt: number;
  readonly state: 'waiting' | 'done' | 'dropped' | 'gave up';
  readonly lastStatus: number | null;
}

/** The answer kept under an idempotency key. `savedAt` is wall-clock milliseconds. */
export interface KeptReply {
  readonly key: string;
  readonly fingerprint: string;
  readonly status: number;
  readonly body: string;
  readonly requestId: string;
  readonly savedAt: number;
}

/** Something that happens by itself at `at` (seconds of the stand-in's clock). */
export interface KeptPlan {
  readonly id: string;
  readonly at: number;
  readonly deed: 'dispute' | 'fail refund' | 'finish refund' | 'move payout';
  readonly subject: string;
}

/** What belongs to an object but is not shown in it. */
export interface KeptNote {
  readonly id: string;
  readonly value: string;
}

/** Everything that is kept, by kind. References between objects are ids. */
export interface Kinds {
  account: Stripe.Account;
  balance_transaction: Stripe.BalanceTransaction;
  charge: Stripe.Charge;
  dispute: Stripe.Dispute;
  event: Stripe.Event;
  line_item: Stripe.LineItem;
  payment_intent: Stripe.PaymentIntent;
  payout: Stripe.Payout;
  refund: Stripe.Refund;
  session: Stripe.Checkout.Session;
  transfer: Stripe.Transfer;
  transfer_reversal: Stripe.TransferReversal;
  webhook_endpoint: Stripe.WebhookEndpoint;
  link: KeptLink;
  delivery: KeptDelivery;
  reply: KeptReply;
  plan: KeptPlan;
  note: KeptNote;
}
export type Kind = keyof Kinds;

/** `owner` is '' for the platform, else the connected account whose books the object stands in. */
export interface Kept<T> {
  readonly owner: string;
  readonly value: T;
}

type Line = readonly [kind: Kind, id: string, owner: string, value: unknown];
const REPLY_LIFE_MS = 24 * 3_600_000;

/**
 * Objects by kind and id, kept in memory and in an append-only file of JSON lines. One line is one change, whole or
 * not at all: a line torn by a crash is the last one and is left out when the file is read. Values are never mutated;
 * a change puts a new value.
 */
export class Store {
  private kinds = new Map<Kind, Map<string, Kept<unknown>>>();
  private file: number | null = null;
  private open: { lines: Line[]; undo: (() => void)[] } | null = null;

  /** @param folder where `books.jsonl` lives; null keeps everything in memory only. */
  constructor(private readonly folder: string | null) {
    if (folder === null) return;
    mkdirSync(folder, { recursive: true });
    this.load(join(folder, 'books.jsonl'));
    this.rewrite();
  }

  private map<K extends Kind>(kind: K): Map<string, Kept<Kinds[K]>> {
    let map = this.kinds.get(kind);
    if (map === undefined) this.kinds.set(kind, (map = new Map()));
    return map as Map<string, Kept<Kinds[K]>>;
  }

  get<K extends Kind>(kind: K, id: string): Kinds[K] | undefined {
    return this.map(kind).get(id)?.value;
  }

  ownerOf(kind: Kind, id: string): string | undefined {
    return this.map(kind).get(id)?.owner;
  }

  /** All of a kind, oldest first; only one owner's when given. */
  all<K extends Kind>(kind: K, owner?: string): Kinds[K][] {
    const found: Kinds[K][] = [];
    for (const kept of this.map(kind).values()) if (owner === undefined || kept.owner === owner) found.push(kept.value);
    return found;
  }

  /** Puts a new or changed value; null takes it away. Only inside `change`. */
  put<K extends Kind>(kind: K, id: string, value: Kinds[K] | null, owner = ''): void {
    if (this.open === null) throw new Error('A value may only be put inside a change.');
    const map = this.map(kind);
    const before = map.get(id);
    const keeper = before?.owner ?? owner;
    this.open.undo.push(() => (before === undefined ? map.delete(id) : map.set(id, before)));
    this.open.lines.push([kind, id, keeper, value]);
    if (value === null) map.delete(id);
    else map.set(id, { owner: keeper, value });
  }

  /** Runs `work` as one change: written whole when it returns, taken back when it throws. Joins an outer change. */
  change<T>(work: () => T): T {
    if (this.open !== null) return work();
    const change = { lines: [] as Line[], undo: [] as (() => void)[] };
    this.open = change;
    try {
      const answer = work();
      if (this.file !== null && change.lines.length > 0) writeSync(this.file, `${JSON.stringify(change.lines)}\n`);
      return answer;
    } catch (error) {
      for (const undo of change.undo.reverse()) undo();
      throw error;
    } finally {
      this.open = null;
    }
  }

  /** Forgets everything, in memory and in the file. */
  clear(): void {
    this.kinds = new Map();
    if (this.folder !== null) this.rewrite();
  }

  close(): void {
    if (this.file !== null) closeSync(this.file);
    this.file = null;
  }

  private load(path: string): void {
    if (!existsSync(path)) return;
    for (const text of readFileSync(path, 'utf8').split('\n')) {
      if (text === '') continue;
      let lines: Line[];
      try {
        lines = JSON.parse(text) as Line[];
      } catch {
        break; // the torn end of a change that never happened
      }
      for (const [kind, id, owner, value] of lines) {
        const map = this.map(kind) as Map<string, Kept<unknown>>;
        if (value === null) map.delete(id);
        else map.set(id, { owner, value });
      }
    }
  }

  /** Writes the present state as a new file beside the old and puts it in its place in one step. */
  private rewrite(): void {
    if (this.folder === null) return;
    this.close();
    const path = join(this.folder, 'books.jsonl');
    const fresh = openSync(`${path}.new`, 'w');
    for (const [kind, map] of this.kinds) {
      for (const [id, kept] of map) {
        if (kind === 'reply' && (kept.value as KeptReply).savedAt < Date.now() - REPLY_LIFE_MS) map.delete(id);
        else writeSync(fresh, `${JSON.stringify([[kind, id, kept.owner, kept.value]])}\n`);
      }
    }
    fsyncSync(fresh);
    closeSync(fresh);
    renameSync(`${path}.new`, path);
    this.file = openSync(path, 'a');
  }
}
