const EULER = 0.5772156649015329;

/** Scale on which the chain averages; it decides what a CW signal in noise reads. */
export type AveragingScale = 'power' | 'log' | 'voltage';

/**
 * Power of a CW signal from what a point reads with noise in it; null where nothing is left of it.
 *
 * With r = S/N: a power scale reads N·(1 + r); a log scale, in the mean of its dB, N·r·exp(E1(r)); a voltage scale the
 * mean of a Rice envelope squared, N·(π/4)·L½(-r)² with L½(-r) = e^(-r/2)·[(1 + r)·I0(r/2) + r·I1(r/2)].
 *
 * @param displayedPower linear, as displayed
 * @param noisePower true noise power in the filter there (the floor's mean with the chain's bias taken out), same unit
 */
export function signalPower(
  displayedPower: number,
  noisePower: number,
  scale: AveragingScale,
): number | null {
  if (!(noisePower > 0)) return displayedPower;
  const ratio = displayedPower / noisePower;
  if (scale === 'power') return ratio > 1 ? displayedPower - noisePower : null;
  const reading = scale === 'log' ? logReading : voltageReading;
  if (ratio <= reading(0)) return null;
  let low = 0;
  let high = ratio + 1;
  for (let round = 0; round < 60; round++) {
    const middle = (low + high) / 2;
    if (reading(middle) > ratio) high = middle;
    else low = middle;
  }
  return ((low + high) / 2) * noisePower;
}

function logReading(r: number): number {
  return r === 0 ? Math.exp(-EULER) : r * Math.exp(exponentialIntegral(r));
}

function voltageReading(r: number): number {
  if (r > 40) return r + 0.5 + 1 / (8 * r);
  const half = r / 2;
  const laguerre = Math.exp(-half) * ((1 + r) * besselI(0, half) + r * besselI(1, half));
  return (Math.PI / 4) * laguerre * laguerre;
}

/** E1(x) for x > 0: series below 1.5, continued fraction above (Abramowitz and Stegun 5.1.11, 5.1.22; from memory). */
export function exponentialIntegral(x: number): number {
  if (x < 1.5) {
    let sum = -EULER - Math.log(x);
    let term = -1;
    for (let k = 1; k < 40; k++) {
      term *= -x / k;
      sum += term / k;
    }
    return sum;
  }
  let tail = 0;
  for (let k = 60; k >= 1; k--) tail = k / (1 + k / (x + tail));
  return Math.exp(-x) / (x + tail);
}

/** Modified Bessel function of order 0 or 1 by its power series, x <= 20. */
function besselI(order: 0 | 1, x: number): number {
  const quarter = (x * x) / 4;
  let term = order === 0 ? 1 : x / 2;
  let sum = term;
  for (let k = 1; k < 80; k++) {
    term *= quarter / (k * (k + order));
    sum += term;
  }
  return sum;
}
