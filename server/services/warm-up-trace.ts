const POINTS = 1001;

/** A made-up noise trace, the same every time, for running code once before somebody waits for it. */
export function warmUpTrace(): { frequencyHz: Float64Array; level: Float64Array } {
  let state = 1;
  const uniform = () => {
    state = (Math.imul(state, 1664525) + 1013904223) >>> 0;
    return (state + 0.5) / 2 ** 32;
  };
  const level = Float64Array.from({ length: POINTS }, () => {
    let sumDb = 0;
    for (let sweep = 0; sweep < 20; sweep += 1) sumDb += 10 * Math.log10(-Math.log(uniform()));
    return Math.round((sumDb / 20 - 95) * 100) / 100;
  });
  return { frequencyHz: Float64Array.from({ length: POINTS }, (_, index) => 70e6 + index * 10e3), level };
}
