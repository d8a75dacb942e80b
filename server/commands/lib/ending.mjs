import { Refusal } from './project.mjs';

/** What must be undone before the command ends, last begun first. */
export class Ending {
  /** @type {(() => Promise<void> | void)[]} */
  #undo = [];
  /** @type {Promise<void> | null} */
  #running = null;

  /** Whether the end has begun: nothing new may start. */
  get begun() {
    return this.#running !== null;
  }

  /**
   * @param {() => Promise<void> | void} undo
   * @returns {() => void} forgets it, for what has ended by itself.
   */
  add(undo) {
    this.#undo.push(undo);
    return () => {
      this.#undo = this.#undo.filter((other) => other !== undo);
    };
  }

  /** Undoes everything, once. */
  run() {
    this.#running ??= (async () => {
      for (let undo = this.#undo.pop(); undo; undo = this.#undo.pop()) {
        try {
          await undo();
        } catch (error) {
          console.error(error instanceof Error ? error.message : error);
        }
      }
    })();
    return this.#running;
  }
}

const PARENT_CHECK_MS = 500;

/**
 * Runs a command's work and ends it in order: at the work's own end, on SIGINT, SIGTERM or SIGHUP, and when the npm that
 * started it is gone.
 * @param {(ending: Ending) => Promise<number | void>} work answers the exit code, or nothing to go on until a signal.
 * @param {number} codeOnSignal
 */
export async function runCommand(work, codeOnSignal) {
  const ending = new Ending();
  /** @param {number} code */
  const end = async (code) => {
    await ending.run();
    process.exit(code);
  };
  for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP']) {
    process.on(signal, () => {
      if (!ending.begun) console.log('\nStopping …');
      void end(codeOnSignal);
    });
  }
  process.on('uncaughtException', (error) => {
    console.error(error);
    void end(1);
  });
  if (process.env.npm_lifecycle_event) {
    const parent = process.ppid;
    setInterval(() => process.ppid !== parent && void end(codeOnSignal), PARENT_CHECK_MS).unref();
  }
  try {
    const code = await work(ending);
    if (typeof code === 'number') await end(code);
  } catch (error) {
    if (ending.begun) return;
    console.error(error instanceof Refusal ? `\n${error.message}` : error);
    await end(1);
  }
}
