import { execFileSync } from 'node:child_process';
import { readdirSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { expect, test } from 'vitest';
import { newFolder } from '../new-folder.js';

const root = fileURLToPath(new URL('../..', import.meta.url));

test('the packed package, installed in an empty folder, runs, is imported and type-checks', () => {
  const packed = newFolder();
  // The scripts would only build again what is built.
  const npm = (args: string[], cwd: string): string =>
    execFileSync('npm', args, { cwd, encoding: 'utf8', stdio: ['ignore', 'pipe', 'pipe'] });
  npm(['pack', '--ignore-scripts', '--pack-destination', packed], root);
  const [tarball] = readdirSync(packed);
  const user = newFolder();
  writeFileSync(
    join(user, 'package.json'),
    '{ "name": "user", "type": "module", "private": true }',
  );
  npm(['install', '--prefer-offline', '--no-audit', '--no-fund', join(packed, tarball!)], user);

  const command = join(user, 'node_modules', '.bin', 'hillproof');
  expect(
    execFileSync(command, ['demo', '--out', 'demo'], { cwd: user, encoding: 'utf8' }),
  ).toContain('whole: demo holds what its inputs give');

  writeFileSync(
    join(user, 'use.ts'),
    `import { loadSource, uniformConditions, fromCelsius, type Peak } from 'hillproof';
const { source } = loadSource('demo/inputs/module.yaml');
const peaks: readonly Peak[] = source.at(uniformConditions(1000, fromCelsius(25))).peaks();
console.log(peaks[0]?.power.toFixed(2));
`,
  );
  const tsc = join(root, 'node_modules', 'typescript', 'bin', 'tsc');
  const options = ['--module', 'nodenext', '--target', 'es2023', '--lib', 'es2023,dom', '--strict'];
  execFileSync(process.execPath, [tsc, ...options, 'use.ts'], { cwd: user, stdio: 'inherit' });
  expect(execFileSync(process.execPath, ['use.js'], { cwd: user, encoding: 'utf8' })).toBe(
    '268.51\n',
  );
  const schema = "import.meta.resolve('hillproof/schema/datasheet.schema.json')";
  const resolve = ['--input-type=module', '-e', `console.log(${schema})`];
  expect(execFileSync(process.execPath, resolve, { cwd: user, encoding: 'utf8' })).toMatch(
    /dist\/schema\/datasheet\.schema\.json\n$/,
  );
}, 180_000);
