/** The library in a program of its own, under the sanitizers, fed through pipes. */
import { type ChildProcessWithoutNullStreams, spawn } from 'node:child_process';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { CLibrary, type Port } from './c-library.js';
import { type CProgram, libraryIncludeDir, probeProgram } from './c-program.js';
import { compileNative, type NativeOptions } from './native-build.js';

const here = fileURLToPath(new URL('.', import.meta.url));

/** The probe behind the driver that serves it on stdin and stdout. */
export const driverProgram: CProgram = {
  ...probeProgram,
  sources: [...probeProgram.sources, join(here, 'driver.c')],
  includeDirs: [libraryIncludeDir, here],
};

/**
 * @param defines Macros, such as the options of hillproof.h.
 * @param options Compiler and flags. Default: the one of the system, with sanitizers.
 * @param run A program that runs the one compiled, such as an emulator. Default: none.
 */
export function openNativeLibrary(
  defines: Readonly<Record<string, string>> = {},
  options: NativeOptions = { sanitize: true },
  run: readonly string[] = [],
): CLibrary {
  const [command, ...args] = [...run, compileNative({ ...driverProgram, defines }, options)];
  return new CLibrary('native', new ProcessPort(spawn(command, args)));
}

class ProcessPort implements Port {
  private readonly waiting: {
    resolve: (words: Uint32Array) => void;
    reject: (e: Error) => void;
  }[] = [];
  private received: Buffer = Buffer.alloc(0);
  private complaint = '';
  private ended: Error | undefined;
  private opened = 0;

  constructor(private readonly child: ChildProcessWithoutNullStreams) {
    child.stdout.on('data', (bytes: Buffer) => {
      this.received = Buffer.concat([this.received, bytes]);
      this.answer();
    });
    child.stderr.on('data', (bytes: Buffer) => (this.complaint += bytes.toString('utf8')));
    // A program that has died refuses its input: 'close' then tells why.
    child.stdin.on('error', () => undefined);
    child.on('error', (error) => {
      this.end(error);
    });
    child.on('close', (code, signal) => {
      this.end(new Error(`the program ended with ${signal ?? code}:\n${this.complaint}`));
    });
  }

  async open(file: Uint8Array): Promise<number> {
    // Every second file lies at an odd address.
    const [result] = await this.send([0, file.length, this.opened++ % 2], file);
    return result! | 0;
  }

  call(request: number, words: ArrayLike<number>): Promise<Uint32Array> {
    return this.send([request, words.length, ...Array.from(words)]);
  }

  async close(): Promise<void> {
    const ended = new Promise((resolve) => this.child.once('close', resolve));
    if (this.ended === undefined) {
      this.child.stdin.end();
      await ended;
    }
    if (this.child.exitCode !== 0) throw this.ended ?? new Error(this.complaint);
  }

  private send(words: readonly number[], bytes?: Uint8Array): Promise<Uint32Array> {
    if (this.ended !== undefined) return Promise.reject(this.ended);
    const request = Buffer.alloc(4 * words.length + (bytes?.length ?? 0));
    words.forEach((word, k) => request.writeUInt32LE(word >>> 0, 4 * k));
    if (bytes !== undefined) request.set(bytes, 4 * words.length);
    this.child.stdin.write(request);
    return new Promise((resolve, reject) => this.waiting.push({ resolve, reject }));
  }

  private answer(): void {
    let at = 0;
    while (this.received.length >= at + 4) {
      const count = this.received.readUInt32LE(at);
      if (this.received.length < at + 4 + 4 * count) break;
      const words = Uint32Array.from({ length: count }, (_, k) =>
        this.received.readUInt32LE(at + 4 + 4 * k),
      );
      this.waiting.shift()!.resolve(words);
      at += 4 + 4 * count;
    }
    this.received = this.received.subarray(at);
  }

  private end(error: Error): void {
    this.ended ??= error;
    for (const { reject } of this.waiting.splice(0)) reject(this.ended);
  }
}
