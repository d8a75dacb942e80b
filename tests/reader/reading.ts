import { readTraceFile, type ReadResult, UnreadableFile } from '../../server/reader/read-trace-file.ts';
import type { ReaderProblem } from '../../shared/capture.ts';
import type { Settings } from '../../shared/settings.ts';

/** Bytes cut into chunks of `size`. */
export async function* chunked(bytes: Uint8Array, size = bytes.length): AsyncGenerator<Uint8Array> {
  for (let from = 0; from < bytes.length; from += Math.max(1, size)) yield bytes.subarray(from, from + size);
}

export function bytesOf(text: string | Uint8Array): Uint8Array {
  return typeof text === 'string' ? new TextEncoder().encode(text) : text;
}

export function read(text: string | Uint8Array, chunk?: number): Promise<ReadResult> {
  return readTraceFile(chunked(bytesOf(text), chunk), { fileName: 'capture.csv' });
}

/** The problem that a file is refused with. */
export async function refusal(text: string | Uint8Array): Promise<ReaderProblem> {
  try {
    await read(text);
  } catch (error) {
    if (error instanceof UnreadableFile) return error.problems[0];
    throw error;
  }
  throw new Error('The file was read, but a refusal was expected.');
}

/** Setting → value. */
export function values(settings: Settings): Record<string, unknown> {
  return Object.fromEntries(Object.entries(settings).map(([name, setting]) => [name, setting.value]));
}

/** Setting → line of the file that states it. */
export function lines(settings: Settings): Record<string, number> {
  return Object.fromEntries(
    Object.entries(settings).map(([name, { origin }]) => [name, origin.kind === 'file' ? origin.line : 0]),
  );
}

export const codes = (result: ReadResult) => result.problems.map(({ code }) => code);

export const table = (rows: number, row: (index: number) => string, end = '\n') =>
  Array.from({ length: rows }, (_, index) => row(index) + end).join('');

export const hz = (result: ReadResult, trace = 0) => Array.from(result.traces[trace].frequencyHz);
export const levels = (result: ReadResult, trace = 0) => Array.from(result.traces[trace].level);
