import { existsSync, readFileSync } from 'node:fs';
import { join } from 'node:path';

/** Addresses of built files as they stand in HTML, scripts and style sheets, absolute or beside the file that names them. */
const named = /(?:\/?_astro\/|\.\/)[\w.@~-]+\.(?:js|css|woff2|svg|png)/g;

/**
 * What a phone needs to open these pages without signal: the pages themselves and every built file they reach, however far.
 * Nothing else is kept, so that the map and the charts stay off a metered line.
 * @param {string} folder the built client files
 * @param {readonly string[]} pages paths of prerendered pages, like `day/index.html`
 * @returns {Set<string>} paths below the folder
 */
export function shellFiles(folder, pages) {
  const found = new Set();
  const waiting = [...pages];
  for (let path = waiting.pop(); path !== undefined; path = waiting.pop()) {
    if (found.has(path) || !existsSync(join(folder, path))) continue;
    found.add(path);
    if (!/\.(html|js|css)$/.test(path)) continue;
    for (const [address] of readFileSync(join(folder, path), 'utf8').matchAll(named)) waiting.push(address.replace(/^\/|^\.\//, '').replace(/^(?!_astro\/)/, '_astro/'));
  }
  return found;
}
