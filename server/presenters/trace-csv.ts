import { plural } from '../../shared/quantities.ts';
import type { Capture } from '../entities/capture.ts';
import type { Estimate } from '../entities/estimate.ts';

/** A cell that no spreadsheet runs and that stays one cell. */
export function csvCell(text: string): string {
  const harmless = /^[=+\-@\t\r]/.test(text) ? `'${text}` : text;
  return /[",\r\n]/.test(harmless) ? `"${harmless.replaceAll('"', '""')}"` : harmless;
}

function headLines(capture: Capture, estimate: Estimate): string[] {
  const { body } = estimate;
  const active = body.exclusions.filter((exclusion) => exclusion.active);
  const { bandFromHz, bandToHz } = estimate.request.options ?? {};
  const settings = Object.entries(body.settings).map(
    ([name, setting]) => `${name} ${setting?.value} (${setting?.origin.kind})`,
  );
  return [
    `# Perhertz estimate ${capture.number}-${estimate.number} of ${capture.name}`,
    `# File: ${capture.fileName}`,
    `# SHA-256: ${capture.sha256}`,
    `# Trace: ${body.input.traceIndex}`,
    `# Engine: ${estimate.engineVersion}`,
    `# Settings: ${settings.join('; ')}`,
    ...(body.density
      ? [
          `# Density: ${body.density.dbmPerHz.toFixed(2)} dBm/Hz; +/- ${body.density.expandedUncertaintyDb.toFixed(2)} dB (expanded; coverage 95 %)`,
        ]
      : []),
    `# Points used: ${body.input.usedPoints} of ${body.input.points}; ${plural(active.length, 'span')} left out`,
    ...(bandFromHz === undefined && bandToHz === undefined
      ? []
      : [`# Band: ${bandFromHz ?? body.input.firstHz} to ${bandToHz ?? body.input.lastHz} Hz`]),
    ...active.map(
      ({ fromHz, toHz, kind, reason }) =>
        `# Left out: ${fromHz} to ${toHz} Hz (${kind}${reason ? `: ${reason}` : ''})`,
    ),
    '# Levels are as read; used is 1 where a point counts in the mean and 0 where it is left out',
  ];
}

/**
 * The trace behind an estimate as CSV: what was done, then frequency, level and whether the point was used.
 * @param points the stored trace in order. @returns pieces of text.
 */
export async function* cleanedTraceCsv(
  capture: Capture,
  estimate: Estimate,
  points: AsyncIterable<{ frequencyHz: Float64Array; level: Float64Array }>,
): AsyncGenerator<string> {
  const { input, exclusions } = estimate.body;
  const { bandFromHz = -Infinity, bandToHz = Infinity } = estimate.request.options ?? {};
  const active = exclusions.filter((exclusion) => exclusion.active);
  const used = (hz: number) =>
    hz >= bandFromHz && hz <= bandToHz && !active.some(({ fromHz, toHz }) => hz >= fromHz && hz <= toHz);
  const head = [
    ...headLines(capture, estimate).map(csvCell),
    `frequency_hz,level_${input.unit === 'dBm' ? 'dbm' : 'dbm_per_hz'},used`,
  ];
  yield `${head.join('\r\n')}\r\n`;
  for await (const { frequencyHz, level } of points) {
    const rows: string[] = [];
    for (let index = 0; index < level.length; index += 1) {
      rows.push(`${frequencyHz[index]},${level[index]},${used(frequencyHz[index]) ? 1 : 0}\r\n`);
    }
    yield rows.join('');
  }
}
