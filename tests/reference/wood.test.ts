import { describe, expect, test } from 'vitest';
import { airDryingRows } from '~/domain/timber/data/air-drying-table.ts';
import { airDryingDays, equilibriumMoisturePct } from '~/domain/timber/drying.ts';
import { speciesList, speciesOf } from '~/domain/timber/species.ts';
import { cell, figure, figureOrNull, readTable, sure } from './csv.ts';

describe('Wood properties, USDA FPL Wood Handbook and FIA species table', () => {
  const rows = readTable('wood_properties.csv');

  test('76 species, each with its own code', () => {
    expect(speciesList).toHaveLength(76);
    expect(rows).toHaveLength(76);
    expect(new Set(speciesList.map(({ code }) => code)).size).toBe(76);
  });

  test.each(rows.map((row, index) => [`${cell(row, 'species')}${sure(cell(row, 'shrinkage_seen_or_memory'))}`, row, index] as const))('%s', (_, row, index) => {
    const species = speciesList[index];
    expect(species).toMatchObject({
      specificGravityGreen: figure(row, 'sg_green_basis'),
      greenMoisturePct: figure(row, 'green_mc_avg_pct'),
      barkPct: figure(row, 'bark_vol_pct_of_wood'),
      shrinkagePct: {
        radial: figureOrNull(row, 'shrink_radial_pct'),
        tangential: figureOrNull(row, 'shrink_tangential_pct'),
        volumetric: figureOrNull(row, 'shrink_volumetric_pct'),
      },
      heartMoisturePct: figureOrNull(row, 'green_mc_heartwood_pct'),
      sapMoisturePct: figureOrNull(row, 'green_mc_sapwood_pct'),
      group: figure(row, 'fia_spcd') < 300 ? 'softwood' : 'hardwood',
    });
    expect(species?.name.toLowerCase()).toBe(cell(row, 'species').toLowerCase());
    expect(species?.greenDensityLbPerFt3).toBeCloseTo(figure(row, 'green_lb_per_ft3(62.4*SG*(1+MC))'), 1);
  });
});

describe('Equilibrium moisture content, Wood Handbook table 4-2', () => {
  test.each(readTable('emc.csv').map((row) => [`${cell(row, 'temp_F')} °F, ${cell(row, 'rh_pct')} %${sure(cell(row, 'seen_or_memory'))}`, row] as const))('%s', (_, row) => {
    expect(Math.abs(equilibriumMoisturePct(figure(row, 'temp_F'), figure(row, 'rh_pct')) - figure(row, 'published_emc_pct'))).toBeLessThanOrEqual(0.1);
  });
});

describe('Air drying of 4/4 to 20 %, FPL-GTR-117', () => {
  const used = Object.values(airDryingRows).flat();
  test.each(readTable('air_drying.csv').map((row) => [`${cell(row, 'species')}${sure(cell(row, 'seen_or_memory'))}`, row] as const))('%s', (_, row) => {
    const days = used.filter(({ source }) => source === cell(row, 'species')).map(({ fromDays, toDays }) => [fromDays, toDays]);
    for (const found of days) expect(found).toEqual([figure(row, 'days_min'), figure(row, 'days_max')]);
    // Species of the table that are not among the 76: western white pine, red spruce, rock elm and a few others.
    expect(days.length > 0 || /interior|western white|spruce, red|elm, rock|magnolia|pecan|tanoak/.test(cell(row, 'species'))).toBe(true);
  });

  test('the table is not stretched to thicker lumber or to species it does not name', () => {
    expect(airDryingDays(speciesOf('white-oak'), 1.125)).toEqual({ from: 80, to: 250 });
    expect(airDryingDays(speciesOf('white-oak'), 2)).toBeNull();
    expect(airDryingDays(speciesOf('black-locust'), 1)).toBeNull();
  });
});
