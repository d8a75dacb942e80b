import { refuse } from './problems.ts';
import { refuseForeignBytes } from './sniff.ts';

export const HEAD_BYTES = 262_144;
const SMALLEST_BLOCK = 65_536;
const LARGEST_BLOCK = 524_288;
const LARGEST_FILE = 268_435_456;

export type Encoding = 'UTF-8' | 'UTF-8 with BOM' | 'UTF-16 LE' | 'UTF-16 BE' | 'Latin-1' | 'ASCII';

/** A file as ASCII-compatible blocks: UTF-16 arrives as UTF-8, a byte order mark is gone. */
export interface OpenFile {
  encoding: Encoding;
  /** The first bytes, at most `HEAD_BYTES`, independent of how the chunks were cut. */
  head: Uint8Array;
  /** True where the head is the whole file. */
  complete: boolean;
  /** The whole file from its first byte, head included. */
  blocks: AsyncGenerator<Uint8Array>;
}

export function concat(parts: Uint8Array[]): Uint8Array {
  if (parts.length === 1) return parts[0];
  const whole = new Uint8Array(parts.reduce((sum, part) => sum + part.length, 0));
  let at = 0;
  for (const part of parts) {
    whole.set(part, at);
    at += part.length;
  }
  return whole;
}

/** Chunks of any size → blocks of 64 to 512 KiB (the last may be smaller); guards the size and the abort signal. */
async function* evenBlocks(
  chunks: AsyncIterable<Uint8Array>,
  signal: AbortSignal | undefined,
): AsyncGenerator<Uint8Array> {
  let pending: Uint8Array[] = [];
  let pendingBytes = 0;
  let bytes = 0;
  for await (const chunk of chunks) {
    signal?.throwIfAborted();
    bytes += chunk.length;
    if (bytes > LARGEST_FILE)
      refuse(
        'tooLarge',
        'This file is larger than 256 MiB, the most that is read.',
        'Export fewer points or fewer sweeps per file, or cut the file into parts.',
      );
    pending.push(chunk);
    pendingBytes += chunk.length;
    if (pendingBytes < SMALLEST_BLOCK) continue;
    const block = concat(pending);
    pending = [];
    pendingBytes = 0;
    for (let from = 0; from < block.length; from += LARGEST_BLOCK) {
      signal?.throwIfAborted();
      yield block.subarray(from, from + LARGEST_BLOCK);
    }
  }
  signal?.throwIfAborted();
  if (pendingBytes > 0) yield concat(pending);
}

function wideByZeros(head: Uint8Array): Encoding | null {
  const pairs = Math.min(head.length >> 1, 512);
  if (pairs < 8) return null;
  let even = 0;
  let odd = 0;
  for (let i = 0; i < pairs; i += 1) {
    if (head[2 * i] === 0) even += 1;
    if (head[2 * i + 1] === 0) odd += 1;
  }
  if (odd > 0.8 * pairs && even === 0) return 'UTF-16 LE';
  if (even > 0.8 * pairs && odd === 0) return 'UTF-16 BE';
  return null;
}

function isUtf8(head: Uint8Array): boolean {
  try {
    new TextDecoder('utf-8', { fatal: true }).decode(head, { stream: true });
    return true;
  } catch {
    return false;
  }
}

function detectEncoding(head: Uint8Array): Encoding {
  if (head[0] === 0xef && head[1] === 0xbb && head[2] === 0xbf) return 'UTF-8 with BOM';
  if (head[0] === 0xff && head[1] === 0xfe) return 'UTF-16 LE';
  if (head[0] === 0xfe && head[1] === 0xff) return 'UTF-16 BE';
  const wide = wideByZeros(head);
  if (wide) return wide;
  if (head.every((byte) => byte < 0x80)) return 'ASCII';
  return isUtf8(head) ? 'UTF-8' : 'Latin-1';
}

async function* narrowed(blocks: AsyncIterable<Uint8Array>, encoding: Encoding): AsyncGenerator<Uint8Array> {
  if (encoding === 'UTF-16 LE' || encoding === 'UTF-16 BE') {
    const decoder = new TextDecoder(encoding === 'UTF-16 LE' ? 'utf-16le' : 'utf-16be');
    const encoder = new TextEncoder();
    for await (const block of blocks) yield encoder.encode(decoder.decode(block, { stream: true }));
    yield encoder.encode(decoder.decode());
    return;
  }
  let first = encoding === 'UTF-8 with BOM';
  for await (const block of blocks) {
    yield first ? block.subarray(3) : block;
    first = false;
  }
}

/** Takes blocks until `bytes` are there (or the end); the answer's `source` yields the whole again. */
async function peek(
  source: AsyncGenerator<Uint8Array>,
  bytes: number,
): Promise<{ head: Uint8Array; complete: boolean; whole: AsyncGenerator<Uint8Array> }> {
  const taken: Uint8Array[] = [];
  let size = 0;
  let ended = false;
  while (size <= bytes && !ended) {
    const { value, done } = await source.next();
    if (done) ended = true;
    else {
      taken.push(value);
      size += value.length;
    }
  }
  async function* again(): AsyncGenerator<Uint8Array> {
    yield* taken;
    yield* source;
  }
  const all = taken.length === 0 ? new Uint8Array(0) : concat(taken);
  return { head: all.subarray(0, bytes), complete: size <= bytes, whole: again() };
}

/**
 * Opens a file: encoding found, foreign files refused, chunks turned into blocks.
 * @throws UnreadableFile for what isn't a text table or is over 256 MiB
 */
export async function openFile(
  chunks: AsyncIterable<Uint8Array>,
  signal: AbortSignal | undefined,
): Promise<OpenFile> {
  const raw = await peek(evenBlocks(chunks, signal), HEAD_BYTES);
  const encoding = detectEncoding(raw.head);
  refuseForeignBytes(raw.head, encoding.startsWith('UTF-16'));
  const { head, complete, whole } = await peek(narrowed(raw.whole, encoding), HEAD_BYTES);
  return { encoding, head, complete, blocks: whole };
}

const utf8 = new TextDecoder('utf-8', { fatal: true });
const latin1 = new TextDecoder('latin1');

/** Bytes of whole lines as text: UTF-8 where they are valid UTF-8, else Latin-1 (a lone 0xB5 is µ). */
export function decodeText(bytes: Uint8Array): string {
  try {
    return utf8.decode(bytes);
  } catch {
    return latin1.decode(bytes);
  }
}
