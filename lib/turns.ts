/** So many wait already that another would not be answered in time. */
export class BusyError extends Error {
  override readonly name = 'BusyError';
}

/** Work that takes a processor for itself: one at a time in a process, a few waiting behind it, the others turned away. */
export class Turns {
  private tail: Promise<unknown> = Promise.resolve();
  private waiting = 0;

  /**
   * @param mostWaiting the one that runs included
   * @param busy what is said to those turned away
   */
  constructor(
    private readonly mostWaiting: number,
    private readonly busy: string,
  ) {}

  /** @throws BusyError where too many wait already */
  take<T>(work: () => Promise<T>): Promise<T> {
    if (this.waiting >= this.mostWaiting) return Promise.reject(new BusyError(this.busy));
    this.waiting++;
    const turn = this.tail.then(work).finally(() => {
      this.waiting--;
    });
    this.tail = turn.catch(() => undefined);
    return turn;
  }
}
