import { describe, expect, it } from 'vitest';
import { driestMonth, dryingMonths } from '~/domain/timber/monthly-air.ts';
import { dryingPlanForm } from '~/schemas/after-forms.ts';

describe('the air of the months', () => {
  it('says where boards end in each, in the order of the year', () => {
    // Wood Handbook, table 4-2: 70 °F and 65 % give 12.0 %, 30 °F and 80 % give 16.5 %.
    const months = dryingMonths([{ month: 8, temperatureF: 70, humidityPct: 65 }, { month: 1, temperatureF: 30, humidityPct: 80 }]);
    expect(months.map(({ name }) => name)).toEqual(['January', 'August']);
    expect(months[0]?.equilibriumPct).toBeCloseTo(16.5, 0);
    expect(months[1]?.equilibriumPct).toBeCloseTo(12, 0);
    expect(driestMonth(months)?.name).toBe('August');
    expect(driestMonth([])).toBeNull();
  });

  const form = (change: Record<string, string>) => dryingPlanForm.safeParse({ targetPct: '8', stackWidthFt: '4', sawKerfIn: '1/8', ...change });

  it('are read from what was typed, and nothing is made up for the rest', () => {
    expect(form({ t8: '70', h8: '65', airSource: ' The station at the airport ' })).toMatchObject({ success: true, data: { months: [{ month: 8, temperatureF: 70, humidityPct: 65 }], airSource: 'The station at the airport' } });
    expect(form({})).toMatchObject({ success: true, data: { months: [] } });
  });

  it.each([
    [{ t8: '70' }, 'h8', /Give both/],
    [{ h8: '70' }, 't8', /Give both/],
    [{ t8: 'warm', h8: '70' }, 't8', /between −20 and 120/],
    [{ t8: '70', h8: '100' }, 'h8', /between 1 and 99/],
  ])('say what is wrong with %j', (typed, path, why) => {
    const read = form(typed);
    expect(read.error?.issues.map((issue) => [issue.path.join('.'), issue.message])).toEqual([[path, expect.stringMatching(why)]]);
  });
});
