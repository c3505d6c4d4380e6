/**
 * Vite plugin: the build fails when code bound for the browser reaches `src/server/`.
 * Without it an island that imports a model builds without a word and ships the ORM to every visitor.
 * @returns {import('vite').Plugin}
 */
export function serverOnly() {
  return {
    name: 'skidway:server-only',
    enforce: 'pre',
    apply: 'build',
    async resolveId(source, importer, options) {
      if (options?.ssr || this.environment?.name === 'ssr' || this.environment?.name === 'prerender') return null;
      const resolved = await this.resolve(source, importer, { ...options, skipSelf: true });
      if (resolved && /\/src\/server\//.test(resolved.id)) {
        this.error(`Browser code reaches the server: ${importer ?? 'an entry'} imports ${source}. Islands may use domain, schemas and the API client.`);
      }
      return null;
    },
  };
}
