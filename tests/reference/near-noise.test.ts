import { describe, test } from 'vitest';
import { signalPower } from '../../server/engine/spurs-level.ts';
import { checkValues, expectValue } from './check-values.ts';
import { db } from './laws.ts';

const power = (levelDb: number) => 10 ** (levelDb / 10);

/** What a CW signal at a true S/N reads too high, found from the reading that the engine takes back to that S/N. */
function readingErrorDb(snrDb: number, scale: 'power' | 'log' | 'voltage'): number {
  let low = snrDb - 5;
  let high = snrDb + 15;
  for (let i = 0; i < 60; i += 1) {
    const middle = (low + high) / 2;
    if ((signalPower(power(middle), 1, scale) ?? 0) < power(snrDb)) low = middle;
    else high = middle;
  }
  return (low + high) / 2 - snrDb;
}

describe('a CW signal near the noise', () => {
  test.each(checkValues(/near\.sub\.(.*)/))('$id', ({ entry, caught: [ratioDb] }) => {
    expectValue(entry, Number(ratioDb) - db(signalPower(power(Number(ratioDb)), 1, 'power') ?? 0), 1e-6);
  });
  test.each(checkValues(/near\.blog\.(\d+)/))('$id', ({ entry, caught: [snrDb] }) => {
    expectValue(entry, readingErrorDb(Number(snrDb), 'power'));
  });
  test.each(checkValues(/near\.log\.(.*)/))('$id', ({ entry, caught: [snrDb] }) => {
    expectValue(entry, readingErrorDb(Number(snrDb), 'log'), 1e-6);
  });
  test.each(checkValues(/near\.volt\.(.*)/))('$id', ({ entry, caught: [snrDb] }) => {
    expectValue(entry, readingErrorDb(Number(snrDb), 'voltage'), 1e-5);
  });
});
