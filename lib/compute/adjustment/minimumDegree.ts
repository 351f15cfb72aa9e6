/**
 * Fill-reducing elimination order for normal equations whose rows are given as lists of unknowns: approximate
 * minimum degree on the quotient graph (Amestoy, Davis and Duff 1996, "An approximate minimum degree ordering
 * algorithm", SIAM J. Matrix Anal. Appl. 17; Davis, Direct Methods for Sparse Linear Systems, ch. 7). Every row is
 * an element, a clique of unknowns, from the outset (Duff and Reid 1983), so that no matrix of neighbours is made.
 *
 * Unknowns with the same elements become one and are eliminated together; an unknown in very many rows comes last
 * without being looked at.
 *
 * @param rowStart,columns compressed rows
 * @returns the unknowns in their order of elimination
 */
export function minimumDegreeOrder(unknowns: number, rowStart: Int32Array, columns: Int32Array): Int32Array {
  return new QuotientGraph(unknowns, rowStart, columns).order();
}

class QuotientGraph {
  /** Unknowns of each live element: first the rows, then one for each pivot. */
  private readonly members: number[][] = [];
  private readonly sizes: number[] = [];
  private readonly dead: boolean[] = [];
  /** Live elements of each unknown that stands for itself. */
  private readonly elements: number[][];
  /** How many unknowns one stands for; 0 where another stands for it or it is eliminated. */
  private readonly count: Int32Array;
  private readonly degree: Int32Array;
  /** Those that an unknown stands for beside itself, as a linked list. */
  private readonly follower: Int32Array;
  private readonly lastFollower: Int32Array;
  private readonly postponed: number[] = [];

  /** Unknowns by degree, doubly linked. */
  private readonly head: Int32Array;
  private readonly next: Int32Array;
  private readonly previous: Int32Array;

  /** Size of an element outside the pivot's, valid where `seen` bears the present stamp. */
  private readonly outside: number[] = [];
  private readonly seen: number[] = [];
  private readonly marked: Int32Array;
  private stamp = 0;

  constructor(
    private readonly n: number,
    rowStart: Int32Array,
    columns: Int32Array,
  ) {
    this.count = new Int32Array(n).fill(1);
    this.degree = new Int32Array(n);
    this.follower = new Int32Array(n).fill(-1);
    this.lastFollower = Int32Array.from({ length: n }, (_, i) => i);
    this.head = new Int32Array(n + 1).fill(-1);
    this.next = new Int32Array(n).fill(-1);
    this.previous = new Int32Array(n).fill(-1);
    this.marked = new Int32Array(n);
    this.elements = Array.from({ length: n }, () => []);

    const touched = new Int32Array(n);
    for (const column of columns) touched[column]++;
    const most = Math.max(64, 10 * Math.sqrt(rowStart.length));
    for (let i = 0; i < n; i++) {
      if (touched[i] <= most) continue;
      this.postponed.push(i);
      this.count[i] = 0;
    }
    for (let row = 0; row + 1 < rowStart.length; row++) {
      if (rowStart[row + 1] - rowStart[row] < 2) continue;
      const stamp = ++this.stamp;
      const clique: number[] = [];
      for (let e = rowStart[row]; e < rowStart[row + 1]; e++) {
        const column = columns[e];
        if (this.count[column] === 0 || this.marked[column] === stamp) continue;
        this.marked[column] = stamp;
        clique.push(column);
      }
      if (clique.length < 2) continue;
      const element = this.addElement(clique, clique.length);
      for (const column of clique) this.elements[column].push(element);
    }
    for (let i = 0; i < n; i++) {
      if (this.count[i] === 0) continue;
      let bound = 0;
      for (const e of this.elements[i]) bound += this.sizes[e] - 1;
      this.enqueue(i, Math.min(n - 1, bound));
    }
  }

  order(): Int32Array {
    const order = new Int32Array(this.n);
    let placed = 0;
    const place = (pivot: number) => {
      for (let i = pivot; i >= 0; i = this.follower[i]) order[placed++] = i;
    };
    for (let least = 0; placed < this.n - this.postponed.length; ) {
      const pivot = this.head[least];
      if (pivot < 0) {
        least++;
        continue;
      }
      this.dequeue(pivot);
      least = Math.min(least, this.eliminate(pivot, this.n - placed));
      place(pivot);
    }
    for (const i of this.postponed) order[placed++] = i;
    return order;
  }

