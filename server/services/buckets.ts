export interface Buckets {
  hz: Float64Array;
  min: Float64Array;
  max: Float64Array;
}

/**
 * Lowest and highest level in equal parts of a span; parts without a point are left out.
 * @param frequencyHz ascending. @param level one per frequency. @param from first index. @param to index after the last.
 * @param count number of parts. Where the span has no width (zero span) the parts are equal numbers of points.
 * @returns centre of each part, Hz, with its lowest and highest level.
 */
export function bucketed(
  frequencyHz: Float64Array,
  level: Float64Array,
  from: number,
  to: number,
  count: number,
): Buckets {
  const firstHz = frequencyHz[from];
  const spanHz = frequencyHz[to - 1] - firstHz;
  const hz = new Float64Array(count);
  const min = new Float64Array(count).fill(Infinity);
  const max = new Float64Array(count).fill(-Infinity);
  const byFrequency = count / spanHz;
  const byIndex = count / (to - from);
  for (let index = from; index < to; index += 1) {
    const position = spanHz > 0 ? (frequencyHz[index] - firstHz) * byFrequency : (index - from) * byIndex;
    const part = Math.min(count - 1, Math.floor(position));
    if (level[index] < min[part]) min[part] = level[index];
    if (level[index] > max[part]) max[part] = level[index];
  }
  let filled = 0;
  for (let part = 0; part < count; part += 1) {
    if (min[part] > max[part]) continue;
    hz[filled] = firstHz + ((part + 0.5) * spanHz) / count;
    min[filled] = min[part];
    max[filled] = max[part];
    filled += 1;
  }
  return { hz: hz.slice(0, filled), min: min.slice(0, filled), max: max.slice(0, filled) };
}
