import { createHash } from 'node:crypto';
import { createReadStream } from 'node:fs';
import { basename } from 'node:path';
import { estimateDensity } from '../engine/estimate.ts';
import { readTraceFile } from '../reader/read-trace-file.ts';
import { estimateFlags, USAGE, UsageError, type EstimateFlags } from './estimate-flags.ts';

async function* hashed(path: string, hash: ReturnType<typeof createHash>): AsyncGenerator<Uint8Array> {
  for await (const chunk of createReadStream(path, { highWaterMark: 1 << 20 })) {
    hash.update(chunk);
    yield chunk;
  }
}

/** Reads one file and estimates its density; the same engine and reader that the server uses. */
async function estimateFile(path: string, flags: EstimateFlags): Promise<object> {
  const hash = createHash('sha256');
  const read = await readTraceFile(hashed(path, hash), { fileName: basename(path) });
  const trace = read.traces[flags.traceIndex];
  if (!trace) {
    throw new Error(
      `There is no trace ${flags.traceIndex}; the file holds ${read.traces.length}, numbered from 0.`,
    );
  }
  const estimate = estimateDensity({
    trace,
    sha256: hash.digest('hex'),
    traceIndex: flags.traceIndex,
    settings: { ...read.settings, ...trace.settings, ...flags.settings },
    exclusions: flags.exclusions,
    options: flags.options,
  });
  const stop = estimate.findings.find(({ severity }) => severity === 'stop');
  const refusal =
    estimate.density === null
      ? { error: stop ? `${stop.message} ${stop.advice}` : 'No density can be given.' }
      : {};
  return { file: path, ...refusal, ...estimate, problems: read.problems };
}

async function main(args: string[]): Promise<number> {
  if (args.includes('--help')) {
    console.log(USAGE);
    return 0;
  }
  const flags = estimateFlags(args);
  let failed = false;
  for (const file of flags.files) {
    const line = await estimateFile(file, flags).catch((error: unknown) => ({
      file,
      error: error instanceof Error ? error.message : String(error),
    }));
    failed ||= 'error' in line;
    process.stdout.write(`${JSON.stringify(line)}\n`);
  }
  return failed ? 1 : 0;
}

try {
  process.exitCode = await main(process.argv.slice(2));
} catch (error) {
  if (!(error instanceof UsageError)) throw error;
  console.error(`${error.message}\n${USAGE}`);
  process.exitCode = 1;
}
