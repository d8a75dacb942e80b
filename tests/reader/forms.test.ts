import { describe, expect, it } from 'vitest';
import { codes, hz, levels, lines, read, refusal, table, values } from './reading.ts';

const HZ = [69_500_000, 69_501_000, 69_502_000, 69_503_000];
const DBM = [-107.25, -106.5, -108, -105.75];
const rows = (delimiter: string, comma = false) =>
  table(4, (i) => {
    const cells = [(HZ[i] / 1e6).toFixed(3), DBM[i].toFixed(2)];
    return cells.map((cell) => (comma ? cell.replace('.', ',') : cell)).join(delimiter);
  });

describe('delimiters and decimal marks', () => {
  it.each([
    ['comma', ',', false],
    ['semicolon', ';', false],
    ['tab', '\t', false],
    ['pipe', '|', false],
    ['blanks', '   ', false],
    ['semicolon', ';', true],
    ['tab', '\t', true],
    ['pipe', '|', true],
    ['blanks', '  ', true],
  ])('reads %s (%j), decimal comma %s', async (word, delimiter, comma) => {
    const result = await read(`Frequency (MHz)${delimiter}Level (dBm)\n${rows(delimiter, comma)}`);
    expect(hz(result)).toEqual(HZ);
    expect(levels(result)).toEqual(DBM);
    expect(result.understanding).toMatchObject({
      delimiter: word,
      decimalMark: comma ? ',' : '.',
      headerLines: [1],
      firstDataLine: 2,
      lastDataLine: 5,
      axis: 'column',
    });
    expect(result.problems).toEqual([]);
  });

  it('reads quoted cells with decimal commas between commas', async () => {
    const result = await read(
      `"Frequency, MHz","Level, dBm"\n${table(4, (i) => `"${(HZ[i] / 1e6).toFixed(3).replace('.', ',')}","${DBM[i].toFixed(2).replace('.', ',')}"`)}`,
    );
    expect(hz(result)).toEqual(HZ);
    expect(levels(result)).toEqual(DBM);
  });

  it('reads a delimiter at the end of every line and blanks around cells', async () => {
    const result = await read(
      `Frequency (MHz) , Level (dBm) ,\n${table(4, (i) => ` ${HZ[i] / 1e6} ,  ${DBM[i]} ,`)}`,
    );
    expect(hz(result)).toEqual(HZ);
    expect(levels(result)).toEqual(DBM);
  });

  it('takes the hint line for the delimiter', async () => {
    const result = await read(`sep=;\nFrequency (MHz);Level (dBm)\n${rows(';')}`);
    expect(levels(result)).toEqual(DBM);
    expect(result.understanding.delimiter).toBe('semicolon');
  });

  it('reads exponents, the true minus and units glued to numbers', async () => {
    const exponents = await read('Frequency (Hz);Level (dBm)\n1,0e9;-8,05E+01\n1,1E+09;−81,5\n1,2E9;-82\n');
    expect(hz(exponents)).toEqual([1e9, 1.1e9, 1.2e9]);
    expect(levels(exponents)).toEqual([-80.5, -81.5, -82]);
    const glued = await read('108695.65Hz,-7.44e+01dBm\n109695.65Hz,-75.1dBm\n110.69565kHz,-76dBm\n');
    expect(hz(glued)).toEqual([108695.65, 109695.65, 110695.65]);
    expect(levels(glued)).toEqual([-74.4, -75.1, -76]);
    expect(glued.traces[0].unitInFile).toBe('dBm');
  });

  it('keeps every digit that a double holds', async () => {
    const result = await read(
      'Hz,dBm\n3400000000.116,-80.123456789012345\n3400000000.232,-1e-7\n3400000000.34800001,-82\n',
    );
    expect(hz(result)).toEqual([3400000000.116, 3400000000.232, 3400000000.34800001]);
    expect(levels(result)).toEqual([-80.123456789012345, -1e-7, -82]);
  });

  it('asks where a mark can be read in two ways', async () => {
    expect(await refusal('Frequency,Level\n69,500,-107,30\n69,501,-107,31\n69,502,-106,32\n')).toMatchObject({
      code: 'commaBothWays',
      line: 2,
    });
    expect(await refusal('Frequency;Level\n69,500;-107.30\n69,501;-107.31\n')).toMatchObject({
      code: 'thousandsSeparators',
      line: 2,
    });
  });

  it('reads one column of decimal commas as one column', async () => {
    const result = await read(
      `Start: 1 MHz\nStop: 2 MHz\nUnit: dBm\n-107,10\n-107,11\n-106,95\n-107,13\n-107,14\n`,
    );
    expect(levels(result)).toEqual([-107.1, -107.11, -106.95, -107.13, -107.14]);
    expect(hz(result)).toEqual([1e6, 1.25e6, 1.5e6, 1.75e6, 2e6]);
  });
});

