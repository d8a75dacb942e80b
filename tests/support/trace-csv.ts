interface TraceCsvOptions {
  points?: number;
  /** Sweeps averaged on the log scale. */
  sweeps?: number;
  seed?: number;
  meanDbm?: number;
  preamble?: string[];
}

/** A generator of numbers between 0 and 1 that gives the same ones for the same seed. */
export function seededRandom(seed: number): () => number {
  let state = seed >>> 0;
  return () => {
    state = (Math.imul(state, 1664525) + 1013904223) >>> 0;
    return (state + 0.5) / 2 ** 32;
  };
}

/** A trace export as text: noise averaged on the log scale, one point per 10 kHz from 70 MHz on. */
export function traceCsv({
  points = 201,
  sweeps = 20,
  seed = 1,
  meanDbm = -95,
  preamble,
}: TraceCsvOptions = {}): string {
  const random = seededRandom(seed);
  const head = preamble ?? [
    'RBW,10 kHz',
    'Detector,Sample',
    'Averaging,Log',
    `Sweeps,${sweeps}`,
    `Points,${points}`,
  ];
  const rows = Array.from({ length: points }, (_, index) => {
    let sumDb = 0;
    for (let sweep = 0; sweep < sweeps; sweep += 1) sumDb += 10 * Math.log10(-Math.log(random()));
    return `${70_000_000 + index * 10_000},${(meanDbm + sumDb / sweeps).toFixed(2)}`;
  });
  return [...head, 'Frequency (Hz),Level (dBm)', ...rows, ''].join('\n');
}
