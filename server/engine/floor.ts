import { fitPolynomial, legendre, legendreBasis, multiply, type PolynomialFit } from './floor-polynomial.ts';
import { sampleQuantile } from './floor-quantile.ts';
import type { PointLaw } from './point-law.ts';

const LARGEST_SAMPLE = 1024;
const MOST_BLOCKS = 64;
const HIGHEST_DEGREE = 12;
const GRID = 4096;
const CELL_NODES = 65;
const FEWEST_INDEPENDENT_PER_BLOCK = 24;
const FILTER_WIDTHS_PER_BLOCK = 40;

export interface FloorOptions {
  /** Law of one displayed point. */
  law: Pick<PointLaw, 'meanPower' | 'relativeVariance' | 'quantilePower'>;
  spacingHz: number;
  /** -3 dB width of the resolution filter. */
  filterWidthHz: number;
  /** 1 where a point is left out (a spur, a person's exclusion). */
  excluded?: Uint8Array;
  /** Which quantile carries the level: low where spurs are still in, 0.5 once they are out. */
  quantile?: number;
  /** Share of the points that count as independent; absent: spacing over 1.5 filter widths, at most 1. */
  independentFraction?: number;
  /** True: the shortest blocks at once, for residuals that no slow shape of the floor may colour. */
  shortest?: boolean;
}

export interface LocalFloor {
  /** Mean linear power of a displayed point of noise alone, per point, in the unit of the input. */
  floorPower: Float64Array;
  /** Independent points that a floor value rests on, at the 65 places that part the span evenly: its relative variance is relativeVariance/cells. */
  cellsAt: Float64Array;
  /** Blocks between which the floor is interpolated; 0: a smooth trend over the whole span. */
  blocks: number;
  /** Degree of the polynomial where it is a trend. */
  degree: number;
}

interface BlockLevels {
  /** Position of each block, -1 to 1 across the span. */
  at: number[];
  /** Natural log of the mean power. */
  level: number[];
  /** Its standard deviation. */
  deviation: number[];
}

/**
 * Local noise floor as mean linear power per point, robust against spurs.
 *
 * Levels are quantiles of linear power in blocks, divided by the law's own quantile relative to its mean. The simplest
 * description that the blocks allow is taken: a polynomial in dB over the whole span, else interpolation in dB between
 * ever shorter overlapping blocks until blocks half as long agree with it. A block never gets shorter than 40 filter
 * widths or 24 independent points, so it can't follow a spur.
 *
 * @param powerMw linear power per point; values that are not positive and finite are passed over
 * @param frequencyHz rising, same length
 * @throws RangeError where no point is left
 */
export function robustFloor(
  powerMw: Float64Array,
  frequencyHz: Float64Array,
  options: FloorOptions,
): LocalFloor {
  const length = powerMw.length;
  const quantile = options.quantile ?? 0.5;
  const fraction = independentFraction(options);
  const kept = keptCount(powerMw, options.excluded);
  if (kept === 0) throw new RangeError('Every point is left out: no floor can be estimated.');
  const law = lawQuantile(options.law, quantile);
  const measure = (blocks: number, overlapping: boolean) =>
    blockLevels(powerMw, frequencyHz, options.excluded, blocks, overlapping, quantile, law, fraction);

  const independent = Math.max(1, kept * fraction);
  const trendBlocks = Math.max(1, Math.min(MOST_BLOCKS, Math.floor(independent / 12), length));
  const trendLevels = measure(trendBlocks, false);
  const { at, level, deviation } = trendLevels;
  const trend = fitPolynomial(at, level, deviation, quantile < 0.5, HIGHEST_DEGREE);
  const reach = trend.degree > 2 ? 1 / trendBlocks : 1;
  const lowest = at[0] - reach;
  const highest = at[at.length - 1] + reach;
  const inside = (u: number) => Math.min(highest, Math.max(lowest, u));
  const trendAt = (u: number) => legendre(trend.coefficients, inside(u));
  const efficiency = options.law.relativeVariance / law.variance;
  const finest = finestBlocks(length, independent, options);

  if (finest < 4 || (options.shortest !== true && agrees(trendLevels, trendAt, trend.degree + 1))) {
    return {
      floorPower: evaluate(frequencyHz, trendAt),
      cellsAt: Float64Array.from({ length: CELL_NODES }, (_, node) => {
        const basis = legendreBasis(inside((2 * node) / (CELL_NODES - 1) - 1), trend.degree);
        const spread = multiply(trend.covariance, basis).reduce(
          (sum, entry, row) => sum + entry * basis[row],
          0,
        );
        return options.law.relativeVariance / spread;
      }),
      blocks: 0,
      degree: trend.degree,
    };
  }

  const curve = fitPolynomial(at, level, deviation, true);
  let blocks = options.shortest === true ? finest : 4;
  let knots = measure(blocks, true);
  while (blocks * 2 <= finest) {
    const finer = measure(blocks * 2, false);
    if (agrees(finer, interpolator(knots, curve), 0, 1)) break;
    blocks *= 2;
    knots = measure(blocks, true);
  }
  return {
    floorPower: evaluate(frequencyHz, interpolator(knots, curve)),
    cellsAt: new Float64Array(CELL_NODES).fill(Math.max(1, (independent / blocks) * efficiency)),
    blocks,
    degree: curve.degree,
  };
}