describe('encodings and line ends', () => {
  const text = `Dämpfung;10;dB\nFrequenz [MHz];Pegel [dBµV]\n${rows(';', true)}`;
  const latin1 = Uint8Array.from(Array.from(text, (letter) => letter.charCodeAt(0)));
  const wide = (little: boolean) => {
    const all = `\ufeff${text}`;
    return Uint8Array.from(
      Array.from(all).flatMap((letter) => {
        const code = letter.charCodeAt(0);
        return little ? [code & 255, code >> 8] : [code >> 8, code & 255];
      }),
    );
  };
  it.each([
    ['UTF-8', new TextEncoder().encode(text)],
    ['UTF-8 with BOM', new TextEncoder().encode(`\ufeff${text}`)],
    ['Latin-1', latin1],
    ['UTF-16 LE', wide(true)],
    ['UTF-16 BE', wide(false)],
  ])('reads %s', async (encoding, bytes) => {
    const result = await read(bytes);
    expect(result.understanding.encoding).toBe(encoding);
    expect(hz(result)).toEqual(HZ);
    expect(result.traces[0].unitInFile).toBe('dBµV');
    expect(result.traces[0].level[0]).toBeCloseTo(-107.25 - 90 - 10 * Math.log10(50), 12);
    expect(values(result.settings)).toMatchObject({ attenuationDb: 10 });
  });

  it.each([
    ['LF', '\n'],
    ['CRLF', '\r\n'],
    ['CR', '\r'],
  ])('counts lines ended by %s', async (_, end) => {
    const result = await read(
      `RBW,10 kHz\n\nFrequency (MHz),Level (dBm)\n${rows(',')}`.replaceAll('\n', end),
    );
    expect(levels(result)).toEqual(DBM);
    expect(result.understanding).toMatchObject({ firstDataLine: 4, lastDataLine: 7, lines: 7 });
  });

  it('reads mixed line ends and a trailing ^Z and NUL', async () => {
    const result = await read('Hz,dBm\r\n1000,-80\n2000,-81\r3000,-82\r\n\u001a\u0000');
    expect(levels(result)).toEqual([-80, -81, -82]);
  });
});

