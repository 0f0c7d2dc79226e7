/** Runs a WebAssembly program that has a main and prints: no files, no clock, no arguments. */
import { wasm, type WasmMemory, type WasmModule } from './web-assembly.js';

export interface Ended {
  readonly status: number;
  readonly stdout: string;
  readonly stderr: string;
}

/** @throws WebAssembly.RuntimeError if the program traps. */
export function runWasi(module: WasmModule): Ended {
  const written: [Uint8Array[], Uint8Array[]] = [[], []];
  const view = (): DataView => new DataView(memory.buffer);

  const calls: Record<string, (...args: number[]) => number> = {
    fd_write(fd, list, count, total) {
      let size = 0;
      for (let k = 0; k < count; k++) {
        const at = view().getUint32(list + 8 * k, true);
        const length = view().getUint32(list + 8 * k + 4, true);
        written[fd === 2 ? 1 : 0].push(new Uint8Array(memory.buffer).slice(at, at + length));
        size += length;
      }
      view().setUint32(total, size, true);
      return 0;
    },
    // A character device, so that the C library flushes at every line.
    fd_fdstat_get(_fd, at) {
      new Uint8Array(memory.buffer, at, 24).fill(0)[0] = 2;
      return 0;
    },
    fd_close: () => 0,
    fd_seek: () => 70, // ESPIPE
    proc_exit(status) {
      throw new Exited(status);
    },
  };
  const instance = new wasm.Instance(module, { wasi_snapshot_preview1: calls });
  const { memory, _start } = instance.exports as { memory: WasmMemory; _start: () => void };
  const [stdout, stderr] = written;
  const status = exitStatus(_start);
  const text = (parts: Uint8Array[]): string => Buffer.concat(parts).toString('utf8');
  return { status, stdout: text(stdout), stderr: text(stderr) };
}

class Exited extends Error {
  constructor(readonly status: number) {
    super(`exit ${status}`);
  }
}

function exitStatus(start: () => void): number {
  try {
    start();
    return 0;
  } catch (error) {
    if (error instanceof Exited) return error.status;
    throw error;
  }
}
