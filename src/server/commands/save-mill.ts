import { Mill } from '~/server/models/sawyer.ts';
import type { MillForm } from '~/schemas/mill-form.ts';
import { authorize } from '../authorize.ts';
import { inTransaction } from '../db.ts';
import { conflict, notFound } from '../errors.ts';
import { learnOfMill } from '../mill-notes.ts';
import { record } from '../transition.ts';
import { baseRoles, type Viewer } from '../viewer.ts';

/**
 * Adds a mill or changes one. Bids keep the copy they were made with.
 * @param millId the mill to change; null adds one
 * @returns the mill's id
 */
export async function saveMill(by: Viewer, millId: string | null, form: MillForm, at: Date): Promise<string> {
  authorize(by, 'sawyer', 'keepMill', baseRoles(by));
  return inTransaction(async () => {
    const mill = millId === null ? await Mill.create({ ...form, sawyerId: by.id, createdAt: at }) : await ownMill(by, millId);
    if (millId !== null) await mill.update(form);
    await learnOfMill(mill);
    await record(by, millId === null ? 'addMill' : 'changeMill', 'mill', mill.id, at);
    return mill.id;
  });
}

/** Whether a mill's estimates go by what its own jobs have shown. Bids already made keep the copy they were made with. */
export async function letMillLearn(by: Viewer, millId: string, learns: boolean, at: Date): Promise<void> {
  authorize(by, 'sawyer', 'keepMill', baseRoles(by));
  await inTransaction(async () => {
    const mill = await ownMill(by, millId);
    await mill.update({ learns });
    await learnOfMill(mill);
    await record(by, 'changeMill', 'mill', mill.id, at, { data: { learns } });
  });
}

/**
 * Takes a mill out of use. Bids already made with it stand.
 * @throws Refusal `conflict` when it is the sawyer's last.
 */
export async function retireMill(by: Viewer, millId: string, at: Date): Promise<void> {
  authorize(by, 'sawyer', 'keepMill', baseRoles(by));
  await inTransaction(async () => {
    const mill = await ownMill(by, millId);
    if ((await Mill.count({ where: { sawyerId: by.id, retiredAt: null } })) === 1) throw conflict('This is your only mill. Add another before you take it out of use.');
    await mill.update({ retiredAt: at });
    await record(by, 'retireMill', 'mill', mill.id, at);
  });
}

async function ownMill(by: Viewer, millId: string): Promise<Mill> {
  const mill = await Mill.findOne({ where: { id: millId, sawyerId: by.id, retiredAt: null }, lock: true });
  if (!mill) throw notFound('mill');
  return mill;
}
