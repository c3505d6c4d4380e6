import { formatDay, parseDay } from '~/domain/time.ts';

interface Done {
  readonly kind: 'good' | 'care';
  readonly title: string;
  readonly text: string;
}

const count = (params: URLSearchParams, name: string): number => {
  const text = params.get(name) ?? '';
  return /^\d{1,3}$/.test(text) ? Number(text) : 0;
};
const days = (number: number): string => (number === 1 ? 'One day' : `${number} days`);

/** What the calendar says about the deed just done, by its address; undefined when there was none. */
export function calendarDone(params: URLSearchParams): Done | undefined {
  switch (params.get('done')) {
    case 'feed':
      return { kind: 'good', title: 'The address is ready.', text: 'An address you gave out before has stopped answering.' };
    case 'stopped':
      return { kind: 'good', title: 'The address has stopped answering.', text: '' };
    case 'moved': {
      const to = parseDay(params.get('to') ?? '');
      return { kind: 'good', title: to.ok ? `Moved to ${formatDay(to.value)}.` : 'Moved.', text: '' };
    }
    case 'keep':
    case 'open':
    case 'close': {
      const on = parseDay(params.get('to') ?? '');
      const day = on.ok ? formatDay(on.value) : 'The day';
      if (params.get('done') === 'keep') return { kind: 'good', title: `${day} is your own day off now.`, text: 'It stays off when the other calendar changes or is no longer read.' };
      return params.get('done') === 'open' ? { kind: 'good', title: `${day} is open.`, text: 'It stays open when the other calendar is read again.' } : { kind: 'good', title: `${day} is off again.`, text: '' };
    }
    case 'other-stopped':
      return { kind: 'good', title: 'Your other calendar is not read any more.', text: 'The days taken from it stay off until you give them back.' };
    case 'days': {
      const [added, removed, booked] = [count(params, 'added'), count(params, 'removed'), count(params, 'booked')];
      const parts = [added > 0 && `${days(added)} taken off.`, removed > 0 && `${days(removed)} given back.`].filter(Boolean);
      const text = booked === 0 ? '' : `${days(booked)} stayed: a booking stands on ${booked === 1 ? 'it' : 'them'}.`;
      return { kind: booked > 0 ? 'care' : 'good', title: parts.length > 0 ? parts.join(' ') : 'Nothing has changed.', text };
    }
    default:
      return undefined;
  }
}
