import { spawnSync } from 'node:child_process';
import { fileURLToPath } from 'node:url';
import { crc32 } from 'node:zlib';
import { describe, expect, test } from 'vitest';
import { HP } from './c-library.js';
import { cachePath, probeProgram, writeWhole } from './c-program.js';
import { compileNative, findProgram } from './native-build.js';
import { smallCurveSet, smallTimeline } from './small-files.js';
import { openWasmLibrary } from './wasm-port.js';
import { checkSyntax, COMPILE_TIMEOUT } from './wasm-build.js';

describe('for a processor whose int has 16 bits, the library', { timeout: COMPILE_TIMEOUT }, () => {
  test('compiles without a warning for MSP430 and AVR', async () => {
    await checkSyntax(probeProgram, 'msp430');
    await checkSyntax(probeProgram, 'avr', ['-mmcu=atmega2560']);
  });

  const compiler = findProgram('avr-gcc');
  const emulator = findProgram('simavr');
  const files = { 'a curve set': smallCurveSet(), 'a timeline': smallTimeline() };
  for (const [name, file] of Object.entries(files)) {
    test.skipIf(compiler === undefined || emulator === undefined)(
      `reads ${name} in program memory and interpolates as everywhere (AVR, emulated)`,
      async () => {
        const program = compileNative(avrProgram(file), {
          compiler: compiler!,
          flags: ['-Os', '-mmcu=atmega2560'],
        });
        const args = ['-m', 'atmega2560', '-f', '16000000', program];
        // It echoes what the processor prints on stderr, with a dot for each end of line.
        const { stderr } = spawnSync(emulator!, args, { encoding: 'utf8' });
        const printed = stderr.match(/[0-9a-f]{8}(?=\.)/g)?.map((word) => parseInt(word, 16));

        const library = await openWasmLibrary();
        const { open, walk } = await library.inspect(file);
        expect(open).toBe(HP.OK);
        expect(printed).toEqual([open, walk, hash(await library.interpolate(pseudoRandomFives()))]);
      },
    );
  }
});

function avrProgram(file: Uint8Array): Parameters<typeof compileNative>[0] {
  const here = fileURLToPath(new URL('.', import.meta.url));
  const source = cachePath('native-cache', `file-${crc32(file)}/file.c`);
  writeWhole(
    source,
    Buffer.from(`#include <avr/pgmspace.h>
#include <stdint.h>

extern const uint8_t file_bytes[];
extern const uint16_t file_length;
const uint8_t file_bytes[] PROGMEM = {${file.join(',')}};
const uint16_t file_length = ${file.length};
`),
  );
  return {
    sources: [...probeProgram.sources, `${here}avr-main.c`, source],
    includeDirs: [...(probeProgram.includeDirs ?? []), here],
    defines: { HP_CONFIG: '"avr-config.h"' },
  };
}

/** The same numbers as avr-main.c. */
function pseudoRandomFives(): number[][] {
  let state = 1;
  const next = (): number => {
    state ^= state << 13;
    state ^= state >>> 17;
    state ^= state << 5;
    return state >>> 0;
  };
  return Array.from({ length: 4000 }, (_, round) =>
    Array.from({ length: 5 }, () => next() >>> (round % 2 === 0 ? 0 : 16)),
  );
}

const hash = (words: Uint32Array): number =>
  words.reduce((sum, word) => Math.imul(sum ^ word, 16777619) >>> 0, 2166136261);
