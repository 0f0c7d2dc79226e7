import { Presets, SingleBar } from 'cli-progress';

/** A progress line on stderr while something long goes on; silent where stderr is no terminal. */
export class ProgressLine {
  readonly #bar = new SingleBar(
    { format: '{title} {percentage} %', clearOnComplete: true, hideCursor: true },
    Presets.rect,
  );
  #running = false;

  show(title: string, done: number, total: number): void {
    if (!this.#running) this.#bar.start(total, done, { title });
    this.#running = true;
    this.#bar.setTotal(total);
    this.#bar.update(done, { title });
  }

  clear(): void {
    if (this.#running) this.#bar.stop();
    this.#running = false;
  }
}
