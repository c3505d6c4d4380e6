import { Marker, type Map } from 'maplibre-gl';
import type { MapEvents, MapPlace } from './types.ts';

const svgNamespace = 'http://www.w3.org/2000/svg';

function circle(radius: number, look: string): SVGCircleElement {
  const element = document.createElementNS(svgNamespace, 'circle');
  element.setAttribute('r', String(radius));
  element.setAttribute('class', look);
  return element;
}

/** A small log end whose size follows the largest log. */
function logEnd(largestIn: number): SVGSVGElement {
  const size = Math.round(Math.min(42, Math.max(24, 14 + largestIn * 0.8)));
  const svg = document.createElementNS(svgNamespace, 'svg');
  svg.setAttribute('viewBox', '-12 -12 24 24');
  svg.setAttribute('width', String(size));
  svg.setAttribute('height', String(size));
  svg.setAttribute('aria-hidden', 'true');
  svg.append(circle(11, 'log-bark'), circle(9.2, 'log-sapwood'), circle(5, 'log-ring'), circle(1.5, 'log-pith'));
  return svg;
}

const words = ({ title, distanceMi }: MapPlace): string => (distanceMi === null ? title : `${title}, ${distanceMi.toFixed(1)} miles away`);

/** Listings that share a grid cell share a mark; choosing it goes through them one after another. */
export function addMarks(map: Map, places: readonly MapPlace[], events: MapEvents): (number: number | null) => void {
  const groups = new globalThis.Map<string, MapPlace[]>();
  for (const place of places) {
    const key = `${place.lat},${place.lng}`;
    groups.set(key, [...(groups.get(key) ?? []), place]);
  }
  const buttons = new globalThis.Map<number, HTMLButtonElement>();
  const inOrder: HTMLButtonElement[] = [];
  for (const group of groups.values()) {
    const [first] = group;
    if (!first) continue;
    const button = document.createElement('button');
    button.type = 'button';
    button.className = 'map-log';
    button.append(logEnd(Math.max(...group.map((place) => place.largestIn))));
    if (group.length > 1) {
      const count = document.createElement('span');
      count.className = 'map-log-count';
      count.textContent = String(group.length);
      button.append(count);
    }
    let turn = -1;
    const next = (): MapPlace => group[(turn + group.length) % group.length] ?? first;
    button.addEventListener('mouseenter', () => events.onLight(first.number));
    button.addEventListener('focus', () => events.onLight(first.number));
    button.addEventListener('click', (event) => {
      event.stopPropagation();
      turn += 1;
      events.onChoose(next().number);
    });
    const marker = new Marker({ element: button }).setLngLat([first.lng, first.lat]).addTo(map);
    // The library names every mark "Map marker"; ours says which logs it is.
    marker.getElement().setAttribute('aria-label', group.map(words).join('; '));
    for (const place of group) buttons.set(place.number, button);
    inOrder.push(button);
  }
  roam(inOrder);
  return (number) => {
    for (const button of new Set(buttons.values())) button.toggleAttribute('data-lit', number !== null && buttons.get(number) === button);
  };
}

/** One stop of the tab key for all marks; the arrow keys go from one to the next in the list's order. */
function roam(marks: readonly HTMLButtonElement[]): void {
  marks.forEach((mark, index) => {
    mark.tabIndex = index === 0 ? 0 : -1;
    mark.addEventListener('focus', () => {
      for (const other of marks) other.tabIndex = other === mark ? 0 : -1;
    });
    mark.addEventListener('keydown', (event) => {
      const step = { ArrowRight: 1, ArrowDown: 1, ArrowLeft: -1, ArrowUp: -1 }[event.key];
      if (step === undefined) return;
      event.preventDefault();
      event.stopPropagation();
      marks[(index + step + marks.length) % marks.length]?.focus();
    });
  });
}

/** Where distances are measured from: a triangle, as on a paper map. */
export function addHere(map: Map, from: { readonly lat: number; readonly lng: number }): void {
  const svg = document.createElementNS(svgNamespace, 'svg');
  svg.setAttribute('viewBox', '0 0 18 16');
  svg.setAttribute('width', '18');
  svg.setAttribute('height', '16');
  const path = document.createElementNS(svgNamespace, 'path');
  path.setAttribute('d', 'M9 0L18 16H0Z');
  path.setAttribute('class', 'map-here');
  svg.append(path);
  const holder = document.createElement('div');
  holder.append(svg);
  const marker = new Marker({ element: holder }).setLngLat([from.lng, from.lat]).addTo(map);
  marker.getElement().setAttribute('role', 'img');
  marker.getElement().setAttribute('aria-label', 'Where distances are measured from');
}
