import { Map, Marker, NavigationControl, setWorkerUrl, type GeoJSONSource } from 'maplibre-gl';
import workerUrl from 'maplibre-gl/dist/maplibre-gl-worker.mjs?url';
import 'maplibre-gl/dist/maplibre-gl.css';
import type { FeatureCollection, LineString } from 'geojson';
import type { Point } from '~/domain/geo.ts';
import { loadCounties } from '../logs-map/counties.ts';
import { named, pointAt } from '../logs-map/shapes.ts';
import { mapStyle } from '../logs-map/style.ts';

export interface PinHandle {
  readonly moveTo: (point: Point) => void;
  readonly remove: () => void;
}

const RINGS_MI = [0.25, 0.5, 1];
const STEP_MI = 0.01;

/** Rings that give the map its scale, round the pin. */
const rings = (at: Point): FeatureCollection<LineString> => ({
  type: 'FeatureCollection',
  features: RINGS_MI.map((miles) => ({ type: 'Feature', properties: {}, geometry: { type: 'LineString', coordinates: Array.from({ length: 73 }, (_, step) => pointAt(at, miles, step * 5)).map(({ lat, lng }) => [lng, lat]) } })),
});

/** Only the outer ring is named: the inner ones lie under the pin when one looks from far. */
const ringName = (at: Point): FeatureCollection => named([{ name: '1 mi', ...pointAt(at, 1, 40) }]);

function pinElement(): HTMLElement {
  const button = document.createElement('button');
  button.type = 'button';
  button.className = 'map-pin';
  const svg = document.createElementNS('http://www.w3.org/2000/svg', 'svg');
  svg.setAttribute('viewBox', '0 0 24 34');
  svg.setAttribute('width', '30');
  svg.setAttribute('height', '42');
  svg.setAttribute('aria-hidden', 'true');
  const path = document.createElementNS('http://www.w3.org/2000/svg', 'path');
  path.setAttribute('d', 'M12 33C12 33 2 19 2 12a10 10 0 0 1 20 0c0 7-10 21-10 21zM12 8a4 4 0 1 0 0 8 4 4 0 0 0 0-8z');
  path.setAttribute('fill-rule', 'evenodd');
  svg.append(path);
  button.append(svg);
  return button;
}

const headings: Readonly<Record<string, number>> = { ArrowUp: 0, ArrowRight: 90, ArrowDown: 180, ArrowLeft: 270 };

/**
 * Draws a map with one pin that can be dragged, put down by a click, or moved with the arrow keys.
 * @throws when the shapes cannot be fetched or the device has no WebGL.
 */
export async function drawPin(frame: HTMLElement, { at, towns }: { readonly at: Point; readonly towns: readonly (Point & { readonly name: string })[] }, onMove: (to: Point) => void): Promise<PinHandle> {
  const shapes = await loadCounties();
  setWorkerUrl(workerUrl);
  let here: Point = { lat: at.lat, lng: at.lng };
  const style = () => mapStyle({ ...shapes, towns: named(towns), rings: rings(here), ringNames: ringName(here), tiles: null });
  const map = new Map({ container: frame, style: style(), center: [here.lng, here.lat], zoom: 11.5, maxZoom: 15, minZoom: 5, dragRotate: false, pitchWithRotate: false, touchPitch: false, scrollZoom: false, attributionControl: false });
  map.touchZoomRotate.disableRotation();
  map.addControl(new NavigationControl({ showCompass: false }), 'top-right');
  map.getCanvas().setAttribute('aria-label', 'Map for setting the pin; the arrow keys move it, plus and minus zoom');
  const element = pinElement();
  const marker = new Marker({ element, anchor: 'bottom', draggable: true }).setLngLat([here.lng, here.lat]).addTo(map);
  marker.getElement().setAttribute('aria-label', 'The pin. Arrow keys move it, with Shift for longer steps');

  const place = (to: Point): void => {
    here = to;
    marker.setLngLat([to.lng, to.lat]);
    map.getSource<GeoJSONSource>('rings')?.setData(rings(to));
    map.getSource<GeoJSONSource>('ringNames')?.setData(ringName(to));
  };
  const byPerson = (to: Point): void => {
    place(to);
    onMove(to);
  };
  marker.on('dragend', () => byPerson(marker.getLngLat()));
  map.on('click', (event) => byPerson(event.lngLat));
  element.addEventListener('click', (event) => event.stopPropagation());
  element.addEventListener('keydown', (event) => {
    const heading = headings[event.key];
    if (heading === undefined) return;
    event.preventDefault();
    event.stopPropagation();
    byPerson(pointAt(here, event.shiftKey ? STEP_MI * 10 : STEP_MI, heading));
  });
  const dark = matchMedia('(prefers-color-scheme: dark)');
  const recolour = (): void => void map.setStyle(style());
  dark.addEventListener('change', recolour);
  return {
    moveTo(point) {
      if (Math.abs(point.lat - here.lat) < 1e-5 && Math.abs(point.lng - here.lng) < 1e-5) return;
      place(point);
      map.easeTo({ center: [point.lng, point.lat] });
    },
    remove() {
      dark.removeEventListener('change', recolour);
      map.remove();
    },
  };
}
