import { Marker, type Map } from 'maplibre-gl';
import { greatCircleMiles, type Point } from '~/domain/geo.ts';
import { aroundHere } from './around-here.ts';
import { marksOfRows, marksOfTiles } from './gather.ts';
import { markElement, markWords, type MapMark } from './mark.ts';
import type { MapContent, MapEvents } from './types.ts';

/** How much closer a mark of several listings is shown when it is chosen, in zooms. */
const CLOSER = 2;

interface Placed {
  readonly mark: MapMark;
  readonly element: HTMLElement;
  readonly marker: Marker;
}

/**
 * Puts marks on the map and keeps them as it moves: of the tiles when there are some, otherwise of the list's rows. Choosing a mark goes
 * through its rows of the list one after another; one without rows is shown closer, or leads to its listing.
 * @returns lights the mark that holds a listing of the list, and no other
 */
export function addMarks(map: Map, content: MapContent, events: MapEvents): (number: number | null) => void {
  const { places, tiles, from, here } = content;
  let placed: readonly Placed[] = [];
  let lit: number | null = null;
  /** Where the keyboard was when its mark went: the mark nearest to it takes over. */
  let wasAt: Point | null = null;

  const showLit = (): void => {
    for (const { mark, element } of placed) element.toggleAttribute('data-lit', lit !== null && mark.rows.some(({ number }) => number === lit));
  };
  const place = (mark: MapMark): Placed => {
    const deepest = map.getZoom() >= map.getMaxZoom() - 0.01;
    const element = markElement(mark, mark.rows.length === 0 && deepest ? aroundHere(here, mark.at, 1) : null);
    const marker = new Marker({ element }).setLngLat([mark.at.lng, mark.at.lat]).addTo(map);
    // The library names every mark "Map marker"; ours says which logs it is.
    element.setAttribute('aria-label', markWords(mark, from));
    element.title = markWords(mark, from);
    const [first] = mark.rows;
    let turn = -1;
    for (const name of ['mouseenter', 'focus']) element.addEventListener(name, () => events.onLight(first?.number ?? null));
    element.addEventListener('click', (event) => {
      event.stopPropagation();
      if (element instanceof HTMLAnchorElement) return;
      if (first) {
        turn = (turn + 1) % mark.rows.length;
        events.onChoose((mark.rows[turn] ?? first).number);
        return;
      }
      // A click of the keyboard has no place of its own.
      if (event.detail === 0) wasAt = mark.at;
      map.easeTo({ center: [mark.at.lng, mark.at.lat], zoom: Math.min(map.getMaxZoom(), map.getZoom() + CLOSER) });
    });
    element.addEventListener('focus', () => {
      for (const other of placed) other.element.tabIndex = other.element === element ? 0 : -1;
    });
    element.addEventListener('keydown', (event) => {
      const step = { ArrowRight: 1, ArrowDown: 1, ArrowLeft: -1, ArrowUp: -1 }[event.key];
      if (step === undefined) return;
      event.preventDefault();
      event.stopPropagation();
      const index = placed.findIndex((one) => one.element === element);
      placed[(index + step + placed.length) % placed.length]?.element.focus();
    });
    return { mark, element, marker };
  };

  const show = (marks: readonly MapMark[]): void => {
    const before = new globalThis.Map(placed.map((one) => [sameMark(one.mark, map), one]));
    const next = marks.map((mark) => before.get(sameMark(mark, map)) ?? place(mark));
    const staying = new Set(next);
    for (const one of placed) {
      if (staying.has(one)) continue;
      if (one.element === document.activeElement) wasAt = one.mark.at;
      one.marker.remove();
    }
    placed = next;
    // One stop of the tab key for all marks; the arrow keys go from one to the next.
    const stop = placed.find(({ element }) => element.tabIndex === 0 && element === document.activeElement) ?? placed[0];
    for (const one of placed) one.element.tabIndex = one === stop ? 0 : -1;
    showLit();
    const around = wasAt;
    if (around && placed.length > 0) {
      wasAt = null;
      placed.reduce((best, one) => (greatCircleMiles(one.mark.at, around) < greatCircleMiles(best.mark.at, around) ? one : best)).element.focus();
    }
  };

  if (tiles === null) show(marksOfRows(places));
  else map.on('idle', () => show(marksOfTiles(map, places)));
  return (number) => {
    lit = number;
    showLit();
  };
}

/** Whether two marks may share an element: the same cell with the same content, seen from as close. */
const sameMark = ({ key, listings, rows, only }: MapMark, map: Map): string => `${key} ${listings} ${rows.length} ${only?.number ?? ''} ${map.getZoom() >= map.getMaxZoom() - 0.01}`;

const svgNamespace = 'http://www.w3.org/2000/svg';

/** Where distances are measured from: a triangle, as on a paper map. */
export function addHere(map: Map, from: Point): void {
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
