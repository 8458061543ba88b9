// What: turns one TypeScript or ES module file into CommonJS for the Jest projects that run in Node (rules, api, browser).
// It checks no types (`npm run check:types` does) and does not hoist `jest.mock`: those projects fake nothing.
const { transformSync } = require('esbuild');

module.exports = {
  process(source, path) {
    const esm = source.includes('import.meta');
    const { code } = transformSync(source, {
      loader: path.endsWith('.tsx') ? 'tsx' : path.endsWith('.ts') ? 'ts' : 'js',
      jsx: 'automatic',
      format: 'cjs',
      target: 'node20',
      sourcefile: path,
      sourcemap: 'inline',
      // Jest has no dynamic import without a flag; a `require` in its place loads the same file through this transform.
      supported: { 'dynamic-import': false },
      define: esm ? { 'import.meta.url': '__moduleUrl', 'import.meta.dirname': '__dirname' } : {},
      banner: esm ? 'const __moduleUrl = require("node:url").pathToFileURL(__filename).href;' : '',
    });
    return { code };
  },
};
