import { describe, expect, it } from 'vitest';
import { readTraceFile } from '../../server/reader/read-trace-file.ts';
import { bytesOf, chunked, refusal, table } from './reading.ts';

const magic = (bytes: number[], text = '') =>
  Uint8Array.from([...bytes, ...bytesOf(text), ...new Array(64).fill(0)]);
const data = (rows: number) =>
  `Frequency (Hz),Level (dBm)\n${table(rows, (i) => `${1000 + i},${-80 - (i % 9)}`)}`;

describe('files that are no trace', () => {
  it.each([
    ['nothing', new Uint8Array(0), 'empty', /empty: 0 bytes/],
    ['blanks', ' \n\n  \n', 'empty', /nothing but blanks/],
    [
      'a PNG',
      magic([0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a]),
      'image',
      /^This is a PNG image, not a trace export\.$/,
    ],
    ['a JPEG', magic([0xff, 0xd8, 0xff, 0xe0]), 'image', /JPEG/],
    ['a PDF', magic([], '%PDF-1.7'), 'document', /PDF/],
    ['a gzip archive', magic([0x1f, 0x8b, 8]), 'archive', /gzip/],
    ['a zip archive', magic([0x50, 0x4b, 3, 4], 'trace.csv'), 'archive', /zip/],
    [
      'a spreadsheet',
      magic([0x50, 0x4b, 3, 4], '[Content_Types].xml xl/workbook.xml'),
      'spreadsheet',
      /spreadsheet/,
    ],
    [
      'an open spreadsheet',
      magic([0x50, 0x4b, 3, 4], 'mimetypeapplication/vnd.oasis.opendocument.spreadsheet'),
      'spreadsheet',
      /spreadsheet/,
    ],
    ['an old spreadsheet', magic([0xd0, 0xcf, 0x11, 0xe0]), 'spreadsheet', /spreadsheet/],
    ['other bytes', Uint8Array.from({ length: 512 }, (_, i) => (i * 37) % 256), 'binary', /binary file/],
    ['a web page', '<!DOCTYPE html>\n<html><body>1,2\n3,4\n</body></html>\n', 'webPage', /web page/],
    ['XML', '<?xml version="1.0"?>\n<trace>\n1,2\n</trace>\n', 'markup', /XML/],
    ['reflection', '! S11\n# MHz S DB R 50\n1 -20 30\n2 -21 31\n', 'networkParameters', /reflection or gain/],
    ['prose', 'Dear all,\nthe trace is attached.\n', 'noNumbers', /begins “Dear all,”/],
    ['a header alone', 'Frequency (Hz),Level (dBm)\n', 'headerOnly', /header/],
    ['settings alone', 'RBW,10 kHz\nVBW,1 MHz\nFrequency (Hz),Level (dBm)\n', 'headerOnly', /ends at line 3/],
    ['one point', data(1), 'onePoint', /one point/],
    ['one column', table(9, (i) => `${-80.5 - i}`), 'noAxis', /one column of numbers/],
    ['time', `Time (s),Level (dBm)\n${table(9, (i) => `0.${i},-80`)}`, 'zeroSpan', /zero span/],
    ['one frequency', `Hz,dBm\n${table(9, () => '1000,-80')}`, 'onePoint', /one frequency/],
  ])('refuses %s', async (_, file, code, message) => {
    const problem = await refusal(file);
    expect(problem).toMatchObject({ code, severity: 'stop' });
    expect(problem.message).toMatch(message);
    expect(problem.advice).toMatch(/\.$/);
  });

  it('names the size limit, and stops there', async () => {
    let given = 0;
    async function* endless() {
      const block = bytesOf(table(65_536, (i) => `${i},-80.0`));
      for (;;) {
        given += block.length;
        yield block;
      }
    }
    await expect(readTraceFile(endless(), { fileName: 'x' })).rejects.toThrow(/256 MiB/);
    expect(given).toBeLessThan(270_000_000);
  }, 60_000);

  it('names the limits of columns and of a line', async () => {
    expect(await refusal(`a,b\n${'1,'.repeat(5000)}1\n`)).toMatchObject({ code: 'tooManyColumns', line: 2 });
    expect(await refusal(`${data(20)}${'9'.repeat(1_100_000)}\n`)).toMatchObject({
      code: 'lineTooLong',
      line: 22,
    });
    expect(await refusal('x'.repeat(3_000_000))).toMatchObject({ code: 'noNumbers' });
  });
});

describe('reading on the way', () => {
  it('tells progress against the stated count', async () => {
    const calls: [number, number | null][] = [];
    const bytes = bytesOf(`Points,200000\n${data(200_000)}`);
    await readTraceFile(chunked(bytes, 65_536), {
      fileName: 'x',
      onProgress: (points, of) => calls.push([points, of]),
    });
    expect(calls.length).toBeGreaterThanOrEqual(3);
    expect(calls.length).toBeLessThanOrEqual(5);
    expect(calls.at(-1)).toEqual([200_000, 200_000]);
    expect(calls.every(([points], i) => i === 0 || points >= calls[i - 1][0])).toBe(true);
  });

  it('stops when it is aborted', async () => {
    const controller = new AbortController();
    const reading = readTraceFile(chunked(bytesOf(data(300_000)), 65_536), {
      fileName: 'x',
      signal: controller.signal,
      onProgress: () => controller.abort(new Error('stopped by hand')),
    });
    await expect(reading).rejects.toThrow('stopped by hand');
  });
});
