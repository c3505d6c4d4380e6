import { greatCircleMiles, type Point } from '~/domain/geo.ts';
import { paths } from '~/domain/paths.ts';
import type { MapPlace } from './types.ts';

/** One mark of the map: a listing, or several that lie near each other at this zoom. */
export interface MapMark {
  /** The same for as long as the mark stands for the same cell of the map. */
  readonly key: string;
  readonly at: Point;
  readonly listings: number;
  /** Largest end over the bark, in; sets the mark's size. */
  readonly largestIn: number;
  /** Those of its listings that are rows of the list, in its order. */
  readonly rows: readonly MapPlace[];
  /** A single listing that is no row of the list. */
  readonly only: { readonly number: number; readonly title: string } | null;
}

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

const shortCount = (count: number): string => (count < 1000 ? String(count) : `${Math.floor(count / 100) / 10}k`.replace('.0k', 'k'));
const rowWords = ({ title, distanceMi }: MapPlace): string => (distanceMi === null ? title : `${title}, ${distanceMi.toFixed(1)} miles away`);

/** A mark names so many of its rows and counts the rest. */
const MOST_NAMED = 3;

/** What a mark says to somebody who does not see it. */
export function markWords({ at, listings, rows, only }: MapMark, from: Point | null): string {
  const away = from ? `, about ${Math.round(greatCircleMiles(from, at))} miles away` : '';
  if (only) return `${only.title}${away}; not on this page of the list`;
  if (rows.length === 0) return `${listings.toLocaleString('en-US')} listings${away}; shows them closer`;
  const more = listings - Math.min(rows.length, MOST_NAMED);
  return [...rows.slice(0, MOST_NAMED).map(rowWords), ...(more > 0 ? [`${more.toLocaleString('en-US')} more here`] : [])].join('; ');
}

/**
 * The mark's element: a link to a listing that is no row of the list, or to a list of what lies there when the map goes no closer;
 * otherwise a button.
 * @param list where a mark of several leads when it cannot be shown closer; null while it can
 */
export function markElement(mark: MapMark, list: string | null): HTMLElement {
  const address = mark.only ? paths.listing(mark.only.number) : mark.rows.length === 0 ? list : null;
  const element = document.createElement(address === null ? 'button' : 'a');
  if (element instanceof HTMLAnchorElement) element.href = address ?? '';
  else element.setAttribute('type', 'button');
  element.className = mark.rows.length > 0 ? 'map-log' : 'map-log map-log-beyond';
  element.append(logEnd(mark.largestIn));
  if (mark.listings > 1) {
    const count = document.createElement('span');
    count.className = 'map-log-count';
    count.textContent = shortCount(mark.listings);
    element.append(count);
  }
  return element;
}
