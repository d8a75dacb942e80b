import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { type ReadResult, UnreadableFile } from '../../server/reader/read-trace-file.ts';
import { bytesOf, hz, levels, read, table } from './reading.ts';

const ENDS = ['\n', '\r\n', '\r'];
const SHAPES = [
  { delimiter: ',', comma: false },
  { delimiter: ';', comma: false },
  { delimiter: ';', comma: true },
  { delimiter: '\t', comma: false },
  { delimiter: '\t', comma: true },
  { delimiter: '|', comma: true },
  { delimiter: '   ', comma: false },
  { delimiter: '  ', comma: true },
];

type Encoder = (text: string) => Uint8Array;
const sixteen =
  (little: boolean): Encoder =>
  (text) =>
    Uint8Array.from(
      Array.from(`\ufeff${text}`).flatMap((letter) => {
        const code = letter.charCodeAt(0);
        return little ? [code & 255, code >> 8] : [code >> 8, code & 255];
      }),
    );
const ENCODERS: Encoder[] = [
  bytesOf,
  (text) => bytesOf(`\ufeff${text}`),
  (text) => Uint8Array.from(Array.from(text, (letter) => letter.charCodeAt(0))),
  sixteen(true),
  sixteen(false),
];

const PRECISE = { noNaN: true, noDefaultInfinity: true };

const written = fc.record({
  shape: fc.constantFrom(...SHAPES),
  end: fc.constantFrom(...ENDS),
  encode: fc.constantFrom(...ENCODERS),
  traces: fc.integer({ min: 1, max: 3 }),
  startHz: fc.double({ min: 0, max: 4e10, ...PRECISE }),
  steps: fc.array(fc.double({ min: 1, max: 1e6, ...PRECISE }), { minLength: 3, maxLength: 30 }),
  level: fc.array(fc.double({ min: -200, max: -0.5, ...PRECISE }), { minLength: 93, maxLength: 93 }),
  preamble: fc.boolean(),
  chunk: fc.constantFrom(1, 7, 1000),
});

function same(a: ReadResult, b: ReadResult): void {
  expect(a).toEqual(b);
}

describe('what is written reads back', () => {
  it('exactly, whatever the delimiter, decimal mark, line end, encoding and chunks', async () => {
    await fc.assert(
      fc.asyncProperty(
        written,
        async ({ shape, end, encode, traces, startHz, steps, level, preamble, chunk }) => {
          const axis = steps.reduce<number[]>((all, step) => [...all, (all.at(-1) ?? startHz) + step], []);
          const columns = Array.from({ length: traces }, (_, trace) =>
            axis.map((_, row) => level[(trace * 31 + row) % level.length]),
          );
          const cell = (value: number) => (shape.comma ? String(value).replace('.', ',') : String(value));
          const head = ['Frequency (Hz)', ...columns.map((_, trace) => `Trace ${trace + 1} (dBµV)`)].join(
            shape.delimiter,
          );
          const settings = preamble ? `Dämpfung: 10 dB${end}RBW: 1 Hz${end}${end}` : '';
          const rows = table(
            axis.length,
            (i) => [axis[i], ...columns.map((one) => one[i])].map(cell).join(shape.delimiter),
            end,
          );
          const bytes = encode(`${settings}${head}${end}${rows}`);
          const result = await read(bytes, chunk);
          expect(hz(result)).toEqual(axis);
          expect(result.traces.map(({ name }) => name)).toEqual(
            columns.map((_, trace) => `Trace ${trace + 1}`),
          );
          columns.forEach((column, trace) =>
            expect(levels(result, trace)).toEqual(column.map((value) => value - 90 - 10 * Math.log10(50))),
          );
          expect(Object.keys(result.settings)).toEqual(preamble ? ['rbwHz', 'attenuationDb'] : []);
        },
      ),
      { numRuns: 300, seed: 20261201 },
    );
  });

  it('alike in chunks of one byte, of seven and in one', async () => {
    const text = `Start;69,5;MHz\r\nRBW;10;kHz\r\n\r\nFrequenz [MHz];Pegel [dBm]\r\n${table(500, (i) => `${(69.5 + i / 500).toFixed(4).replace('.', ',')};-107,${i % 10}${i === 77 ? 'x' : ''}`, '\r\n')}END\r\n`;
    const whole = await read(text);
    same(await read(text, 1), whole);
    same(await read(text, 7), whole);
    const wide = sixteen(true)(text);
    same(await read(wide, 1), await read(wide));
    const long = `Hz,dBm\r\n${table(40_000, (i) => `${1e6 + i},${-80 - (i % 7) / 8}`, '\r\n')}`;
    same(await read(long, 4093), await read(long));
  });
});

