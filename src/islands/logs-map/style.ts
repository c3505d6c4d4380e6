import type { ExpressionSpecification, StyleSpecification, SymbolLayerSpecification } from 'maplibre-gl';
import type { FeatureCollection } from 'geojson';
import { DEEPEST_TILE } from '~/domain/finding/tiles.ts';

/** The theme's colours as the browser has them now, light or dark. */
export function themeColour(name: string, alpha = 1): string {
  const channels = getComputedStyle(document.documentElement).getPropertyValue(`--${name}`).trim().split(/\s+/).join(', ');
  return `rgba(${channels}, ${alpha})`;
}

export interface Base {
  readonly counties: FeatureCollection;
  readonly countyLines: FeatureCollection;
  readonly stateLines: FeatureCollection;
  readonly countyNames: FeatureCollection;
  readonly towns: FeatureCollection;
  readonly rings: FeatureCollection;
  readonly ringNames: FeatureCollection;
  /** The address of the tiles of listings; null for none. */
  readonly tiles: string | null;
}

/** The tiles' source. */
export const TILES = 'logs';

const name: ExpressionSpecification = ['get', 'name'];

/** The whole map style: shapes of our own, no outside address, labels in the device's fonts. */
export function mapStyle(base: Base): StyleSpecification {
  const source = (data: FeatureCollection) => ({ type: 'geojson', data }) as const;
  const label = (id: string, from: string, size: number, colour: string, more: SymbolLayerSpecification['layout'] = {}, minzoom = 0): SymbolLayerSpecification =>
    ({ id, type: 'symbol', source: from, minzoom, layout: { 'text-field': name, 'text-font': ['Atkinson Hyperlegible Next', 'Verdana', 'sans-serif'], 'text-size': size, ...more }, paint: { 'text-color': colour, 'text-halo-color': themeColour('paper'), 'text-halo-width': 1.5 } });
  return {
    version: 8,
    sources: {
      counties: source(base.counties),
      countyLines: source(base.countyLines),
      stateLines: source(base.stateLines),
      countyNames: source(base.countyNames),
      towns: source(base.towns),
      rings: source(base.rings),
      ringNames: source(base.ringNames),
      ...(base.tiles === null ? {} : { [TILES]: { type: 'vector', tiles: [base.tiles], minzoom: 0, maxzoom: DEEPEST_TILE } as const }),
    },
    layers: [
      { id: 'ground', type: 'background', paint: { 'background-color': themeColour('paper') } },
      { id: 'land', type: 'fill', source: 'counties', paint: { 'fill-color': themeColour('sapwood', 0.35), 'fill-antialias': false } },
      { id: 'county-lines', type: 'line', source: 'countyLines', minzoom: 5.5, paint: { 'line-color': themeColour('bark', 0.28), 'line-width': 1 } },
      { id: 'state-lines', type: 'line', source: 'stateLines', paint: { 'line-color': themeColour('bark', 0.55), 'line-width': 1.5 } },
      { id: 'rings', type: 'line', source: 'rings', paint: { 'line-color': themeColour('crayon', 0.7), 'line-width': 1, 'line-dasharray': [3, 4] } },
      label('county-names', 'countyNames', 13, themeColour('ink-soft'), { 'text-letter-spacing': 0.06, 'text-padding': 12 }, 7),
      label('town-names', 'towns', 11, themeColour('ink-soft'), { 'symbol-sort-key': ['get', 'rank'], 'text-padding': 6 }, 6),
      label('ring-names', 'ringNames', 12, themeColour('crayon'), { 'text-allow-overlap': true }),
      // Draws nothing: marks are buttons above the map. A source without a layer would not be loaded.
      ...(base.tiles === null ? [] : [{ id: 'logs', type: 'circle', source: TILES, 'source-layer': 'logs', paint: { 'circle-radius': 0, 'circle-opacity': 0 } } as const]),
    ],
  };
}
