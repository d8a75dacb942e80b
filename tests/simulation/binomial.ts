/** Probability of each count from 0 to `trials`, when each trial succeeds with `probability`. */
export function binomialLaw(trials: number, probability: number): number[] {
  const logFactorial = [0];
  for (let n = 1; n <= trials; n++) logFactorial.push(logFactorial[n - 1] + Math.log(n));
  return Array.from({ length: trials + 1 }, (_, hits) => {
    const ways = logFactorial[trials] - logFactorial[hits] - logFactorial[trials - hits];
    return Math.exp(ways + hits * Math.log(probability) + (trials - hits) * Math.log(1 - probability));
  });
}

/** Counts between which a binomial count stays but for `risk`, half of it on each side. */
export function binomialLimits(
  trials: number,
  probability: number,
  risk: number,
): { low: number; high: number } {
  const law = binomialLaw(trials, probability);
  let low = 0;
  for (let below = law[0]; below < risk / 2; below += law[++low]);
  let high = trials;
  for (let above = law[trials]; above < risk / 2; above += law[--high]);
  return { low, high };
}