const SEEDS = [
  `RBW,10,kHz\nDetector,Sample\nFrequency (Hz),Level (dBm)\n${table(40, (i) => `${1000 + i},${-80 - i / 10}`)}`,
  `Start: 1 MHz\nStop: 2 MHz\nUnit: dBm\n${table(40, (i) => `-${100 + i},5`)}`,
  `No.;Freq/MHz;Max/dBm;"RMS";Min\n${table(40, (i) => `${i};${i + 10},5;-80;"-90,1";-100`)}Marker;1;2\n`,
  `Trace 1\nHz dBm\n${table(20, (i) => `${i} -8${i}`)}Trace 2\nHz dBm\n${table(20, (i) => `${i} -9${i}`)}`,
];

const mutation = fc.oneof(
  fc.record({ kind: fc.constant('flip' as const), at: fc.nat(), with: fc.integer({ min: 0, max: 255 }) }),
  fc.record({ kind: fc.constant('cut' as const), at: fc.nat(), with: fc.nat({ max: 400 }) }),
  fc.record({ kind: fc.constant('copy' as const), at: fc.nat(), with: fc.nat({ max: 400 }) }),
  fc.record({ kind: fc.constant('end' as const), at: fc.nat(), with: fc.constant(0) }),
  fc.record({
    kind: fc.constant('insert' as const),
    at: fc.nat(),
    with: fc.constantFrom(0, 9, 10, 13, 34, 44, 59, 32, 45, 46, 58, 61, 101, 124, 0x1a, 0xb5, 0xfe, 0xff),
  }),
);

function mutated(bytes: Uint8Array, kind: string, at: number, value: number): Uint8Array {
  const list = Array.from(bytes);
  const place = list.length === 0 ? 0 : at % list.length;
  if (kind === 'flip') list[place] = value;
  else if (kind === 'cut') list.splice(place, value);
  else if (kind === 'copy') list.splice(place, 0, ...list.slice(place, place + value));
  else if (kind === 'end') list.length = place;
  else list.splice(place, 0, value);
  return Uint8Array.from(list);
}

/** A readable result is sound; all else is an UnreadableFile with a sentence. */
async function soundOrRefused(bytes: Uint8Array): Promise<void> {
  try {
    const { traces, problems } = await read(bytes);
    expect(traces.length).toBeGreaterThan(0);
    for (const { frequencyHz, level } of traces) {
      expect(level.length).toBe(frequencyHz.length);
      expect(level.length).toBeGreaterThan(1);
      expect(level.every((value) => Math.abs(value) <= 400)).toBe(true);
      expect(
        frequencyHz.every((value, i) => Number.isFinite(value) && (i === 0 || value > frequencyHz[i - 1])),
      ).toBe(true);
    }
    for (const { message, advice } of problems) expect(`${message} ${advice}`).toMatch(/\S.*\.$/s);
  } catch (error) {
    if (!(error instanceof UnreadableFile)) throw error;
    expect(error.problems[0].message).toMatch(/\S/);
    expect(error.problems[0].advice).toMatch(/\.$/);
  }
}

describe('garbage', () => {
  it('is read soundly or refused, whatever happens to a file', async () => {
    await fc.assert(
      fc.asyncProperty(
        fc.constantFrom(...SEEDS),
        fc.array(mutation, { minLength: 1, maxLength: 8 }),
        async (seed, mutations) => {
          const bytes = mutations.reduce(
            (all, { kind, at, with: value }) => mutated(all, kind, at, value),
            bytesOf(seed),
          );
          await soundOrRefused(bytes);
        },
      ),
      { numRuns: 1500, seed: 20261202 },
    );
  }, 60_000);

  it('is refused where it is nothing but bytes or delimiters', async () => {
    await fc.assert(fc.asyncProperty(fc.uint8Array({ maxLength: 400 }), soundOrRefused), {
      numRuns: 300,
      seed: 1,
    });
    const tokens = fc.constantFrom(
      '1',
      '-80',
      ',',
      ';',
      '\t',
      '|',
      ' ',
      '\n',
      '\r',
      '"',
      'Hz',
      'dBm',
      'RBW',
      ':',
      '=',
      '#',
      'e',
      '.',
      'NaN',
      '__proto__',
      '(',
      '[',
    );
    await fc.assert(
      fc.asyncProperty(fc.array(tokens, { maxLength: 120 }), (parts) =>
        soundOrRefused(bytesOf(parts.join(''))),
      ),
      { numRuns: 1500, seed: 2 },
    );
  }, 60_000);
});
