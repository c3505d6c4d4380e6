import { feature, mesh } from 'topojson-client';
import type { FeatureCollection, MultiLineString, MultiPolygon, Polygon } from 'geojson';
import type { GeometryCollection, Topology } from 'topojson-specification';
import topologyUrl from 'us-atlas/counties-10m.json?url';
import { named } from './shapes.ts';

type Atlas = Topology<{ counties: GeometryCollection<{ name: string }>; states: GeometryCollection<{ name: string }> }>;

const asCollection = (geometry: MultiLineString): FeatureCollection => ({ type: 'FeatureCollection', features: [{ type: 'Feature', properties: {}, geometry }] });

/** The middle of a county's box: near enough for its name. */
function middleOf(geometry: Polygon | MultiPolygon): { lat: number; lng: number } {
  const rings = geometry.type === 'Polygon' ? geometry.coordinates : geometry.coordinates.flat();
  const longest = rings.reduce((best, ring) => (ring.length > best.length ? ring : best), rings[0] ?? []);
  const lngs = longest.map((position) => position[0] ?? 0);
  const lats = longest.map((position) => position[1] ?? 0);
  return { lng: (Math.min(...lngs) + Math.max(...lngs)) / 2, lat: (Math.min(...lats) + Math.max(...lats)) / 2 };
}

export interface Counties {
  readonly counties: FeatureCollection;
  readonly countyLines: FeatureCollection;
  readonly stateLines: FeatureCollection;
  readonly countyNames: FeatureCollection;
}

let known: Promise<Counties> | undefined;

async function fetchCounties(): Promise<Counties> {
  const answer = await fetch(topologyUrl);
  if (!answer.ok) throw new Error(`The county shapes answered ${answer.status}.`);
  const atlas = (await answer.json()) as Atlas;
  const counties = feature(atlas, atlas.objects.counties);
  return {
    counties,
    countyLines: asCollection(mesh(atlas, atlas.objects.counties, (a, b) => a !== b)),
    stateLines: asCollection(mesh(atlas, atlas.objects.states)),
    countyNames: named(counties.features.flatMap(({ geometry, properties }) => (geometry.type === 'Polygon' || geometry.type === 'MultiPolygon' ? [{ name: properties.name, ...middleOf(geometry) }] : []))),
  };
}

/** County and state shapes (US Census, by us-atlas), fetched once from our own server. */
export function loadCounties(): Promise<Counties> {
  known ??= fetchCounties().catch((error: unknown) => {
    known = undefined;
    throw error;
  });
  return known;
}