describe('preambles', () => {
  const data = `Frequency (MHz),Level (dBm)\n${table(1001, (i) => `${(69.5 + i / 1000).toFixed(3)},-107.${i % 10}`)}`;
  const expected = {
    rbwHz: 10_000,
    vbwHz: 1_000_000,
    detector: 'sample',
    averagingScale: 'log',
    sweeps: 20,
    sweepTimeS: 0.025,
    attenuationDb: 10,
  };
  it.each([
    [
      'key,value',
      'RBW,10 kHz\nVBW,1MHz\nDetector,Sample\nAverage type,Log-Pwr (Video)\nAverages,20\nSweep time,25 ms\nAttenuation,10 dB\n',
    ],
    [
      'key,value,unit',
      'RBW,10,kHz\nVBW,1,MHz\nDetector,Sample\nAvg Type,Log\nAverage Count,20\nSweep Time,25,ms\nRF Att,10,dB\n',
    ],
    [
      'key: value unit',
      'Res BW: 10 kHz\nVideo BW: 1.0E+06 Hz\nDet: SAMP\nAverage mode: video\nSweep count: 20\nSwp Time: 25000 us\nAtten: 10\n',
    ],
    [
      'key:,value,unit,',
      'RBW:,10,kHz,\nVBW:,1,MHz,\nDetector:,Sample,,\nAverage type:,Log,,\nAverages:,20,,\nSweep time:,0.025,s,\nAttenuation:,10,dB,\n ,,,\n',
    ],
    [
      'key=value',
      'rbw=10kHz\nvbw=1e6\ndetector=sample\naverage_type=LOG\navg.count=20\nsweep_time=25ms\nattenuation=10\n',
    ],
    [
      '# key: value',
      '# RBW: 10 k\n# VBW: 1 M\n# Detector: sample\n# Average type: log\n# Averages: 20\n# Sweep time: 25ms\n# Attenuation: 10 dB\n',
    ],
    [
      '! key value',
      '! RBW 10 kHz\n! VBW 1 MHz\n! Detector Sample\n! Average type log\n! Averages 20\n! Sweep time 25 ms\n! Attenuation 10 dB\n',
    ],
    [
      'sections and units in brackets',
      '[Instrument]\nRBW [kHz],10\nVBW (MHz),1\n[Trace]\nDetector,Sample\nAverage type,Log\nAverages,20\nSweep time [ms],25\nAttenuation/dB,10\n\nDATA\n',
    ],
    [
      'keys over values',
      'RBW,VBW,Detector,Average type,Averages,Sweep time,Attenuation\n10 kHz,1 MHz,Sample,Log,20,25 ms,10 dB\n',
    ],
    [
      'pairs in a row',
      'RBW,10 kHz,VBW,1 MHz\nDetector,Sample,Average type,Log\nAverages,20,Sweep time,25 ms\nAttenuation,10 dB\n',
    ],
    [
      'JSON',
      '{"rbw": "10 kHz", "vbw": 1000000, "detector": "sample", "average type": "log", "averages": 20, "sweep time": "25 ms", "attenuation": 10}\n',
    ],
  ])('reads %s', async (_, preamble) => {
    const result = await read(preamble + data);
    expect(values(result.settings)).toEqual(expected);
    expect(result.problems).toEqual([]);
    expect(result.traces[0].frequencyHz).toHaveLength(1001);
  });

  it('keeps the line and its words with each setting', async () => {
    const result = await read(`Trace export\n\nRBW,10,kHz\nDetector,RMS\n${data}`);
    expect(lines(result.settings)).toEqual({ rbwHz: 3, detector: 4 });
    expect(result.settings.rbwHz?.origin).toEqual({ kind: 'file', line: 3, text: 'RBW,10,kHz' });
  });

  it('reads German, French and Spanish keys', async () => {
    const german = await read(
      `Auflösungsbandbreite;10;kHz\nVideobandbreite;1;MHz\nDetektor;Abtastwert\nMittelungstyp;Logarithmisch\nMittelungen;20\nSweepzeit;25;ms\nDämpfung;10;dB\n${data}`,
    );
    expect(values(german.settings)).toEqual(expected);
    const french = await read(
      `Bande passante de résolution;10;kHz\nBande passante vidéo;1;MHz\nDétecteur;Échantillon\nType de moyenne;Logarithmique\nNombre de moyennes;20\nTemps de balayage;25;ms\nAtténuation;10;dB\n${data}`,
    );
    expect(values(french.settings)).toEqual(expected);
    const spanish = await read(
      `Ancho de banda de resolución;10;kHz\nAncho de banda de vídeo;1;MHz\nDetector;Muestra\nTipo de promedio;Logarítmico\nNúmero de promedios;20\nTiempo de barrido;25;ms\nAtenuación;10;dB\n${data}`,
    );
    expect(values(spanish.settings)).toEqual(expected);
  });

  it('isn’t taken in by look-alike keys', async () => {
    const result = await read(
      `RBW,+3.0e+02,MAN\nRBW Filter,Gaussian\nRBW Filter BW,3dB\nTrace Count,4\nWindow,Hann\nAttenuation: 1 X\nFrequency: 10 MHz\nFFT Width,1000\nVBW,- - -\nPreamplifier,0,MAN\nTrace Mode,Average\nStart of the survey in the morning\n${data}`,
    );
    expect(values(result.settings)).toEqual({
      rbwHz: 300,
      filterShape: 'gaussian',
      rbwKind: '3dB',
      preamplifier: false,
    });
    expect(result.problems).toEqual([]);
  });

  it('takes a length glued to the first key off', async () => {
    expect(values((await read(`#41822RBW,10 kHz\n${data}`)).settings)).toEqual({ rbwHz: 10_000 });
  });

  it('reads the kind of an RBW beside it, and a noise bandwidth', async () => {
    expect(values((await read(`RBW (-6 dB): 9 kHz\n${data}`)).settings)).toEqual({
      rbwHz: 9000,
      rbwKind: '6dB',
    });
    expect(values((await read(`RBW: 10 kHz (-3 dB)\n${data}`)).settings)).toEqual({
      rbwHz: 10_000,
      rbwKind: '3dB',
    });
    expect(values((await read(`ENBW: 12 kHz\n${data}`)).settings)).toEqual({
      rbwHz: 12_000,
      rbwKind: 'noise',
    });
    const both = values((await read(`ENBW: 11 kHz\nRBW: 10 kHz\n${data}`)).settings);
    expect(both).toEqual({ rbwHz: 10_000, bandwidthRatio: 1.1 });
  });

  it('says which line holds a value that can’t be understood, and takes nothing for it', async () => {
    const result = await read(`RBW,ten,kHz\nDetector,Blue\nAveraging,perhaps\n${data}`);
    expect(values(result.settings)).toEqual({});
    expect(result.problems.map(({ code, line }) => [code, line])).toEqual([
      ['settingNotUnderstood', 1],
      ['settingNotUnderstood', 2],
      ['settingNotUnderstood', 3],
    ]);
  });

  it('tells a setting that is stated twice, and a bandwidth that only may be the RBW', async () => {
    const twice = await read(`RBW,10 kHz\nRes BW,30 kHz\n${data}`);
    expect(values(twice.settings)).toEqual({ rbwHz: 10_000 });
    expect(twice.problems).toMatchObject([{ code: 'settingStatedTwice', line: 2 }]);
    const weak = await read(`Bandwidth,10 kHz\n${data}`);
    expect(values(weak.settings)).toEqual({ rbwHz: 10_000 });
    expect(codes(weak)).toEqual(['weakKey']);
  });

  it('doesn’t apply an offset that the levels already contain', async () => {
    const result = await read(`Reference level offset,10,dB\n${data}`);
    expect(values(result.settings)).toEqual({});
    expect(codes(result)).toEqual(['levelOffset']);
    expect(values((await read(`Cable loss,1.5,dB\n${data}`)).settings)).toEqual({ externalGainDb: -1.5 });
  });

  it('joins date and time', async () => {
    expect(values((await read(`Date,2026-12-01\nTime,10:24:07\n${data}`)).settings)).toEqual({
      takenAt: '2026-12-01 10:24:07',
    });
  });
});

