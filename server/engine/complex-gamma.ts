/** Stirling's coefficients B(2k)/(2k(2k-1)). */
const STIRLING = [1 / 12, -1 / 360, 1 / 1260, -1 / 1680, 1 / 1188, -691 / 360360, 1 / 156];
const SHIFT_TO = 9;

/**
 * Natural logarithm of Γ(re + i·im) for re > 0, with the imaginary part continuous in `im` (0 at im = 0).
 * Recurrence up to re >= 9, then Stirling's series: 13 digits.
 */
export function logGamma(re: number, im: number): { re: number; im: number } {
  let outRe = 0;
  let outIm = 0;
  let x = re;
  while (x < SHIFT_TO) {
    outRe -= 0.5 * Math.log(x * x + im * im);
    outIm -= Math.atan2(im, x);
    x += 1;
  }
  const logRe = 0.5 * Math.log(x * x + im * im);
  const logIm = Math.atan2(im, x);
  outRe += (x - 0.5) * logRe - im * logIm - x + 0.5 * Math.log(2 * Math.PI);
  outIm += (x - 0.5) * logIm + im * logRe - im;
  const square = x * x + im * im;
  let powerRe = x / square;
  let powerIm = -im / square;
  const stepRe = powerRe * powerRe - powerIm * powerIm;
  const stepIm = 2 * powerRe * powerIm;
  for (const coefficient of STIRLING) {
    outRe += coefficient * powerRe;
    outIm += coefficient * powerIm;
    [powerRe, powerIm] = [powerRe * stepRe - powerIm * stepIm, powerRe * stepIm + powerIm * stepRe];
  }
  return { re: outRe, im: outIm };
}
