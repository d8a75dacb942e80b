/**
 * Sample quantile by selection, without sorting: the value at position p·(count + 1) of the ordered values,
 * interpolated between its neighbours, which is nearly unbiased for the law's quantile at p.
 *
 * @param values working space; its first `count` entries are reordered
 * @param count how many entries count, >= 1
 * @param p probability, 0 to 1
 */
export function sampleQuantile(values: Float64Array, count: number, p: number): number {
  const position = Math.min(count - 1, Math.max(0, p * (count + 1) - 1));
  const rank = Math.floor(position);
  const lower = selectRank(values, count, rank);
  const fraction = position - rank;
  if (fraction === 0 || rank + 1 >= count) return lower;
  let upper = Infinity;
  for (let index = rank + 1; index < count; index++) if (values[index] < upper) upper = values[index];
  return lower + fraction * (upper - lower);
}

/** Hoare's selection with the median of three as pivot: puts the rank-th smallest at its place. */
function selectRank(values: Float64Array, count: number, rank: number): number {
  let left = 0;
  let right = count - 1;
  while (right > left) {
    const pivot = medianOfThree(values[left], values[(left + right) >> 1], values[right]);
    let low = left;
    let high = right;
    while (low <= high) {
      while (values[low] < pivot) low++;
      while (values[high] > pivot) high--;
      if (low <= high) {
        const swap = values[low];
        values[low] = values[high];
        values[high] = swap;
        low++;
        high--;
      }
    }
    if (rank <= high) right = high;
    else if (rank >= low) left = low;
    else break;
  }
  return values[rank];
}

function medianOfThree(a: number, b: number, c: number): number {
  return Math.max(Math.min(a, b), Math.min(Math.max(a, b), c));
}