describe('headers', () => {
  it.each([
    'Frequency [MHz],Level [dBm]',
    'Frequency (MHz),Level (dBm)',
    'Frequency/MHz,Level/dBm',
    'Freq in MHz,Power in dBm',
    'Frequency, MHz, Level, dBm',
    'freq_MHz,level_dBm',
    'MHz,dBm',
    'Frequency,Level\nMHz,dBm',
    'Frequency,Level\n[MHz],[dBm]',
    '# Frequency (MHz), Level (dBm)',
    'Frequency (MHz),Level (dBm)\nDATA',
  ])('reads %j', async (header) => {
    const result = await read(`RBW,10,kHz\n${header}\n${rows(',')}`);
    expect(hz(result)).toEqual(HZ);
    expect(levels(result)).toEqual(DBM);
    expect(result.traces[0]).toMatchObject({ unit: 'dBm', unitInFile: 'dBm', uniform: true });
    expect(values(result.settings)).toEqual({ rbwHz: 10_000 });
  });

  it.each([
    ['Hz', 1],
    ['kHz', 1e3],
    ['MHz', 1e6],
    ['GHz', 1e9],
  ])('reads frequencies in %s exactly', async (unit, factor) => {
    const result = await read(`f/${unit};L/dBm\n1.1;-80\n2.3;-81\n3.7;-82\n`);
    expect(hz(result)).toEqual([11, 23, 37].map((tenths) => (tenths * factor) / 10));
  });

  it('reads no header, and says what it assumed', async () => {
    const result = await read(rows(',').replaceAll('69.', '69500000.'));
    expect(codes(result)).toEqual(['frequencyUnitAssumed', 'levelUnitAssumed', 'columnsByNumbers']);
    expect(result.traces[0].unitInFile).toBe('not stated');
  });

  it('doesn’t take the last setting for a header', async () => {
    const result = await read(`Start,69.5,MHz\nStop,69.503,MHz\nDetector,Sample\n${rows(',')}`);
    expect(result.understanding.headerLines).toEqual([]);
    expect(values(result.settings)).toMatchObject({ detector: 'sample' });
    expect(hz(result)).toEqual(HZ);
  });

  it('shows names without hidden characters and takes no name for a key', async () => {
    const result = await read(
      '__proto__,constructor,a\u202eb\u0007c\n1000000,-80,-90\n2000000,-81,-91\n3000000,-82,-92\n',
    );
    expect(result.traces.map(({ name }) => name)).toEqual(['constructor', 'a b c']);
    expect(Object.getPrototypeOf(result.settings)).toBe(Object.prototype);
    expect(result.understanding.columns[0]).toMatchObject({ name: '__proto__', role: 'frequency' });
  });
});