function independentFraction(options: FloorOptions): number {
  const physical = options.spacingHz / (1.5 * options.filterWidthHz);
  return Math.min(1, Math.max(1e-6, options.independentFraction ?? physical));
}

function finestBlocks(length: number, independent: number, options: FloorOptions): number {
  const byPoints = independent / FEWEST_INDEPENDENT_PER_BLOCK;
  const byWidth = (length * options.spacingHz) / (FILTER_WIDTHS_PER_BLOCK * options.filterWidthHz);
  return Math.floor(Math.min(MOST_BLOCKS, byPoints, byWidth));
}

function keptCount(powerMw: Float64Array, excluded: Uint8Array | undefined): number {
  let kept = 0;
  for (let index = 0; index < powerMw.length; index++) {
    if (excluded?.[index] !== 1 && powerMw[index] > 0) kept++;
  }
  return kept;
}

/** Quantile of a point over its mean, and the variance of the log of a sample quantile times the number of points. */
function lawQuantile(law: FloorOptions['law'], quantile: number) {
  const step = Math.min(0.05, quantile / 4);
  const slope =
    (Math.log(law.quantilePower(quantile + step)) - Math.log(law.quantilePower(quantile - step))) /
    (2 * step);
  return {
    ratio: law.quantilePower(quantile) / law.meanPower,
    variance: Math.max(1e-12, quantile * (1 - quantile) * slope * slope),
  };
}

/** Position of a point on -1 to 1 across the span. */
function scaledAxis(frequencyHz: Float64Array): (index: number) => number {
  const first = frequencyHz[0];
  const span = frequencyHz[frequencyHz.length - 1] - first;
  return span > 0 ? (index) => (2 * (frequencyHz[index] - first)) / span - 1 : () => 0;
}

function blockLevels(
  powerMw: Float64Array,
  frequencyHz: Float64Array,
  excluded: Uint8Array | undefined,
  blocks: number,
  overlapping: boolean,
  quantile: number,
  law: { ratio: number; variance: number },
  fraction: number,
): BlockLevels {
  const length = powerMw.length;
  const scaled = scaledAxis(frequencyHz);
  const width = length / blocks;
  const starts = overlapping ? 2 * blocks - 1 : blocks;
  const values = new Float64Array(Math.min(LARGEST_SAMPLE, Math.ceil(width) + 1));
  const levels: BlockLevels = { at: [], level: [], deviation: [] };
  for (let block = 0; block < starts; block++) {
    const start = Math.round(overlapping ? (block * width) / 2 : block * width);
    const end = Math.min(length, Math.round(start + width));
    let count = 0;
    let present = 0;
    let sumAt = 0;
    const stride = Math.max(1, (end - start) / LARGEST_SAMPLE);
    let jitter = 12345;
    for (let place = start; place < end && count < values.length; place += stride) {
      let index = Math.floor(place);
      if (stride > 1) {
        jitter = (Math.imul(jitter, 1664525) + 1013904223) >>> 0;
        index = Math.min(end - 1, Math.floor(place + (stride * jitter) / 4294967296));
      }
      present++;
      const power = powerMw[index];
      if (excluded?.[index] === 1 || !(power > 0) || power === Infinity) continue;
      values[count++] = power;
      sumAt += scaled(index);
    }
    if (count < 3 || count < 0.08 * present) continue;
    const independent = Math.max(1, Math.min(count, count * stride * fraction));
    levels.at.push(sumAt / count);
    levels.level.push(Math.log(sampleQuantile(values, count, quantile) / law.ratio));
    levels.deviation.push(Math.sqrt(law.variance / independent));
  }
  if (levels.at.length === 0 && blocks > 1) {
    return blockLevels(
      powerMw,
      frequencyHz,
      excluded,
      Math.max(1, blocks >> 2),
      false,
      quantile,
      law,
      fraction,
    );
  }
  if (levels.at.length === 0) return onlyBlock(powerMw, excluded, quantile, law);
  return levels;
}

