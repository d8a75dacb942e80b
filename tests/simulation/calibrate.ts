import { fork } from 'node:child_process';
import { availableParallelism } from 'node:os';
import { parseArgs } from 'node:util';
import type { Answer, Task } from './calibrate-worker.ts';
import { cells, type Cell } from './cells.ts';
import { summarise, type Summary } from './summary.ts';
import { summaryTable } from './summary-table.ts';
import type { Trial } from './trial.ts';

const USAGE = `npx tsx tests/simulation/calibrate.ts [--captures 200] [--cells part-of-a-name …] [--seed 1] [--threads n] [--json] [--list]

Simulates captures of every cell (a chain with its points, spacing, signals and floor), has the engine
estimate them and holds the estimates against what is true. --cells runs the cells whose names contain one of the parts.
The result depends on the seed and the number of captures alone, not on threads or order.`;

const CAPTURES_PER_TASK = 10;

const { values, positionals } = parseArgs({
  allowPositionals: true,
  options: {
    captures: { type: 'string', default: '200' },
    cells: { type: 'string', multiple: true, default: [] },
    seed: { type: 'string', default: '1' },
    threads: { type: 'string', default: String(availableParallelism()) },
    json: { type: 'boolean', default: false },
    list: { type: 'boolean', default: false },
    help: { type: 'boolean', default: false },
  },
});

function wholeNumber(name: string, text: string): number {
  const value = Number(text);
  if (!Number.isInteger(value) || value < 1) {
    console.error(`--${name} takes a whole number from 1 on, not “${text}”.`);
    process.exit(1);
  }
  return value;
}

function tasksOf(chosen: Cell[], captures: number, seed: number): Task[] {
  const starts = Array.from(
    { length: Math.ceil(captures / CAPTURES_PER_TASK) },
    (_, i) => i * CAPTURES_PER_TASK,
  );
  return chosen.flatMap(({ name }) =>
    starts.map((from) => ({ cell: name, from, to: Math.min(captures, from + CAPTURES_PER_TASK), seed })),
  );
}

/** Runs all tasks on `threads` processes; trials by cell in the order of the captures. */
function runTasks(
  tasks: Task[],
  threads: number,
  onDone: (done: number) => void,
): Promise<Map<string, Trial[]>> {
  return new Promise((resolve, reject) => {
    const answers: Answer[] = [];
    let next = 0;
    const workers = Array.from({ length: Math.min(threads, tasks.length) }, () => {
      const worker = fork(new URL('./calibrate-worker.ts', import.meta.url), {
        execArgv: ['--import', 'tsx'],
      });
      const feed = () => (next < tasks.length ? worker.send(tasks[next++]) : worker.disconnect());
      const fail = (reason: Error) => {
        for (const one of workers) one.kill();
        reject(reason);
      };
      worker.on('error', fail);
      worker.on('exit', (code) => code && fail(new Error(`a worker ended with ${code}`)));
      worker.on('message', (answer: Answer) => {
        if (answer.failure) {
          fail(new Error(`${answer.task.cell}, captures from ${answer.task.from}: ${answer.failure}`));
          return;
        }
        answers.push(answer);
        onDone(answers.length);
        feed();
        if (answers.length === tasks.length) resolve(byCell(answers));
      });
      feed();
      return worker;
    });
  });
}

function byCell(answers: Answer[]): Map<string, Trial[]> {
  const trials = new Map<string, Trial[]>();
  for (const { task, trials: some } of answers.sort((a, b) => a.task.from - b.task.from)) {
    trials.set(task.cell, [...(trials.get(task.cell) ?? []), ...some]);
  }
  return trials;
}

async function main(): Promise<void> {
  const parts = [...values.cells, ...positionals];
  const chosen = cells.filter(({ name }) => parts.length === 0 || parts.some((part) => name.includes(part)));
  if (values.help) return console.log(USAGE);
  if (values.list) return console.log(chosen.map(({ name }) => name).join('\n'));
  if (chosen.length === 0) {
    console.error(`No cell’s name contains ${parts.join(' or ')}; --list shows all.`);
    process.exit(1);
  }
  const captures = wholeNumber('captures', values.captures);
  const tasks = tasksOf(chosen, captures, wholeNumber('seed', values.seed));
  const start = performance.now();
  const trials = await runTasks(tasks, wholeNumber('threads', values.threads), (done) => {
    if (!process.stderr.isTTY && done % Math.ceil(tasks.length / 10) !== 0 && done < tasks.length) return;
    const seconds = ((performance.now() - start) / 1000).toFixed(0);
    process.stderr.write(
      `${process.stderr.isTTY ? '\r' : '\n'}${done} of ${tasks.length} parts, ${seconds} s `,
    );
  });
  process.stderr.write('\n');
  const summaries: Summary[] = chosen.map((cell) => summarise(cell, trials.get(cell.name) ?? []));
  if (values.json)
    console.log(JSON.stringify({ captures, seed: Number(values.seed), cells: summaries }, null, 2));
  else console.log(summaryTable(chosen, summaries));
}

await main();