describe('axes', () => {
  it('makes the axis from start and stop, centre and span, or start and step', async () => {
    const column = table(5, (i) => `${-100 - i}`);
    for (const preamble of [
      'Start: 1 MHz\nStop: 2 MHz\n',
      'Center: 1.5 MHz\nSpan: 1 MHz\n',
      'Start: 1 MHz\nStep: 250 kHz\n',
    ]) {
      const result = await read(`${preamble}Unit: dBm\n${column}`);
      expect(hz(result)).toEqual([1e6, 1.25e6, 1.5e6, 1.75e6, 2e6]);
      expect(result.understanding.axis).toBe('startStop');
      expect(result.problems).toEqual([]);
    }
  });

  it('leaves an index column aside', async () => {
    const made = await read(
      `Start,1,MHz\nStop,2,MHz\nNo.,Level (dBm)\n${table(5, (i) => `${i + 1},${-100 - i}`)}`,
    );
    expect(hz(made)).toEqual([1e6, 1.25e6, 1.5e6, 1.75e6, 2e6]);
    const read2 = await read(
      `No.,Frequency (MHz),Level (dBm)\n${table(5, (i) => `${i + 1},${i + 10},${-100 - i}`)}`,
    );
    expect(hz(read2)).toEqual([10e6, 11e6, 12e6, 13e6, 14e6]);
  });

  it('keeps the stated axis of a file that was cut short', async () => {
    const result = await read('Start: 1 MHz\nStop: 2 MHz\nPoints: 11\nUnit: dBm\n-100\n-101\n-102\n');
    expect(hz(result)).toEqual([1e6, 1.1e6, 1.2e6]);
    expect(codes(result)).toEqual(['pointsDisagree']);
    expect(
      await refusal('Start: 1 MHz\nStop: 2 MHz\nPoints: 2\nUnit: dBm\n-100\n-101\n-102\n'),
    ).toMatchObject({ code: 'pointsContradict', line: 3 });
  });

  it('sorts what runs down or jumps, and tells', async () => {
    const down = await read('Hz,dBm\n3000,-80\n2000,-81\n1000,-82\n');
    expect(hz(down)).toEqual([1000, 2000, 3000]);
    expect(levels(down)).toEqual([-82, -81, -80]);
    expect(codes(down)).toEqual(['descending']);
    const mixed = await read('Hz,dBm\n1000,-80\n4000,-81\n3000,-82\n5000,-83\n6000,-84\n');
    expect(levels(mixed)).toEqual([-80, -82, -81, -83, -84]);
    expect(codes(mixed)).toEqual(['unsorted']);
  });

  it('reads a log-spaced axis as it is', async () => {
    const result = await read('Hz,dBm\n10,-80\n100,-81\n1000,-82\n10000,-83\n');
    expect(result.traces[0].uniform).toBe(false);
    expect(hz(result)).toEqual([10, 100, 1000, 10000]);
  });

  it('adds the centre to offsets from it', async () => {
    const result = await read(
      'Center,100,MHz\nSpan,40,kHz\nOffset (kHz),Level (dBm)\n-20,-80\n-10,-81\n0,-82\n10,-83\n20,-84\n',
    );
    expect(hz(result)).toEqual([99_980_000, 99_990_000, 100_000_000, 100_010_000, 100_020_000]);
    expect(codes(result)).toEqual(['offsetAxis']);
  });

  it('counts doubled rows once and refuses different levels at one frequency', async () => {
    const doubled = await read('Hz,dBm\n1000,-80\n2000,-81\n2000,-81\n3000,-82\n');
    expect(hz(doubled)).toEqual([1000, 2000, 3000]);
    expect(codes(doubled)).toEqual(['duplicateRows']);
    expect(await refusal('Hz,dBm\n1000,-80\n2000,-81\n2000,-85\n3000,-82\n')).toMatchObject({
      code: 'duplicateFrequencies',
    });
  });

  it('makes traces of repeated sweeps, below one another and side by side', async () => {
    const below = await read(`Hz,dBm\n${table(12, (i) => `${1000 * ((i % 4) + 1)},${-80 - i}`)}`);
    expect(below.traces.map((_, trace) => levels(below, trace))).toEqual([
      [-80, -81, -82, -83],
      [-84, -85, -86, -87],
      [-88, -89, -90, -91],
    ]);
    const pairs = await read(`Hz,dBm\n${table(8, (i) => `${1000 * (i >> 1)},${-80 - i}`)}`);
    expect(pairs.traces.map((_, trace) => levels(pairs, trace))).toEqual([
      [-80, -82, -84, -86],
      [-81, -83, -85, -87],
    ]);
  });

  it('finds the unit by start and stop where the column has none, and tells a header that contradicts', async () => {
    const found = await read(`Start,69.5,MHz\nStop,69.503,MHz\nFrequency,Level (dBm)\n${rows(',')}`);
    expect(hz(found)).toEqual(HZ);
    expect(found.problems).toEqual([]);
    const told = await read(
      `Start,69.5,MHz\nStop,69.503,MHz\nFrequency (MHz),Level (dBm)\n${table(4, (i) => `${HZ[i]},${DBM[i]}`)}`,
    );
    expect(hz(told)).toEqual(HZ);
    expect(codes(told)).toEqual(['frequencyUnitContradicts']);
    expect(
      await refusal(`Frequency (MHz),Level (dBm)\n${table(4, (i) => `${HZ[i]},${DBM[i]}`)}`),
    ).toMatchObject({ code: 'frequencyUnitContradicts', line: 1 });
  });
});

