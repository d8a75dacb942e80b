/** Spreads a seed and any number of indices over 32 bits, so that every capture has its own stream. */
export function mixSeed(seed: number, ...indices: number[]): number {
  let hash = seed >>> 0;
  for (const index of indices) {
    hash = (Math.imul(hash ^ (index >>> 0), 0x9e3779b1) + 0x7f4a7c15) >>> 0;
    hash = Math.imul(hash ^ (hash >>> 16), 0x85ebca6b) >>> 0;
    hash = Math.imul(hash ^ (hash >>> 13), 0xc2b2ae35) >>> 0;
    hash = (hash ^ (hash >>> 16)) >>> 0;
  }
  return hash;
}

/**
 * A seeded stream of random numbers: xoshiro128** (Blackman and Vigna, "Scrambled Linear Pseudorandom
 * Number Generators", ACM TOMS 47, 2021; from memory), its state filled by splitmix32. The same seed
 * gives the same numbers.
 */
export class Random {
  private a: number;
  private b: number;
  private c: number;
  private d: number;
  private spare = 0;
  private hasSpare = false;

  constructor(seed: number) {
    let state = seed >>> 0;
    const split = () => {
      state = (state + 0x9e3779b9) >>> 0;
      let z = state;
      z = Math.imul(z ^ (z >>> 16), 0x85ebca6b);
      z = Math.imul(z ^ (z >>> 13), 0xc2b2ae35);
      return z ^ (z >>> 16);
    };
    this.a = split();
    this.b = split();
    this.c = split();
    this.d = split() | 1;
  }

  /** 32 random bits as a signed integer. */
  bits(): number {
    const product = Math.imul(this.b, 5);
    const result = Math.imul((product << 7) | (product >>> 25), 9);
    const shifted = this.b << 9;
    this.c ^= this.a;
    this.d ^= this.b;
    this.b ^= this.c;
    this.a ^= this.d;
    this.c ^= shifted;
    this.d = (this.d << 11) | (this.d >>> 21);
    return result;
  }

  /** A number in the open interval 0 to 1. */
  uniform(): number {
    return ((this.bits() >>> 0) + 0.5) / 4294967296;
  }

  /** A standard normal number, by Marsaglia's polar method. */
  normal(): number {
    if (this.hasSpare) {
      this.hasSpare = false;
      return this.spare;
    }
    for (;;) {
      const x = (this.bits() + 0.5) / 2147483648;
      const y = (this.bits() + 0.5) / 2147483648;
      const square = x * x + y * y;
      if (square >= 1) continue;
      const scale = Math.sqrt((-2 * Math.log(square)) / square);
      this.spare = y * scale;
      this.hasSpare = true;
      return x * scale;
    }
  }

  /** Fills `target` from `from` to before `to` with normal numbers of standard deviation `deviation`. */
  fillNormal(target: Float64Array, from: number, to: number, deviation: number): void {
    for (let i = from; i < to; i++) target[i] = this.normal() * deviation;
  }
}
