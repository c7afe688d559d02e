/** A column of numbers that grows as it is read. */
export class GrowableColumn {
  private values = new Float64Array(1024);
  private used = 0;

  push(value: number): void {
    if (this.used === this.values.length) {
      const larger = new Float64Array(2 * this.values.length);
      larger.set(this.values);
      this.values = larger;
    }
    this.values[this.used] = value;
    this.used += 1;
  }

  get length(): number {
    return this.used;
  }

  /** What was pushed, oldest first; shares memory with the column. */
  toArray(): Float64Array {
    return this.values.subarray(0, this.used);
  }
}
