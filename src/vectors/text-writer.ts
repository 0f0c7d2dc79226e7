import type { ByteWriter } from './binary-sink.js';

/** Collects text and passes it on as UTF-8 in large pieces. */
export class TextWriter {
  readonly #write: ByteWriter;
  #pending = '';

  constructor(write: ByteWriter) {
    this.#write = write;
  }

  write(text: string): void {
    this.#pending += text;
    if (this.#pending.length >= PIECE) this.flush();
  }

  flush(): void {
    if (this.#pending !== '') this.#write(Buffer.from(this.#pending, 'utf8'));
    this.#pending = '';
  }
}

const PIECE = 65_536;