describe('traces', () => {
  it('reads several columns, with the detectors in their names', async () => {
    const result = await read(
      `Frequency (kHz);Max hold (dBm);RMS (dBm);Min (dBm);Phase (deg)\n${table(3, (i) => `${i + 1};${-80 - i};${-85 - i};${-90 - i};${i}`)}`,
    );
    expect(result.traces.map(({ name }) => name)).toEqual(['Max hold', 'RMS', 'Min']);
    expect(result.traces.map(({ settings }) => settings.detector?.value)).toEqual([
      'peak',
      'average',
      'negativePeak',
    ]);
    expect(result.traces.map((_, trace) => levels(result, trace)[0])).toEqual([-80, -85, -90]);
  });

  it('keeps the file’s detector for a trace called Average, and tells nothing of its scale', async () => {
    const result = await read(
      'Detector,Sample\nAverages,20\nFrequency (Hz),Average (dBm),Max hold (dBm)\n1,-80,-70\n2,-81,-71\n3,-82,-72\n',
    );
    expect(values(result.traces[0].settings)).toEqual({});
    expect(values(result.traces[1].settings)).toEqual({ detector: 'peak' });
    expect(values(result.settings)).toEqual({ detector: 'sample', sweeps: 20 });
  });

  it('reads one value per trace in the preamble', async () => {
    const result = await read(
      'Detector,Sample,RMS\nAverages,10,20\nRBW,1,Hz\nFrequency (Hz),A (dBm),B (dBm)\n1,-80,-70\n2,-81,-71\n3,-82,-72\n',
    );
    expect(values(result.traces[0].settings)).toEqual({ detector: 'sample', sweeps: 10 });
    expect(values(result.traces[1].settings)).toEqual({ detector: 'average', sweeps: 20 });
    expect(values(result.settings)).toEqual({ rbwHz: 1 });
  });

  it('reads an axis of its own for each trace', async () => {
    const result = await read(
      'f1 (Hz),L1 (dBm),f2 (Hz),L2 (dBm)\n1,-80,10,-70\n2,-81,20,-71\n3,-82,30,-72\n',
    );
    expect(hz(result, 0)).toEqual([1, 2, 3]);
    expect(hz(result, 1)).toEqual([10, 20, 30]);
  });

  it('reads blocks below one another with their own settings', async () => {
    const block = (number: number, detector: string) =>
      `Trace ${number}\nRBW,10 Hz\nDetector,${detector}\nFrequency (Hz),Level (dBm)\n${table(20, (i) => `${1000 + i * 10},${-80 - i - number}`)}`;
    const result = await read(`${block(1, 'Sample')}\n${block(2, 'RMS')}`);
    expect(result.traces.map(({ name }) => name)).toEqual(['Trace 1', 'Trace 2']);
    expect(values(result.settings)).toEqual({ rbwHz: 10, detector: 'sample' });
    expect(values(result.traces[1].settings)).toEqual({ detector: 'average' });
    expect(levels(result, 1)[0]).toBe(-82);
    expect(codes(result)).toContain('severalBlocks');
  });

  it('leaves an unused column of zeros aside, and tells columns of one name apart', async () => {
    const result = await read(
      'Hz,Level (dBm),Level (dBm),Level (dBm)\n1,-80,-90,0\n2,-81,-91,0\n3,-82,-92,0\n',
    );
    expect(result.traces.map(({ name }) => name)).toEqual(['Level', 'Level (2)']);
    expect(codes(result)).toEqual(['unusedTrace']);
  });
});

