import { z } from 'zod';
import { isId } from '~/domain/id.ts';
import { parseLengthFt, parseLengthIn, parseNumber } from '~/domain/measure.ts';
import { type Cents, parseCents } from '~/domain/money.ts';
import { good, refused, type Result } from '~/domain/result.ts';
import { parseDay } from '~/domain/time.ts';

/** A form field read from the text a person typed; a refusal becomes the problem of that field. */
export const fieldOf = <T>(read: (text: string) => Result<T>) =>
  z.string().default('').transform((text, ctx): T => {
    const result = read(text.trim());
    if (result.ok) return result.value;
    for (const { message } of result.problems) ctx.addIssue({ code: 'custom', message });
    return z.NEVER;
  });

/** The same, where an empty field means nothing was given. */
export const optional = <T>(read: (text: string) => Result<T>) => (text: string): Result<T | null> => (text === '' ? good(null) : read(text));

/** Text of at most `most` characters; `missing` is what to say when it may not be empty. */
export const text = (most: number, missing?: string) => (typed: string): Result<string> => {
  if (typed === '' && missing !== undefined) return refused('', missing);
  return typed.length > most ? refused('', `Keep this to ${most.toLocaleString('en-US')} characters; it has ${typed.length.toLocaleString('en-US')}.`) : good(typed);
};

/** Dollars and cents as cents. */
export const money = (typed: string): Result<Cents> => {
  const cents = parseCents(typed);
  return cents === null ? refused('', typed === '' ? 'Write an amount in dollars; 0 when there is none.' : 'Write an amount in dollars, like 75 or 0.55; at most $1,000,000.') : good(cents);
};

/** An amount where empty means 0. */
export const moneyOrZero = (typed: string): Result<Cents> => (typed === '' ? good(0) : money(typed));

const within = (value: number, least: number, most: number, say: string): Result<number> => (value >= least && value <= most ? good(value) : refused('', say));

/** A length in inches within bounds, with fractions and units as people write them. */
export const inches = (least: number, most: number) => (typed: string): Result<number> => {
  const read = parseLengthIn(typed);
  return read.ok ? within(read.value, least, most, `Between ${least} and ${most} in.`) : read;
};

/** A length in feet within bounds; a bare number is feet. */
export const feet = (least: number, most: number) => (typed: string): Result<number> => {
  const read = parseLengthFt(typed);
  return read.ok ? within(read.value, least, most, `Between ${least} and ${most} ft.`) : read;
};

/** A number within bounds, fractions allowed. */
export const number = (least: number, most: number, unit = '') => (typed: string): Result<number> => {
  const value = parseNumber(typed.replace(/\s*%$/, ''));
  return value === null ? refused('', `Write a number${unit === '' ? '' : ` of ${unit}`}.`) : within(value, least, most, `Between ${least.toLocaleString('en-US')} and ${most.toLocaleString('en-US')}${unit === '' ? '' : ` ${unit}`}.`);
};

/** A whole number within bounds. */
export const whole = (least: number, most: number, unit = '') => (typed: string): Result<number> => {
  const read = number(least, most, unit)(typed);
  return read.ok && !Number.isInteger(read.value) ? refused('', 'Write a whole number.') : read;
};

/** One of a few values; `missing` says what to choose. */
export const choice = <const V extends string>(values: readonly V[], missing: string) => (typed: string): Result<V> =>
  (values as readonly string[]).includes(typed) ? good(typed as V) : refused('', missing);

/** A calendar day. */
export const day = (typed: string): Result<string> => {
  const read = parseDay(typed);
  return read.ok ? read : refused('', read.problems[0]?.message ?? '');
};

/** The id of a thing of ours that was offered as a choice. */
export const idOf = (missing: string) => (typed: string): Result<string> => (isId(typed) ? good(typed) : refused('', missing));

/** A box that posts `on` or nothing. */
export const ticked = z.string().optional().transform((typed) => typed !== undefined && typed !== '');

/** Any number of values under one name; a single one arrives as text. Blank ones are dropped. */
export const list = z.union([z.string(), z.array(z.string())]).default([]).transform((typed) => (Array.isArray(typed) ? typed : [typed]).map((one) => one.trim()).filter((one) => one !== ''));
