/** Collects the compressed rows of a model, one observation after the other. */
export class RowBuilder {
  private readonly starts: number[] = [0];
  private readonly entries: number[] = [];
  private readonly rowWeights: number[] = [];

  /** Adds a row touching `columns` with standard deviation `sigma`; answers its index. */
  add(columns: readonly number[], sigma: number): number {
    for (const column of columns) this.entries.push(column);
    this.starts.push(this.entries.length);
    this.rowWeights.push(1 / (sigma * sigma));
    return this.rowWeights.length - 1;
  }

  build() {
    return {
      rowStart: Int32Array.from(this.starts),
      columns: Int32Array.from(this.entries),
      weights: Float64Array.from(this.rowWeights),
    };
  }
}
