import { beforeAll, describe, expect, it } from 'vitest';
import type { Model, ModelStatic } from 'sequelize';
import { accountStates } from '~/domain/states/account.ts';
import { bidStates } from '~/domain/states/bid.ts';
import { bookingStates } from '~/domain/states/booking.ts';
import { listingStates } from '~/domain/states/listing.ts';
import { noShowStates } from '~/domain/states/no-show.ts';
import { paymentStates } from '~/domain/states/payment.ts';
import { tripStates, tripStopStates } from '~/domain/states/trip.ts';
import { execute, inTransaction, oneRow, rows } from '~/server/db.ts';
import { enqueue } from '~/server/jobs/queue.ts';
import { Account, Event, LedgerEntry, LedgerGroup, Listing } from '~/server/models/index.ts';
import * as models from '~/server/models/index.ts';
import { transition } from '~/server/transition.ts';
import { system } from '~/server/viewer.ts';

const at = new Date('2026-07-20T15:00:00Z');
let ownerId = '';

beforeAll(async () => {
  ownerId = (await Account.create({ email: 'Ada@Example.org', passwordHash: 'x', name: 'Ada', isLandowner: true, createdAt: at })).id;
});

describe('the database has the last word', () => {
  it.each([['account', accountStates], ['listing', listingStates], ['bid', bidStates], ['booking', bookingStates], ['held_payment', paymentStates], ['no_show', noShowStates], ['shared_trip', tripStates], ['trip_stop', tripStopStates]] as const)('%s: its CHECK lists the states of its table', async (name, table) => {
    const found = await oneRow<{ text: string }>(
      `SELECT pg_get_constraintdef(oid) AS text FROM pg_constraint WHERE conrelid = $1::regclass AND conname = $2`,
      [name, `${name}_status_check`],
    );
    const listed = [...(found?.text ?? '').matchAll(/'([^']+)'::text/g)].map((match) => match[1]);
    expect(listed.sort()).toEqual([...table.states].sort());
  });

  it('has a column for every attribute of every model', async () => {
    const columns = await rows<{ name: string }>(`SELECT table_name || '.' || column_name AS name FROM information_schema.columns WHERE table_schema = 'public'`);
    const known = new Set(columns.map((column) => column.name));
    const all: readonly ModelStatic<Model>[] = Object.values(models) as never;
    for (const model of all) {
      for (const attribute of Object.values(model.getAttributes())) expect(known).toContain(`${model.tableName}.${attribute.field}`);
    }
  });

  it('keeps the audit log and the ledger as they were written', async () => {
    await Event.create({ at, action: 'test', thing: 'account', actorId: ownerId });
    await expect(execute(`UPDATE event SET action = 'other'`)).rejects.toThrow(/never changed/);
    await expect(execute('DELETE FROM event')).rejects.toThrow(/never changed/);
    await expect(execute('TRUNCATE ledger_entry')).rejects.toThrow(/never changed/);
  });

  it('refuses a ledger group that does not sum to zero', async () => {
    const post = (amount: number) => inTransaction(async () => {
      const group = await LedgerGroup.create({ at, cause: 'test', causeId: String(amount) });
      await LedgerEntry.create({ groupId: group.id, account: 'provider balance', amountCents: 100 });
      await LedgerEntry.create({ groupId: group.id, account: 'landowner held', amountCents: amount });
    });
    await expect(post(-99)).rejects.toThrow(/does not sum to zero/);
    await post(-100);
    expect(await LedgerEntry.count()).toBe(2);
  });
});

describe('a transaction', () => {
  it('is joined by every query inside it, and rolled back whole', async () => {
    await expect(inTransaction(async () => {
      await Listing.create({ ownerId, createdAt: at, updatedAt: at });
      await enqueue('sweep', {});
      throw new Error('no');
    })).rejects.toThrow('no');
    expect(await Listing.count()).toBe(0);
    expect((await rows(`SELECT 1 FROM pgboss.job WHERE name = 'sweep'`)).length).toBe(0);
  });

  it('carries its jobs with it when it commits', async () => {
    await inTransaction(async () => enqueue('sweep', {}));
    expect((await rows(`SELECT 1 FROM pgboss.job WHERE name = 'sweep'`)).length).toBe(1);
  });
});

describe('transition', () => {
  it('lets one of eight racers win and writes one audit line', async () => {
    const listing = await Listing.create({ ownerId, createdAt: at, updatedAt: at });
    // Publishing asks for more than a status; the withdrawn state of a complete row is what races here.
    await Listing.update({
      status: 'open', title: 'White oak', treeOwner: 'mine', treeOwnerConfirmedAt: at, howDown: 'uprooted', cameDownOn: '2026-07-18', timeZone: 'America/Chicago',
      place: { type: 'Point', coordinates: [-90.65, 43.65] }, coarse: { type: 'Point', coordinates: [-90.65, 43.65] }, closesAt: at, metalRisk: 'unknown', logCount: 1, publishedAt: at,
    }, { where: { id: listing.id } });
    const tries = await Promise.allSettled(Array.from({ length: 8 }, () => inTransaction(async () => {
      const row = await Listing.findByPk(listing.id, { rejectOnEmpty: true });
      await transition(listingStates, 'withdraw', row, system('test'), at);
    })));
    expect(tries.filter((one) => one.status === 'fulfilled')).toHaveLength(1);
    expect(await Event.count({ where: { thingId: listing.id, action: 'withdraw' } })).toBe(1);
    expect((await Listing.findByPk(listing.id, { rejectOnEmpty: true })).place).toMatchObject({ type: 'Point', coordinates: [-90.65, 43.65] });
  });
});
