import { readProjectPieces } from '~/domain/timber/project-pieces.ts';
import type { DryingPlanForm, MoistureForm } from '~/schemas/after-forms.ts';
import { authorize, rolesOnBooking } from '../authorize.ts';
import { inTransaction } from '../db.ts';
import { conflict, invalid, notFound } from '../errors.ts';
import { lockBooking } from '../locks.ts';
import { DryingPlan, MoistureReading } from '../models/index.ts';
import type { Viewer } from '../viewer.ts';

/** More readings than this of one job help nobody. */
const MOST_READINGS = 400;

/** The landowner keeps the air their boards dry in, the stack, the project and when to be reminded. */
export async function keepDryingPlan(by: Viewer, number: number, form: DryingPlanForm, at: Date): Promise<void> {
  const read = readProjectPieces(form.pieces);
  if (!read.ok) throw invalid(read.problems);
  await inTransaction(async () => {
    const booking = await lockBooking(number);
    authorize(by, 'booking', 'keepBoards', rolesOnBooking(by, booking), booking.status);
    const before = await DryingPlan.findByPk(booking.id);
    const remindedAt = before?.remindOn === form.remindOn ? before.remindedAt : null;
    await DryingPlan.upsert({ bookingId: booking.id, ...form, temperatureF: null, humidityPct: null, remindedAt, updatedAt: at });
  });
}

/** A moisture reading of the boards. */
export async function addMoistureReading(by: Viewer, number: number, form: MoistureForm, at: Date): Promise<void> {
  await inTransaction(async () => {
    const booking = await lockBooking(number);
    authorize(by, 'booking', 'keepBoards', rolesOnBooking(by, booking), booking.status);
    if ((await MoistureReading.count({ where: { bookingId: booking.id } })) >= MOST_READINGS) throw conflict(`At most ${MOST_READINGS} readings are kept. Take old ones out.`);
    await MoistureReading.create({ bookingId: booking.id, ...form, enteredBy: by.id, enteredAt: at });
  });
}

/** Takes a reading out again. */
export async function removeMoistureReading(by: Viewer, number: number, reading: string): Promise<void> {
  await inTransaction(async () => {
    const booking = await lockBooking(number);
    authorize(by, 'booking', 'keepBoards', rolesOnBooking(by, booking), booking.status);
    if ((await MoistureReading.destroy({ where: { id: reading, bookingId: booking.id } })) === 0) throw notFound('reading');
  });
}
