import { describe, expect, it } from 'vitest';
import { checkClock } from '~/domain/trade/clock.ts';
import { hoursOf, minutesSaid } from '~/domain/trade/running-clock.ts';

const at = (time: string): string => `2026-08-04T${time}.000Z`;
const running = { activity: 'sawing', startsAt: at('13:05:30') } as const;

describe('the running clock', () => {
  it('counts whole minutes from where it was started', () => {
    expect(hoursOf(running, new Date(at('14:25:50')), [])).toEqual({ startsAt: at('13:05:30'), endsAt: at('14:25:30') });
    expect(hoursOf(running, new Date(at('13:06:00')), [])).toBeNull();
  });
  it('never overlaps hours that were typed meanwhile', () => {
    const typed = { startsAt: at('13:00:00'), endsAt: at('13:30:00') };
    const hours = hoursOf(running, new Date(at('14:00:00')), [typed]);
    expect(hours).toEqual({ startsAt: at('13:30:00'), endsAt: at('14:00:00') });
    expect(hoursOf(running, new Date(at('13:29:00')), [typed])).toBeNull();
    const both = [typed, hours ?? typed].map(({ startsAt, endsAt }) => ({ activity: 'sawing' as const, startsAt: new Date(startsAt), endsAt: new Date(endsAt) }));
    expect(checkClock(both).ok).toBe(true);
  });
  it('that was forgotten overnight ends after 18 hours', () => {
    expect(hoursOf(running, new Date('2026-08-05T23:00:00.000Z'), [])?.endsAt).toBe('2026-08-05T07:05:30.000Z');
  });
  it('is said in hours and minutes', () => expect([minutesSaid(45), minutesSaid(80.9), minutesSaid(60)]).toEqual(['45 min', '1 h 20 min', '1 h 0 min']));
});
