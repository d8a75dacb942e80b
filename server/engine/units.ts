/** Decibels per neper of power, 10/ln 10. */
export const DB_PER_NEPER = 10 / Math.LN10;

/** Boltzmann constant, J/K, exact (SI 2019). */
export const BOLTZMANN = 1.380649e-23;

/** Standard noise temperature, K. */
export const STANDARD_TEMPERATURE_K = 290;

/** Thermal noise density k·T in dBm/Hz: -173.975 at 290 K. */
export function thermalDensityDbmPerHz(temperatureK = STANDARD_TEMPERATURE_K): number {
  return powerToDb(BOLTZMANN * temperatureK * 1e3);
}

/** Linear power of a level in dB: 10^(db/10). */
export function dbToPower(db: number): number {
  return Math.exp(db / DB_PER_NEPER);
}

/** Level in dB of a linear power: 10·log10(power). */
export function powerToDb(power: number): number {
  return DB_PER_NEPER * Math.log(power);
}

/** Linear powers of levels in dB, one per entry. Levels within ±400 dB neither overflow nor vanish. */
export function dbToPowers(levelsDb: Float64Array): Float64Array {
  const powers = new Float64Array(levelsDb.length);
  const perDb = 1 / DB_PER_NEPER;
  for (let i = 0; i < levelsDb.length; i += 1) powers[i] = Math.exp(levelsDb[i] * perDb);
  return powers;
}

/** Sum with Neumaier's compensation, so that the result doesn't depend on the size of the terms. */
export function compensatedSum(values: Iterable<number>): number {
  let sum = 0;
  let lost = 0;
  for (const value of values) {
    const next = sum + value;
    lost += Math.abs(sum) >= Math.abs(value) ? sum - next + value : value - next + sum;
    sum = next;
  }
  return sum + lost;
}

/** Compensated mean of the entries whose mask is 0; NaN where there are none. */
export function meanOfKept(values: Float64Array, leftOut: Uint8Array): number {
  let sum = 0;
  let lost = 0;
  let count = 0;
  for (let i = 0; i < values.length; i += 1) {
    if (leftOut[i] === 1) continue;
    const value = values[i];
    const next = sum + value;
    lost += Math.abs(sum) >= Math.abs(value) ? sum - next + value : value - next + sum;
    sum = next;
    count += 1;
  }
  return (sum + lost) / count;
}