  /** Answers the least degree among the unknowns next to the pivot, after it. */
  private eliminate(pivot: number, left: number): number {
    const boundary = this.boundaryOf(pivot);
    this.count[pivot] = 0;
    if (boundary.length === 0) return this.n;

    // Size of every neighbouring element outside the new one, by subtraction.
    const stamp = ++this.stamp;
    let size = 0;
    for (const i of boundary) {
      size += this.count[i];
      for (const e of this.elements[i]) {
        if (this.dead[e]) continue;
        if (this.seen[e] !== stamp) {
          this.seen[e] = stamp;
          this.outside[e] = this.sizes[e];
        }
        this.outside[e] -= this.count[i];
      }
    }

    const element = this.addElement(boundary, size);
    const alike = new Map<number, number[]>();
    const kept: number[] = [];
    for (const i of boundary) {
      this.dequeue(i);
      let sum = 0;
      let hash = 0;
      const live: number[] = [];
      for (const e of this.elements[i]) {
        if (this.dead[e]) continue;
        if (this.outside[e] === 0) {
          // All of it lies in the new element.
          this.dead[e] = true;
          this.members[e] = [];
          continue;
        }
        sum += this.outside[e];
        hash = (hash + e) | 0;
        live.push(e);
      }
      if (live.length === 0) {
        // Its neighbours are those of the pivot: it is eliminated with it.
        size -= this.count[i];
        this.join(pivot, i);
        continue;
      }
      live.push(element);
      this.elements[i] = live;
      this.degree[i] = Math.min(this.degree[i], sum);
      const bucket = alike.get(hash);
      if (bucket) bucket.push(i);
      else alike.set(hash, [i]);
      kept.push(i);
    }
    this.sizes[element] = size;
    for (const bucket of alike.values()) if (bucket.length > 1) this.mergeAlike(bucket);

    let least = this.n;
    const alive = kept.filter((i) => this.count[i] > 0);
    this.members[element] = alive;
    for (const i of alive) {
      // `degree` holds the least of the old bound and of the parts outside the new element.
      const bound = Math.min(left - this.count[i], this.degree[i] + size - this.count[i]);
      this.enqueue(i, Math.max(0, bound));
      least = Math.min(least, this.degree[i]);
    }
    return least;
  }

  /** Unknowns next to the pivot; its elements are taken up in the new one. */
  private boundaryOf(pivot: number): number[] {
    const stamp = ++this.stamp;
    this.marked[pivot] = stamp;
    const boundary: number[] = [];
    for (const e of this.elements[pivot]) {
      if (this.dead[e]) continue;
      for (const i of this.members[e]) {
        if (this.count[i] === 0 || this.marked[i] === stamp) continue;
        this.marked[i] = stamp;
        boundary.push(i);
      }
      this.dead[e] = true;
      this.members[e] = [];
    }
    this.elements[pivot] = [];
    return boundary;
  }

  /** Unknowns of the same elements become one. */
  private mergeAlike(bucket: number[]): void {
    for (let a = 0; a < bucket.length; a++) {
      const i = bucket[a];
      if (this.count[i] === 0) continue;
      const stamp = ++this.stamp;
      for (const e of this.elements[i]) this.seen[e] = stamp;
      for (let b = a + 1; b < bucket.length; b++) {
        const j = bucket[b];
        if (this.count[j] === 0 || this.elements[j].length !== this.elements[i].length) continue;
        if (this.elements[j].every((e) => this.seen[e] === stamp)) this.join(i, j);
      }
    }
  }

  /** Lets `of` stand for `other` too. */
  private join(of: number, other: number): void {
    this.count[of] += this.count[of] > 0 ? this.count[other] : 0;
    this.count[other] = 0;
    this.elements[other] = [];
    this.follower[this.lastFollower[of]] = other;
    this.lastFollower[of] = this.lastFollower[other];
  }

  private addElement(members: number[], size: number): number {
    this.members.push(members);
    this.sizes.push(size);
    this.dead.push(false);
    this.outside.push(0);
    this.seen.push(0);
    return this.members.length - 1;
  }

  private enqueue(i: number, degree: number): void {
    this.degree[i] = degree;
    this.previous[i] = -1;
    this.next[i] = this.head[degree];
    if (this.next[i] >= 0) this.previous[this.next[i]] = i;
    this.head[degree] = i;
  }

  private dequeue(i: number): void {
    if (this.previous[i] >= 0) this.next[this.previous[i]] = this.next[i];
    else this.head[this.degree[i]] = this.next[i];
    if (this.next[i] >= 0) this.previous[this.next[i]] = this.previous[i];
  }
}
