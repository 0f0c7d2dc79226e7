/**
 * The last step of the build: packs dist/cli/main.js, what it imports and commander into one file.
 * Node takes its time over every module it loads, and help would need twenty. What a command
 * imports when it runs stays in files of its own, which the library shares. A class that errors are
 * told by, such as Fault, must be imported that way too: packed in, it would be another class.
 */
import { readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { build } from 'esbuild';

const PROGRAM = fileURLToPath(new URL('../../dist/cli/main.js', import.meta.url));

// What is packed in goes with its licence.
const commander = dirname(createRequire(import.meta.url).resolve('commander'));
const licence = readFileSync(join(commander, 'LICENSE'), 'utf8').replaceAll('*/', '* /');

const dynamicImportsStayOutside = {
  name: 'dynamic-imports-stay-outside',
  setup: ({ onResolve }) => {
    onResolve({ filter: /^\./ }, ({ kind, path }) =>
      kind === 'dynamic-import' ? { path, external: true } : undefined,
    );
  },
};

await build({
  entryPoints: [PROGRAM],
  outfile: PROGRAM,
  allowOverwrite: true,
  bundle: true,
  platform: 'node',
  target: 'node20',
  format: 'esm',
  // For commander, which is CommonJS.
  banner: {
    js: "import { createRequire } from 'node:module';\nconst require = createRequire(import.meta.url);",
  },
  footer: { js: `/* commander\n${licence}*/` },
  plugins: [dynamicImportsStayOutside],
});
