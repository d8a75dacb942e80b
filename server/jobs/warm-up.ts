import { estimateDensity } from '../engine/estimate.ts';
import { readTraceFile } from '../reader/read-trace-file.ts';
import { warmUpTrace } from '../services/warm-up-trace.ts';

const RUNS = 4;

/** Reads and estimates a made-up file some times, so that the first real one finds compiled code. */
export async function warmUp(): Promise<void> {
  const { frequencyHz, level } = warmUpTrace();
  const rows = Array.from(level, (value, index) => `${frequencyHz[index]},${value.toFixed(2)}`);
  const head = ['RBW,10 kHz', 'Detector,Sample', 'Averaging,Log', 'Sweeps,20', 'Frequency (Hz),Level (dBm)'];
  const file = Buffer.from([...head, ...rows, ''].join('\n'));
  const pieces = async function* () {
    yield file;
  };
  for (let run = 0; run < RUNS; run += 1) {
    const { traces, settings } = await readTraceFile(pieces(), { fileName: 'warm-up.csv' });
    estimateDensity({ trace: traces[0], sha256: '', traceIndex: 0, settings, exclusions: [] });
  }
}
