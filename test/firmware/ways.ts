/** The ways in which the firmware library is compiled for the tests: each test runs in all. */
import { afterAll, beforeAll, describe } from 'vitest';
import type { CLibrary } from './c-library.js';
import { canSanitize, findProgram } from './native-build.js';
import { openNativeLibrary } from './native-port.js';
import { COMPILE_TIMEOUT } from './wasm-build.js';
import { openWasmLibrary } from './wasm-port.js';

interface Way {
  /** Ends "compiled …". */
  readonly name: string;
  /** Whether this machine lacks what it needs. */
  readonly missing: boolean;
  readonly open: () => Promise<CLibrary>;
}

const bigEndian = {
  compiler: findProgram('powerpc-linux-gnu-gcc'),
  emulator: findProgram('qemu-ppc', 'qemu-ppc-static'),
};

const ways: readonly Way[] = [
  { name: 'to WebAssembly', missing: false, open: openWasmLibrary },
  {
    name: 'by the system compiler with sanitizers',
    missing: !canSanitize(),
    open: () => Promise.resolve(openNativeLibrary()),
  },
  {
    name: 'for a big-endian processor and emulated',
    missing: bigEndian.compiler === undefined || bigEndian.emulator === undefined,
    open: () =>
      Promise.resolve(
        openNativeLibrary({}, { compiler: bigEndian.compiler!, flags: ['-static'] }, [
          bigEndian.emulator!,
        ]),
      ),
  },
];

/**
 * Declares tests once for each way; where the machine lacks what a way needs, they are skipped by
 * name. The library is opened before the first of them and closed after the last: a sanitizer's
 * complaint at any time fails them.
 */
export function describeEveryWay(title: string, tests: (library: () => CLibrary) => void): void {
  for (const { name, missing, open } of ways) {
    describe.skipIf(missing)(`${title}, compiled ${name},`, () => {
      let library: CLibrary;
      beforeAll(async () => {
        library = await open();
      }, COMPILE_TIMEOUT);
      afterAll(() => library.close());
      tests(() => library);
    });
  }
}