describe('level units', () => {
  const ohm = 10 * Math.log10(50);
  it.each([
    ['dBm', -80, -80, 'dBm'],
    ['dBm/Hz', -150, -150, 'dBm/Hz'],
    ['dBµV', 20, 20 - 90 - ohm, 'dBm'],
    ['dBuV', 20, 20 - 90 - ohm, 'dBm'],
    ['dBmV', -40, -40 - 30 - ohm, 'dBm'],
    ['dBV', -100, -100 + 30 - ohm, 'dBm'],
    ['dBW', -120, -90, 'dBm'],
    ['W', 2e-12, -90 + 10 * Math.log10(2), 'dBm'],
    ['mW', 2e-9, -90 + 10 * Math.log10(2), 'dBm'],
    ['V', 3e-6, 20 * Math.log10(3e-6) + 30 - ohm, 'dBm'],
    ['µV', 3, 20 * Math.log10(3e-6) + 30 - ohm, 'dBm'],
    ['W/Hz', 2e-18, -150 + 10 * Math.log10(2), 'dBm/Hz'],
  ])('turns %s into dBm at 50 Ω', async (unit, value, expected, stored) => {
    const result = await read(
      `Frequency (Hz),Level (${unit})\n${table(4, (i) => `${1000 + i},${value * (1 + i / 100)}`)}`,
    );
    expect(result.traces[0].level[0]).toBeCloseTo(expected, 10);
    expect(result.traces[0].unit).toBe(stored);
    expect(codes(result).includes('impedanceAssumed')).toBe(/V/.test(unit));
  });

  it('takes the stated impedance', async () => {
    const result = await read('Impedance,75,ohm\nFrequency (Hz),Level (dBµV)\n1000,20\n2000,21\n3000,22\n');
    expect(levels(result)[0]).toBeCloseTo(20 - 90 - 10 * Math.log10(75), 12);
    expect(result.problems).toEqual([]);
  });

  it('reads whole hundredths of a dBm, and says so', async () => {
    const result = await read('Hz,dBm\n1000,-8000\n2000,-8101\n3000,-8202\n');
    expect(levels(result)).toEqual([-80, -81.01, -82.02]);
    expect(codes(result)).toEqual(['hundredths']);
  });

  it('refuses units that contradict the numbers, and levels that aren’t absolute', async () => {
    const axis = (level: (i: number) => string) => table(4, (i) => `${1000 + i},${level(i)}`);
    expect(await refusal(`Hz,Power (W)\n${axis((i) => `${-80 - i}`)}`)).toMatchObject({
      code: 'levelUnitContradicts',
      line: 1,
    });
    expect(await refusal(`Hz,PSD (dBm/Hz)\n${axis((i) => `1.${i}e-12`)}`)).toMatchObject({
      code: 'levelUnitContradicts',
    });
    expect(await refusal(`Hz,Gain (dB)\n${axis((i) => `-0.${i}`)}`)).toMatchObject({ code: 'relativeLevel' });
    expect(await refusal(`Hz,Field (dBµV/m)\n${axis((i) => `3${i}`)}`)).toMatchObject({
      code: 'fieldStrength',
    });
  });
});

