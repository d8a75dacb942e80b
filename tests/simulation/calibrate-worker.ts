import { z } from 'zod';
import { cells } from './cells.ts';
import { runTrial, type Trial } from './trial.ts';

/** Captures `from` to before `to` of one cell. */
export const Task = z.object({ cell: z.string(), from: z.number(), to: z.number(), seed: z.number() });
export type Task = z.infer<typeof Task>;

/** What a worker answers: the trials of its task in order, or why there are none. */
export interface Answer {
  task: Task;
  trials: Trial[];
  failure?: string;
}

function run(task: Task): Answer {
  const cell = cells.find(({ name }) => name === task.cell);
  if (!cell) return { task, trials: [], failure: `no cell ${task.cell}` };
  try {
    const trials: Trial[] = [];
    for (let index = task.from; index < task.to; index++) trials.push(runTrial(cell, task.seed, index));
    return { task, trials };
  } catch (error) {
    return {
      task,
      trials: [],
      failure: error instanceof Error ? (error.stack ?? error.message) : String(error),
    };
  }
}

process.on('message', (message) => process.send?.(run(Task.parse(message))));
process.on('disconnect', () => process.exit());
