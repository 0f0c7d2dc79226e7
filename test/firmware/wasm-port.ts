/** The library compiled to WebAssembly, called in this process. */
import { probeProgram } from './c-program.js';
import { CLibrary, type Port } from './c-library.js';
import { compileWasm } from './wasm-build.js';
import { wasm, type WasmMemory } from './web-assembly.js';

interface Exports {
  readonly memory: WasmMemory;
  readonly __heap_base: { readonly value: number };
  readonly probe_open: (bytes: number, length: number) => number;
  readonly probe_call: (request: number, words: number, count: number, answer: number) => number;
}

export async function openWasmLibrary(): Promise<CLibrary> {
  const module = await compileWasm(probeProgram, { exports: ['probe_open', 'probe_call'] });
  const instance = new wasm.Instance(module);
  return new CLibrary('WebAssembly', new WasmPort(instance.exports as Exports));
}

/**
 * Memory from the bottom: stack and data of the library, words of a request and of its answer,
 * unused, file. The file ends where memory ends, so that a read beyond it traps.
 */
class WasmPort implements Port {
  private readonly words: number;

  constructor(private readonly library: Exports) {
    this.words = (library.__heap_base.value + 15) & ~15;
    this.reserve(this.words + ROOM_FOR_WORDS);
  }

  open(file: Uint8Array): Promise<number> {
    const { memory, probe_open } = this.library;
    this.reserve(this.words + ROOM_FOR_WORDS + file.length);
    const start = memory.buffer.byteLength - file.length;
    new Uint8Array(memory.buffer).set(file, start);
    return Promise.resolve(probe_open(start, file.length));
  }

  call(request: number, words: ArrayLike<number>): Promise<Uint32Array> {
    const { memory, probe_call } = this.library;
    const answer = this.words + 4 * words.length;
    if (4 * words.length + answerBytes(words.length) > ROOM_FOR_WORDS) {
      throw new RangeError(`${words.length} words are too many for one request.`);
    }
    new Uint32Array(memory.buffer, this.words, words.length).set(words);
    const count = probe_call(request, this.words, words.length, answer);
    return Promise.resolve(new Uint32Array(memory.buffer, answer, count).slice());
  }

  close(): Promise<void> {
    return Promise.resolve();
  }

  private reserve(bytes: number): void {
    const { memory } = this.library;
    const missing = bytes - memory.buffer.byteLength;
    if (missing > 0) memory.grow(Math.ceil(missing / 65_536));
  }
}

const ROOM_FOR_WORDS = 1 << 22;

/** PROBE_ANSWER_WORDS of probe.h, in bytes. */
const answerBytes = (count: number): number => 4 * (4 * count + 32);
