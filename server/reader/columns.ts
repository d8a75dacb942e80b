const FIRST_CAPACITY = 4096;

/** Numbers of the wanted columns as they are read, row by row; NaN where a cell has no value. */
export class Columns {
  /** One buffer per wanted column, by its place among the wanted; only the first `rows` values count. */
  data: Float64Array[];
  rows = 0;
  capacity = FIRST_CAPACITY;

  constructor(count: number) {
    this.data = Array.from({ length: count }, () => new Float64Array(FIRST_CAPACITY));
  }

  /** Makes room for at least one more row. */
  reserve(): void {
    if (this.rows < this.capacity) return;
    this.capacity *= 2;
    this.data = this.data.map((old) => {
      const larger = new Float64Array(this.capacity);
      larger.set(old);
      return larger;
    });
  }

  push(values: number[]): void {
    this.reserve();
    values.forEach((value, index) => {
      this.data[index][this.rows] = value;
    });
    this.rows += 1;
  }

  /** A column's values from row `from` up to `to`, without copying. */
  part(column: number, from: number, to: number): Float64Array {
    return this.data[column].subarray(from, to);
  }
}
