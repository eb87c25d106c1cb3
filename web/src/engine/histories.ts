// The packed columns of one flight, by name, and their values at a moment.

export class Histories {
  readonly rows: number;
  private readonly columns: ReadonlyMap<string, Float64Array>;

  constructor(names: readonly string[], packed: Float64Array) {
    this.rows = names.length === 0 ? 0 : packed.length / names.length;
    this.columns = new Map(names.map((name, i) => [name, packed.subarray(i * this.rows, (i + 1) * this.rows)]));
  }

  column(name: string): Float64Array {
    return this.columns.get(name) ?? new Float64Array();
  }

  /** Last sample not after this time, d; -1 where there is no sample. */
  indexAt(time_d: number): number {
    const times = this.column("t_d");
    let [low, high] = [0, times.length - 1];
    while (low < high) {
      const middle = (low + high + 1) >> 1;
      if ((times[middle] ?? 0) <= time_d) low = middle;
      else high = middle - 1;
    }
    return high < 0 ? -1 : low;
  }

  /** Whether the column has a value anywhere. */
  has(name: string): boolean {
    return this.column(name).some(Number.isFinite);
  }

  /** Straight between samples, the short way round for the clock angle; NaN where the column has no value. */
  at(name: string, time_d: number): number {
    const times = this.column("t_d");
    const values = this.column(name);
    const i = this.indexAt(time_d);
    const [value, next] = [values[i] ?? Number.NaN, values[i + 1] ?? Number.NaN];
    const [start, end] = [times[i] ?? Number.NaN, times[i + 1] ?? Number.NaN];
    if (Number.isNaN(next) || !(end > start)) return value;
    if (Number.isNaN(value)) return next;
    const turn = name === "clock_deg" && Math.abs(next - value) > 180 ? 360 * Math.sign(value - next) : 0;
    const between = value + ((next + turn - value) * (time_d - start)) / (end - start);
    return Math.abs(between) > 180 && turn !== 0 ? between - 360 * Math.sign(between) : between;
  }

  /** About so many sample numbers, evenly spread, with the first and the last. */
  sampled(count: number): number[] {
    const last = this.rows - 1;
    if (last < 0) return [];
    const numbers = Array.from({ length: count }, (_, i) => Math.round((i * last) / (count - 1)));
    return [...new Set(numbers)];
  }
}