function onlyBlock(
  powerMw: Float64Array,
  excluded: Uint8Array | undefined,
  quantile: number,
  law: { ratio: number; variance: number },
): BlockLevels {
  const values = powerMw.filter((power, index) => power > 0 && excluded?.[index] !== 1);
  const level = Math.log(sampleQuantile(values, values.length, quantile) / law.ratio);
  return { at: [0], level: [level], deviation: [Math.sqrt(law.variance / values.length)] };
}

/**
 * Whether block levels scatter about a description no more than their own deviations allow: chi-square below its mean
 * plus so many standard deviations (Wilson and Hilferty's approximation), 3.1 standing for one in a thousand. Each block
 * counts with at most 16, so that one or two spoilt blocks don't decide.
 */
function agrees(
  levels: BlockLevels,
  describe: (at: number) => number,
  parameters: number,
  sigmasAllowed = 3.1,
): boolean {
  const degrees = levels.at.length - parameters;
  if (degrees < 1) return true;
  let chiSquare = 0;
  levels.at.forEach((at, block) => {
    const sigmas = (levels.level[block] - describe(at)) / levels.deviation[block];
    chiSquare += Math.min(16, sigmas * sigmas);
  });
  const spread = 2 / (9 * degrees);
  return chiSquare < degrees * (1 - spread + sigmasAllowed * Math.sqrt(spread)) ** 3;
}

/** Linear in the log between knots about a curve over the span; flat about that curve beyond the outer knots. */
function interpolator(knots: BlockLevels, curve: PolynomialFit): (at: number) => number {
  const { at: places } = knots;
  const above = places.map((place, knot) => knots.level[knot] - legendre(curve.coefficients, place));
  let right = 0;
  return (at) => {
    if (right > 0 && places[right - 1] > at) right = 0;
    while (right < places.length && places[right] < at) right++;
    const trend = legendre(curve.coefficients, at);
    if (right === 0) return trend + above[0];
    if (right === places.length) return trend + above[right - 1];
    const share = (at - places[right - 1]) / (places[right] - places[right - 1]);
    return trend + above[right - 1] + share * (above[right] - above[right - 1]);
  };
}

/** Linear power from a log level by place: exact on a fine grid, linear between its nodes. */
function evaluate(frequencyHz: Float64Array, levelAt: (at: number) => number): Float64Array {
  const length = frequencyHz.length;
  const first = frequencyHz[0];
  const span = frequencyHz[length - 1] - first;
  const floorPower = new Float64Array(length);
  if (!(span > 0)) return floorPower.fill(Math.exp(levelAt(0)));
  const cells = Math.min(GRID, length);
  const nodes = Float64Array.from({ length: cells + 2 }, (_, node) =>
    Math.exp(levelAt((2 * node) / cells - 1)),
  );
  const scale = cells / span;
  for (let index = 0; index < length; index++) {
    const place = (frequencyHz[index] - first) * scale;
    const node = Math.floor(place);
    floorPower[index] = nodes[node] + (place - node) * (nodes[node + 1] - nodes[node]);
  }
  return floorPower;
}
