import { describe, test } from 'vitest';
import { pointLaw } from '../../server/engine/point-law.ts';
import { thresholdFactor } from '../../server/engine/spurs-threshold.ts';
import { checkValues, expectValue } from './check-values.ts';
import { db, stage } from './laws.ts';

/** Thresholds lie far out in the tail, where the law's grid keeps 10⁻⁵ of the power. */
const TAIL = 2e-5;

describe('thresholds for a known floor', () => {
  test.each(checkValues(/thr\.1\.(\d)/))('$id', ({ entry, caught: [exponent] }) => {
    expectValue(entry, db(pointLaw([]).quantilePower(1 - 10 ** -Number(exponent))), 3e-4);
  });
  test.each(checkValues(/thr\.(\d+)\.(0\.001|1e-06)/))('$id', ({ entry, caught: [k, probability] }) => {
    const law = pointLaw([stage('power', Number(k))]);
    expectValue(entry, db(law.quantilePower(1 - Number(probability))), TAIL);
  });
});

describe('thresholds over a floor that is itself estimated', () => {
  test.each(checkValues(/ca\.(\d+)\.(.*)/))('$id', ({ entry, caught: [cells, probability] }) => {
    const factor = thresholdFactor(pointLaw([]), Number(probability), Number(cells));
    expectValue(entry, factor, TAIL * entry.value);
  });
});
