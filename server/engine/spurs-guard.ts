const STEPS_PER_WIDTH = 32;
const MOST_WIDTHS = 24;

/** What the skirt of a CW signal adds at an offset, tabulated from the filter's response. */
export interface Skirt {
  /** Power at an offset over the power at the centre; 0 beyond the table. */
  leakAt(offsetHz: number): number;
  /** Offset beyond which the response stays below so many dB (negative). */
  radiusHz(responseDb: number): number;
  /** Full width of the response that many dB below its top (positive). */
  widthHz(dropDb: number): number;
}

/**
 * @param filterResponseDb response at an offset from the centre, 0 at 0, negative away from it
 * @param filterWidthHz -3 dB width; the table reaches 24 of them to each side
 */
export function tabulateSkirt(filterResponseDb: (offsetHz: number) => number, filterWidthHz: number): Skirt {
  const stepHz = filterWidthHz / STEPS_PER_WIDTH;
  const size = MOST_WIDTHS * STEPS_PER_WIDTH + 1;
  const responseDb = new Float64Array(size);
  const leak = new Float64Array(size);
  for (let step = 0; step < size; step++) {
    responseDb[step] = filterResponseDb(step * stepHz);
    leak[step] = 10 ** (responseDb[step] / 10);
  }
  const radiusHz = (limitDb: number) => {
    let step = size - 1;
    while (step > 0 && !(responseDb[step] > limitDb)) step--;
    return (step + 1) * stepHz;
  };
  return {
    leakAt: (offsetHz) => {
      const place = Math.abs(offsetHz) / stepHz;
      const step = Math.floor(place);
      return step >= size - 1 ? 0 : leak[step] + (place - step) * (leak[step + 1] - leak[step]);
    },
    radiusHz,
    widthHz: (dropDb) => {
      let step = 1;
      while (step < size - 1 && responseDb[step] > -dropDb) step++;
      const fall = responseDb[step - 1] - responseDb[step];
      const share = fall > 0 && Number.isFinite(fall) ? (responseDb[step - 1] + dropDb) / fall : 1;
      return 2 * stepHz * (step - 1 + share);
    },
  };
}
