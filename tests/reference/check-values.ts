import { readFileSync } from 'node:fs';
import { expect } from 'vitest';
import { z } from 'zod';

/**
 * Values to check the engine against, with their source. `basis`: published (read in the source), memory (published, cited
 * from memory) or computed (from the stated formula, by another program than the engine).
 */
const CheckValue = z.object({
  id: z.string(),
  quantity: z.string(),
  inputs: z.string(),
  value: z.number(),
  unit: z.string(),
  tolerance: z.number(),
  basis: z.enum(['published', 'memory', 'computed']),
  source: z.string(),
});
export type CheckValue = z.infer<typeof CheckValue>;

const values = z
  .array(CheckValue)
  .parse(JSON.parse(readFileSync(new URL('check-values.json', import.meta.url), 'utf8')));

/** The check values whose id matches as a whole, each with what the pattern's groups caught; fails where there are none. */
export function checkValues(pattern: RegExp): { id: string; entry: CheckValue; caught: string[] }[] {
  const whole = new RegExp(`^(?:${pattern.source})$`);
  const found = values.flatMap((entry) => {
    const match = whole.exec(entry.id);
    return match ? [{ id: entry.id, entry, caught: match.slice(1) }] : [];
  });
  if (found.length === 0) throw new Error(`no check value matches ${pattern.source}`);
  return found;
}

/**
 * Expects a value within the tolerance of its check value. `ownTolerance` is what the engine's numerics are held to where
 * that is wider than the digits of a computed value.
 */
export function expectValue(entry: CheckValue, seen: number, ownTolerance = 0) {
  const error = Math.abs(seen - entry.value);
  expect(error, `${entry.quantity} (${entry.source}): ${entry.value}, seen ${seen}`).toBeLessThanOrEqual(
    Math.max(entry.tolerance, ownTolerance),
  );
}
