import { spawnSync } from 'node:child_process';
import { writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { expect, test } from 'vitest';
import { newFolder } from '../new-folder.js';
import { SMALL_MODEL } from './small-suite.js';

const program = fileURLToPath(new URL('../../dist/cli/main.js', import.meta.url));

test('a timeline of 10 million samples is emitted with less than 250 MB resident', () => {
  const folder = newFolder();
  writeFileSync(join(folder, 'model.yaml'), SMALL_MODEL);
  writeFileSync(
    join(folder, 'weather.yaml'),
    `name: Ten million
irradiance_W_per_m2: 300
blocks:
  - repeat:
      times: 99999
      blocks:
        - ramp: { irradiance_W_per_m2: 1000, for_s: 10 }
        - hold: { for_s: 40 }
        - ramp: { irradiance_W_per_m2: 300, for_s: 10 }
        - hold: { for_s: 40 }
  - hold: { for_s: 99 }
`,
  );
  writeFileSync(
    join(folder, 'suite.yaml'),
    `suite: long
sources: { one: model.yaml }
weather: weather.yaml
formats: { voltage: UQ6.10, current: UQ4.12, time: { step: 1, bits: 32 } }
timeline: { every_s: 1 }
outputs: [binary]
`,
  );
  // Asks the program itself, as it ends, for the most memory it ever held.
  const watch = join(folder, 'watch.mjs');
  writeFileSync(
    watch,
    "process.on('exit', () => process.stderr.write(`resident ${process.resourceUsage().maxRSS}`));",
  );
  const out = join(folder, 'out');
  const run = spawnSync(
    process.execPath,
    ['--import', watch, program, 'emit', join(folder, 'suite.yaml'), '--out', out, '--json'],
    { encoding: 'utf8' },
  );
  const manifest = JSON.parse(run.stdout) as { products: { sections: { records: number }[] }[] };
  expect(manifest.products[0]?.sections[0]?.records).toBe(10_000_000);
  const kilobytes = Number(/resident (\d+)/.exec(run.stderr)?.[1]);
  console.log(`10,000,000 samples emitted, at most ${(kilobytes / 1000).toFixed(0)} MB resident`);
  expect(kilobytes).toBeLessThan(250_000);
}, 240_000);
