import { busy } from './problems.ts';

/** Lets a number of tasks run at once, as many wait in line, and refuses the rest. */
export class Gate {
  readonly #atOnce: number;
  readonly #inLine: number;
  readonly #waiting: (() => void)[] = [];
  #running = 0;

  constructor(atOnce: number, inLine: number) {
    this.#atOnce = atOnce;
    this.#inLine = inLine;
  }

  /** @throws ProblemError 503 where the line is full. */
  async run<T>(task: () => Promise<T>): Promise<T> {
    if (this.#running >= this.#atOnce) {
      if (this.#waiting.length >= this.#inLine) {
        throw busy('Too many uploads arrive at once; send this one again in some seconds.');
      }
      await new Promise<void>((resolve) => this.#waiting.push(resolve));
    } else {
      this.#running += 1;
    }
    try {
      return await task();
    } finally {
      const next = this.#waiting.shift();
      if (next) next();
      else this.#running -= 1;
    }
  }
}