describe('footers and gaps', () => {
  const data = `Frequency (Hz),Level (dBm)\n${table(30, (i) => `${1000 + i * 10},${-80 - i / 10}`)}`;
  it.each([
    'END\n',
    '\nMarker,Frequency,Level\n1,1100,-85\n2,1200,-86\n',
    '\nPeak list\nFrequency,Level\n1100,-85\n1050,-86\n',
    '# checksum 4F2A\n\n\n',
    'Checksum,12345\n',
  ])('ends before the footer %j', async (footer) => {
    const result = await read(data + footer);
    expect(result.traces).toHaveLength(1);
    expect(result.traces[0].frequencyHz).toHaveLength(30);
    expect(result.understanding.lastDataLine).toBeGreaterThanOrEqual(31);
    expect(codes(result).filter((code) => code !== 'footer')).toEqual([]);
  });

  it.each(['NaN', '---', '1e400', '-Inf', '', 'n/a', '-82806'])(
    'leaves a level of %j out and says where',
    async (cell) => {
      const result = await read(data.replace(',-80.4\n', `,${cell}\n`));
      expect(result.traces[0].frequencyHz).toHaveLength(29);
      expect(hz(result)).not.toContain(1040);
      expect(result.problems).toMatchObject([{ code: 'pointsLeftOut', line: 6 }]);
      expect(result.problems[0].message).toContain('line 6');
    },
  );

  it('leaves ragged rows out', async () => {
    const result = await read(data.replace(',-80.2\n', '\n').replace(',-80.4\n', ',-80,-81\n'));
    expect(result.traces[0].frequencyHz).toHaveLength(28);
    expect(result.problems[0].message).toContain('lines 4 and 6');
  });

  it('goes on after text within the rows', async () => {
    const result = await read(data.replace('1040,', 'paused\n# still paused\n1040,'));
    expect(result.traces[0].frequencyHz).toHaveLength(30);
    expect(codes(result)).toEqual(['textWithinData']);
  });

  it('refuses when more than a tenth is lost', async () => {
    const holes = `Hz,dBm\n${table(30, (i) => `${1000 + i},${i % 5 === 0 ? '---' : '-80'}`)}`;
    expect(await refusal(holes)).toMatchObject({ code: 'tooManyLost', line: 2 });
  });
});

describe('settings against the data', () => {
  const data = `Frequency (MHz),Level (dBm)\n${table(11, (i) => `${69.5 + i / 10},-10${i % 10}`)}`;
  it.each([
    ['Span,10,MHz', 'spanDisagrees'],
    ['Start,60,MHz', 'axisDisagrees'],
    ['Center,80,MHz', 'centreDisagrees'],
    ['Points,1001', 'pointsDisagree'],
    ['RBW,3,MHz', 'rbwAboveSpan'],
  ])('tells %s', async (line, code) => {
    const result = await read(`Trace export\n${line}\n${data}`);
    expect(result.problems).toMatchObject([{ code, line: 2, severity: 'caution' }]);
  });

  it('tells a constant level and a bottom line', async () => {
    expect(codes(await read(`Hz,dBm\n${table(30, (i) => `${i},-100`)}`))).toEqual(['constantLevel']);
    expect(
      codes(await read(`Hz,dBm\n${table(100, (i) => `${i},${i % 3 === 0 ? -100 - 0 : -90 - (i % 7)}`)}`)),
    ).toEqual(['bottomLine']);
  });
});
