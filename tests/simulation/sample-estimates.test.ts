import { createReadStream, readFileSync } from 'node:fs';
import { describe, expect, test } from 'vitest';
import { z } from 'zod';
import { estimateDensity } from '../../server/engine/estimate.ts';
import { readTraceFile } from '../../server/reader/read-trace-file.ts';
import { parseSettings } from '../../server/reader/setting-values.ts';

const folder = new URL('../../samples/', import.meta.url);
const json = (name: string): unknown => JSON.parse(readFileSync(new URL(name, folder), 'utf8'));

const seeding = z
  .array(z.object({ file: z.string(), settings: z.record(z.string(), z.unknown()).optional() }))
  .parse(json('samples.json'));
const truths = z
  .record(
    z.string(),
    z.object({
      densityDbmPerHz: z.number(),
      displayedDensityDbmPerHz: z.number(),
      spurs: z.array(z.object({ hz: z.number(), levelDbm: z.number() })),
      spec: z.object({ points: z.number(), startHz: z.number(), stopHz: z.number(), rbwHz: z.number() }),
    }),
  )
  .parse(json('truth.json'));

async function read(file: string) {
  return readTraceFile(createReadStream(new URL(file, folder)), { fileName: file });
}

async function estimateOf(file: string) {
  const result = await read(file);
  const extra = seeding.find((sample) => sample.file === file)?.settings ?? {};
  const given = parseSettings(extra, { kind: 'command' });
  expect(given.problems).toEqual([]);
  const trace = result.traces[0];
  return estimateDensity({
    trace,
    sha256: '',
    traceIndex: 0,
    settings: { ...result.settings, ...trace.settings, ...given.settings },
    exclusions: [],
  });
}

test.each(Object.entries(truths))('%s is read with every point on its frequency', async (file, { spec }) => {
  const { frequencyHz, level, unit } = (await read(file)).traces[0];
  expect(unit).toBe('dBm');
  expect(level.length).toBe(spec.points);
  expect(frequencyHz[0]).toBeCloseTo(spec.startHz, 3);
  expect(frequencyHz[spec.points - 1]).toBeCloseTo(spec.stopHz, 3);
});

describe('a sample whose averaging is as declared', () => {
  test.each([
    'strip14_out_log20.csv',
    'strip14_out_pow20.csv',
    'strip12_out_pow50.csv',
    'strip14_out_vbw1k.csv',
    'strip15_out_single.csv',
    'strip11_levels.txt',
    'strip10_avg_max.csv',
    'survey_c_noload.txt',
    'survey_c_2a.txt',
    'term_10db_pow100.csv',
    'term_pre_on_pow100.csv',
    'rack_10m_210m_20001.csv',
  ])('%s: density within the expanded uncertainty, signals found', async (file) => {
    const { density, spurs, averagingCheck } = await estimateOf(file);
    const { densityDbmPerHz, spurs: signals, spec } = truths[file];
    expect(Math.abs((density?.dbmPerHz ?? NaN) - densityDbmPerHz)).toBeLessThan(
      density?.expandedUncertaintyDb ?? 0,
    );
    expect(averagingCheck.verdict).toBe('declared');
    for (const signal of signals) {
      const nearest = Math.min(...spurs.map(({ hz }) => Math.abs(hz - signal.hz)));
      expect(nearest, `signal at ${signal.hz} Hz`).toBeLessThan(spec.rbwHz);
    }
  });
});

test('strip13_out.csv: the check says log, and that the density is 2.33 dB low as declared', async () => {
  const { averagingCheck } = await estimateOf('strip13_out.csv');
  expect(averagingCheck.verdict).toBe('other');
  expect(averagingCheck.fits).toBe('log');
  const log = averagingCheck.likelihoods.find(({ id }) => id === 'log');
  expect(log?.levelErrorDb).toBeCloseTo(-2.3324, 1);
});

test('messung_0412.csv: no density until the averaging scale is known', async () => {
  const { density, missingSettings, alternatives } = await estimateOf('messung_0412.csv');
  expect(density).toBeNull();
  expect(missingSettings).toContain('averagingScale');
  const truth = truths['messung_0412.csv'].displayedDensityDbmPerHz;
  const log = alternatives.find(
    ({ lowDbmPerHz, highDbmPerHz }) => lowDbmPerHz <= truth && truth <= highDbmPerHz,
  );
  expect(log).toBeDefined();
});

test('strip14_out_peak.csv: a peak detector stops', async () => {
  const { findings } = await estimateOf('strip14_out_peak.csv');
  expect(findings.some(({ severity }) => severity === 'stop')).toBe(true);
});

test('strip16_out.csv: unreadable, and says that it is a web page', async () => {
  await expect(read('strip16_out.csv')).rejects.toMatchObject({ name: 'UnreadableFile' });
});
