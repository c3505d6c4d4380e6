import { Map, NavigationControl, setWorkerUrl } from 'maplibre-gl';
import workerUrl from 'maplibre-gl/dist/maplibre-gl-worker.mjs?url';
import 'maplibre-gl/dist/maplibre-gl.css';
import type { FeatureCollection } from 'geojson';
import { paths } from '~/domain/paths.ts';
import { loadCounties } from './counties.ts';
import { addHere, addMarks } from './marks.ts';
import { bounds, named, ringLabels, ringLines } from './shapes.ts';
import { mapStyle } from './style.ts';
import type { MapContent, MapEvents, MapHandle } from './types.ts';

const nothing: FeatureCollection = { type: 'FeatureCollection', features: [] };

/**
 * Draws the map into an element: counties, towns, rings of distance and a mark for each listing. Loaded only when a map is
 * on the screen.
 * @throws when the shapes cannot be fetched or the device has no WebGL.
 */
export async function drawMap(frame: HTMLElement, content: MapContent, events: MapEvents): Promise<MapHandle> {
  const { from, radiusMi, places, towns, tiles } = content;
  const shapes = await loadCounties();
  setWorkerUrl(workerUrl);
  const style = () =>
    mapStyle({
      ...shapes,
      towns: named(towns),
      rings: from && radiusMi ? ringLines(from, radiusMi) : nothing,
      ringNames: from && radiusMi ? ringLabels(from, radiusMi) : nothing,
      tiles: tiles === null ? null : `${location.origin}${paths.tiles}/{z}/{x}/{y}${tiles}`,
    });
  const map = new Map({
    container: frame,
    style: style(),
    bounds: bounds(from, radiusMi, places),
    fitBoundsOptions: { padding: 24, maxZoom: 11 },
    maxZoom: 12,
    minZoom: 2,
    dragRotate: false,
    pitchWithRotate: false,
    touchPitch: false,
    cooperativeGestures: false,
    scrollZoom: false,
    attributionControl: false,
  });
  map.touchZoomRotate.disableRotation();
  map.getCanvas().setAttribute('aria-label', 'Map of the listings; the arrow keys move it, plus and minus zoom');
  map.addControl(new NavigationControl({ showCompass: false }), 'top-right');
  if (from) addHere(map, from);
  const light = addMarks(map, content, events);
  map.on('moveend', (event) => {
    // Only a move that a person made has a browser event behind it.
    if (event.originalEvent) events.onMiddle(map.getCenter());
  });
  const dark = matchMedia('(prefers-color-scheme: dark)');
  const recolour = (): void => void map.setStyle(style());
  dark.addEventListener('change', recolour);
  return {
    light,
    remove: () => {
      dark.removeEventListener('change', recolour);
      map.remove();
    },
  };
}
