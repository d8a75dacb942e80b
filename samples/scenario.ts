import { simulateCapture } from '../tests/support/simulator/capture.ts';
import { housekeepingSamples } from './housekeeping-samples.ts';
import type { Truth } from '../tests/support/simulator/spec.ts';
import type { Sample } from './sample.ts';
import { sampleReadme } from './sample-readme.ts';
import { stripSamples } from './strip-samples.ts';
import { surveySamples } from './survey-samples.ts';

export const samples: Sample[] = [...stripSamples, ...surveySamples, ...housekeepingSamples];

/** Every file of this folder that is made, by name: the captures, what the demo puts in, and what is true. */
export function madeFiles(): Map<string, Buffer> {
  const files = new Map<string, Buffer>();
  const truths = new Map<string, Truth>();
  for (const sample of samples) {
    if (!sample.spec) {
      files.set(sample.file, Buffer.from(sample.text));
      continue;
    }
    const capture = simulateCapture(sample.spec);
    files.set(sample.file, Buffer.from(sample.write(capture), sample.encoding ?? 'utf8'));
    truths.set(sample.file, capture.truth);
  }
  const seeding = samples.map(({ file, name, campaign, uploader, settings }) => ({
    file,
    name,
    campaign,
    uploader,
    ...(settings ? { settings } : {}),
  }));
  files.set('samples.json', Buffer.from(`${JSON.stringify(seeding, null, 2)}\n`));
  files.set('truth.json', Buffer.from(`${JSON.stringify(Object.fromEntries(truths), null, 2)}\n`));
  files.set('README.md', Buffer.from(sampleReadme(samples, truths)));
  return files;
}
