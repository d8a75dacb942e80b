import { readFileSync, readdirSync } from 'node:fs';
import { expect, test } from 'vitest';
import { madeFiles } from '../../samples/scenario.ts';

const folder = new URL('../../samples/', import.meta.url);

test('the samples are, byte for byte, what their generator makes', { timeout: 120_000 }, () => {
  const made = madeFiles();
  const sources = readdirSync(folder).filter((name) => name.endsWith('.ts'));
  expect([...made.keys(), ...sources].sort()).toEqual(readdirSync(folder).sort());
  for (const [name, bytes] of made) {
    expect(readFileSync(new URL(name, folder)).equals(bytes), name).toBe(true);
  }
});
