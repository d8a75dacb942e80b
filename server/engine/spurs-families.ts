export interface SpurFamily {
  spacingHz: number;
  /** Indices into the frequencies given, rising. */
  members: number[];
}

const MOST_SPURS = 512;
const NEIGHBOURS = 8;

/**
 * Evenly spaced families among spurs: combs of at least three members of which at least two thirds of the places are
 * filled, and which chance would not make (less than 1 in 100 over every pair that could start one, the spurs being
 * strewn evenly over the span). The longest is taken first; a spur belongs to one family.
 *
 * @param frequencyHz rising frequencies of the spurs
 * @param toleranceHz how far a member may be off its place
 * @param spanHz span searched
 */
export function findFamilies(
  frequencyHz: readonly number[],
  toleranceHz: number,
  spanHz: number,
): SpurFamily[] {
  if (frequencyHz.length < 3 || frequencyHz.length > MOST_SPURS || !(spanHz > 0)) return [];
  const taken = new Uint8Array(frequencyHz.length);
  const families: SpurFamily[] = [];
  for (;;) {
    const family = longestComb(frequencyHz, taken, toleranceHz, spanHz);
    if (family === null) return families;
    for (const member of family.members) taken[member] = 1;
    families.push(family);
  }
}

function longestComb(
  frequencyHz: readonly number[],
  taken: Uint8Array,
  toleranceHz: number,
  spanHz: number,
): SpurFamily | null {
  const free = frequencyHz.map((_, index) => index).filter((index) => taken[index] === 0);
  const hitByChance = Math.min(1, (2 * toleranceHz * free.length) / spanHz);
  const pairs = free.length * Math.min(NEIGHBOURS, free.length - 1);
  let best: SpurFamily | null = null;
  for (let start = 0; start < free.length; start++) {
    for (let next = start + 1; next < Math.min(free.length, start + 1 + NEIGHBOURS); next++) {
      const comb = walk(frequencyHz, free, start, next, toleranceHz);
      const found = comb.members.length;
      if (found < 3 || found < (best?.members.length ?? 3)) continue;
      if (best !== null && found === best.members.length && comb.spacingHz <= best.spacingHz) continue;
      if (pairs * chanceOf(found - 2, comb.places - 2, hitByChance) < 0.01) best = comb;
    }
  }
  return best;
}

/** Follows a comb upward from two members, refining its spacing as it goes; two empty places in a row end it. */
function walk(
  frequencyHz: readonly number[],
  free: readonly number[],
  start: number,
  next: number,
  toleranceHz: number,
) {
  const origin = frequencyHz[free[start]];
  let spacingHz = frequencyHz[free[next]] - origin;
  const members = [free[start], free[next]];
  let lastPlace = 1;
  let cursor = next + 1;
  if (!(spacingHz > 3 * toleranceHz)) return { spacingHz, members: [], places: 0 };
  for (let place = 2; place - lastPlace <= 2 && cursor < free.length; place++) {
    const expected = origin + place * spacingHz;
    const slack = toleranceHz * (1 + (place - lastPlace) / lastPlace);
    while (cursor < free.length && frequencyHz[free[cursor]] < expected - slack) cursor++;
    if (cursor === free.length) break;
    const offset = frequencyHz[free[cursor]] - expected;
    if (offset > slack) continue;
    members.push(free[cursor]);
    lastPlace = place;
    spacingHz = (frequencyHz[free[cursor]] - origin) / place;
    cursor++;
  }
  const places = lastPlace + 1;
  return members.length * 3 >= places * 2
    ? { spacingHz, members, places }
    : { spacingHz, members: [], places };
}

/** P(at least `hits` of `tries`) of a binomial. */
function chanceOf(hits: number, tries: number, probability: number): number {
  if (probability >= 1) return 1;
  let sum = 0;
  let term = (1 - probability) ** tries;
  for (let k = 0; k <= tries; k++) {
    if (k >= hits) sum += term;
    term *= ((tries - k) / (k + 1)) * (probability / (1 - probability));
  }
  return sum;
}
