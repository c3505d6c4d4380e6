import { makeToken } from '../../src/server/email-tokens.ts';
import { inTransaction } from '../../src/server/db.ts';
import { confirmEmail } from '../../src/server/commands/confirm-email.ts';
import { makeModerator } from '../../src/server/commands/make-moderator.ts';
import { signUp } from '../../src/server/commands/sign-up.ts';
import { Account } from '../../src/server/models/account.ts';
import type { Viewer } from '../../src/server/viewer.ts';
import { DEMO_PASSWORD, DEMO_SECOND_FACTOR } from './demo-accounts.ts';
import type { Timeline } from './timeline.ts';

interface Person {
  readonly key: string;
  readonly name: string;
  readonly zip: string;
  readonly as: 'landowner' | 'sawyer' | 'both';
}

const person = (key: string, name: string, zip: string, as: Person['as'] = 'landowner'): Person => ({ key, name, zip, as });

/** Everybody but the moderator. Nobody of these exists. */
const everybody: readonly Person[] = [
  person('ada', 'Ada Fernhollow', '54665'),
  person('tilda', 'Tilda Brookmire', '54667'),
  person('ulf', 'Ulf Copperlane', '54639'),
  person('vera', 'Vera Mosswick', '54655'),
  person('wim', 'Wim Harrowgate', '54619'),
  person('yves', 'Yves Larkfield', '54634'),
  person('zora', 'Zora Pebblebank', '54623'),
  person('anders', 'Anders Hayloft', '54632'),
  person('berit', 'Berit Quillbrook', '54664'),
  person('corin', 'Corin Bellpasture', '54651'),
  person('dagny', 'Dagny Thistledown', '54631'),
  person('elmo', 'Elmo Barnswallow', '54621'),
  person('fern', 'Fern Ridgewater', '54652'),
  person('gus', 'Gus Oxenbridge', '54628'),
  person('hedda', 'Hedda Milkweed', '54638'),
  person('ivo', 'Ivo Springhouse', '54658'),
  person('bram', 'Bram Kerfman', '54667', 'sawyer'),
  person('cleo', 'Cleo Bandwheel', '54639', 'sawyer'),
  person('hob', 'Hob Swingblade', '54634', 'sawyer'),
  person('ines', 'Ines Doglatch', '54619', 'sawyer'),
  person('jory', 'Jory Slabtree', '54656', 'sawyer'),
  person('kit', 'Kit Longbar', '54623', 'sawyer'),
  person('lark', 'Lark Cantwell', '53581', 'sawyer'),
  person('moss', 'Moss Hydraulin', '54660', 'sawyer'),
  person('nell', 'Nell Sawdusty', '54652', 'both'),
  person('otis', 'Otis Headrig', '53821', 'sawyer'),
  person('pim', 'Pim Thickplank', '54601', 'sawyer'),
  person('quill', 'Quill Firstcut', '54664', 'sawyer'),
];

export const addressOf = (key: string): string => `${key}@skidway.example`;

/** The account as it would ask, signed in. @throws when nobody of that name has signed up yet */
export async function who(key: string): Promise<Viewer> {
  const account = await Account.findOne({ where: { email: addressOf(key) }, rejectOnEmpty: true });
  return {
    id: account.id, name: account.name, email: account.email, emailConfirmed: account.emailConfirmedAt !== null, isLandowner: account.isLandowner, isSawyer: account.isSawyer,
    isModerator: account.isModerator, secondFactorDue: false, active: account.status === 'active', sessionId: account.id, unread: 0,
  };
}

async function arrive({ key, name, zip, as }: Person, at: Date): Promise<void> {
  const roles = as === 'both' ? (['landowner', 'sawyer'] as const) : [as];
  const { accountId } = await signUp({ name, email: addressOf(key), password: DEMO_PASSWORD, as: roles, zip, clientAddress: null }, at);
  // The link of the letter, followed a moment later.
  await confirmEmail(await inTransaction(() => makeToken(accountId, 'confirm-email', addressOf(key), at)), at);
}

// All at once: what takes the time is the hashing of their passwords.
const arriveAll = async (people: readonly Person[], at: Date): Promise<void> => void (await Promise.all(people.map((one) => arrive(one, at))));

/** Sawyers have been here for months, landowners come with the storm, and one moderator watches. */
export function tellPeople(timeline: Timeline): void {
  timeline.add(-120, '09:00', async (at) => void (await makeModerator({ email: addressOf('mo'), name: 'Mo Evenhand', password: DEMO_PASSWORD, secret: DEMO_SECOND_FACTOR }, at)));
  timeline.add(-110, '09:30', (at) => arriveAll(everybody.filter(({ as }) => as !== 'landowner'), at));
  timeline.add(-39, '10:10', (at) => arriveAll(everybody.filter(({ as }) => as === 'landowner'), at));
}
