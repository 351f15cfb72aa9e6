import { minimumDegreeOrder } from './minimumDegree';

/**
 * How a sparse system is eliminated: the unknowns in their order, gathered into fronts. A front holds unknowns that
 * are eliminated together, [first[f], first[f+1]) by place in the order, and above them the unknowns that their
 * elimination couples (`boundary`, places in rising order). The boundary lies within the front `parent` and its
 * boundary. Fronts stand in postorder: children before parents, subtrees together.
 */
export interface AssemblyTree {
  readonly fronts: number;
  /** Place of each unknown in the order of elimination, and the unknown at each place. */
  readonly placeOf: Int32Array;
  readonly unknownAt: Int32Array;
  readonly first: Int32Array;
  /** −1 for roots. */
  readonly parent: Int32Array;
  readonly boundaryStart: Int32Array;
  readonly boundary: Int32Array;
  /** Index of each boundary unknown in the parent's front (its own unknowns first, then its boundary). */
  readonly inParent: Int32Array;
  /** Front of each place. */
  readonly frontOf: Int32Array;
  /** Rows by the front that their first unknown is eliminated in: rows [rowsStart[f], rowsStart[f+1]) of `rows`. */
  readonly rowsStart: Int32Array;
  readonly rows: Int32Array;
  /** Index of each entry of the compressed rows in its row's front. */
  readonly local: Int32Array;
}

/**
 * Analyses the structure of normal equations: order, elimination tree, fronts (Liu 1992, "The multifrontal method for
 * sparse matrix solution", SIAM Review 34; Davis, Direct Methods for Sparse Linear Systems, ch. 4). Small fronts are
 * joined with their parents where that adds few zeros, since larger blocks are eliminated faster.
 */
export function assemblyTree(unknowns: number, rowStart: Int32Array, columns: Int32Array): AssemblyTree {
  const order = minimumDegreeOrder(unknowns, rowStart, columns);
  const { place, tree } = postordered(unknowns, rowStart, columns, order);
  const { first, boundaries } = joined(unknowns, rowStart, columns, place, tree);
  return indexed(unknowns, rowStart, columns, place, first, boundaries);
}

/** Elimination tree of the normal equations (Liu 1990; Davis §4.1, of AᵀA from A), parent by place. */
function eliminationTree(
  unknowns: number,
  rowStart: Int32Array,
  columns: Int32Array,
  place: Int32Array,
): Int32Array {
  // Couplings of each place to earlier ones: within a row, each entry to the one before it in the order.
  const sorted = columns.slice();
  const degree = new Int32Array(unknowns + 1);
  for (let row = 0; row + 1 < rowStart.length; row++) {
    const own = sorted.subarray(rowStart[row], rowStart[row + 1]);
    for (let e = 0; e < own.length; e++) own[e] = place[own[e]];
    own.sort();
    for (let e = 1; e < own.length; e++) degree[own[e] + 1]++;
  }
  for (let i = 0; i < unknowns; i++) degree[i + 1] += degree[i];
  const earlier = new Int32Array(degree[unknowns]);
  const fill = degree.slice();
  for (let row = 0; row + 1 < rowStart.length; row++) {
    for (let e = rowStart[row] + 1; e < rowStart[row + 1]; e++) earlier[fill[sorted[e]]++] = sorted[e - 1];
  }

  const parent = new Int32Array(unknowns).fill(-1);
  const ancestor = new Int32Array(unknowns).fill(-1);
  for (let k = 0; k < unknowns; k++) {
    for (let e = degree[k]; e < degree[k + 1]; e++) {
      for (let i = earlier[e]; i !== -1 && i < k; ) {
        const next = ancestor[i];
        ancestor[i] = k;
        if (next === -1) parent[i] = k;
        i = next;
      }
    }
  }
  return parent;
}

/** The order rearranged so that the subtrees of the elimination tree stand together, which changes no fill. */
function postordered(unknowns: number, rowStart: Int32Array, columns: Int32Array, order: Int32Array) {
  const place = new Int32Array(unknowns);
  for (let k = 0; k < unknowns; k++) place[order[k]] = k;
  const parent = eliminationTree(unknowns, rowStart, columns, place);

  const head = new Int32Array(unknowns + 1).fill(-1);
  const next = new Int32Array(unknowns);
  for (let k = unknowns - 1; k >= 0; k--) {
    const up = parent[k] < 0 ? unknowns : parent[k];
    next[k] = head[up];
    head[up] = k;
  }
  const post = new Int32Array(unknowns);
  let placed = 0;
  const stack: number[] = [];
  for (let root = head[unknowns]; root >= 0; root = next[root]) {
    stack.push(root);
    while (stack.length > 0) {
      const top = stack[stack.length - 1];
      const child = head[top];
      if (child < 0) {
        post[top] = placed++;
        stack.pop();
      } else {
        head[top] = next[child];
        stack.push(child);
      }
    }
  }
  const tree = new Int32Array(unknowns).fill(-1);
  for (let k = 0; k < unknowns; k++) if (parent[k] >= 0) tree[post[k]] = post[parent[k]];
  return { place: place.map((k) => post[k]), tree };
}

interface Front {
  first: number;
  /** Places from `first` on. */
  size: number;
  boundary: Int32Array;
  /** Entries of the factor that are zeros. */
  zeros: number;
}

/** Fronts of consecutive places: columns of the same structure together, then small fronts with their parents. */
function joined(
  unknowns: number,
  rowStart: Int32Array,
  columns: Int32Array,
  place: Int32Array,
  tree: Int32Array,
): { first: Int32Array; boundaries: Int32Array[] } {
  const structures = columnStructures(unknowns, rowStart, columns, place, tree);
  const single = structures.map((boundary, first): Front => ({ first, size: 1, boundary, zeros: 0 }));
  const fronts = joinChildren(joinChildren(single, sameStructure), fewZeros);
  return {
    first: Int32Array.from([...fronts.map((front) => front.first), unknowns]),
    boundaries: fronts.map((front) => front.boundary),
  };
}

/** Joins each front, in postorder, with the child that stands right before it, as long as that is wanted. */
function joinChildren(fronts: readonly Front[], wanted: (joint: Front) => boolean): Front[] {
  const result: Front[] = [];
  for (const next of fronts) {
    let front = next;
    for (let child = result.at(-1); child; child = result.at(-1)) {
      // The front before is a child where its elimination leads here; else its subtree ended.
      if (!(child.boundary[0] < next.first + next.size)) break;
      const missing = front.size + front.boundary.length - child.boundary.length;
      const joint = {
        first: child.first,
        size: child.size + front.size,
        boundary: front.boundary,
        zeros: child.zeros + front.zeros + missing * child.size,
      };
      if (!wanted(joint)) break;
      front = joint;
      result.pop();
    }
    result.push(front);
  }
  return result;
}

const sameStructure = (joint: Front) => joint.zeros === 0;

/** Limits of relaxed amalgamation (Chen, Davis, Hager and Rajamanickam 2008, ACM TOMS 35, §2.2). */
function fewZeros({ size, boundary, zeros }: Front): boolean {
  const share = zeros / ((size * (size + 1)) / 2 + size * boundary.length);
  return size <= 4 || (size <= 16 && share < 0.8) || (size <= 48 && share < 0.1) || share < 0.05;
}

/** Places beyond each column's own in its column of the factor, rising. */
function columnStructures(
  unknowns: number,
  rowStart: Int32Array,
  columns: Int32Array,
  place: Int32Array,
  tree: Int32Array,
): Int32Array[] {
  const rowsAt: number[][] = Array.from({ length: unknowns }, () => []);
  for (let row = 0; row + 1 < rowStart.length; row++) {
    let least = unknowns;
    for (let e = rowStart[row]; e < rowStart[row + 1]; e++) least = Math.min(least, place[columns[e]]);
    if (least < unknowns) rowsAt[least].push(row);
  }
  const children: number[][] = Array.from({ length: unknowns }, () => []);
  const marked = new Int32Array(unknowns).fill(-1);
  const structures: Int32Array[] = [];
  const found = new Int32Array(unknowns);
  for (let k = 0; k < unknowns; k++) {
    let count = 0;
    marked[k] = k;
    const add = (i: number) => {
      if (marked[i] === k) return;
      marked[i] = k;
      found[count++] = i;
    };
    for (const row of rowsAt[k])
      for (let e = rowStart[row]; e < rowStart[row + 1]; e++) add(place[columns[e]]);
    for (const child of children[k]) for (const i of structures[child]) add(i);
    structures.push(found.slice(0, count).sort());
    if (tree[k] >= 0) children[tree[k]].push(k);
  }
  return structures;
}

/** Numbers everything within its front, once for all eliminations. */
function indexed(
  unknowns: number,
  rowStart: Int32Array,
  columns: Int32Array,
  placeOf: Int32Array,
  first: Int32Array,
  boundaries: readonly Int32Array[],
): AssemblyTree {
  const fronts = boundaries.length;
  const unknownAt = new Int32Array(unknowns);
  for (let i = 0; i < unknowns; i++) unknownAt[placeOf[i]] = i;
  const frontOf = new Int32Array(unknowns);
  const boundaryStart = new Int32Array(fronts + 1);
  for (let f = 0; f < fronts; f++) {
    frontOf.fill(f, first[f], first[f + 1]);
    boundaryStart[f + 1] = boundaryStart[f] + boundaries[f].length;
  }
  const boundary = new Int32Array(boundaryStart[fronts]);
  for (let f = 0; f < fronts; f++) boundary.set(boundaries[f], boundaryStart[f]);
  const parent = Int32Array.from(boundaries, (own) => (own.length > 0 ? frontOf[own[0]] : -1));

  const rowCount = rowStart.length - 1;
  const rowsStart = new Int32Array(fronts + 1);
  const frontOfRow = new Int32Array(rowCount);
  for (let row = 0; row < rowCount; row++) {
    let least = unknowns - 1;
    for (let e = rowStart[row]; e < rowStart[row + 1]; e++) least = Math.min(least, placeOf[columns[e]]);
    frontOfRow[row] = frontOf[least];
    rowsStart[frontOfRow[row] + 1]++;
  }
  for (let f = 0; f < fronts; f++) rowsStart[f + 1] += rowsStart[f];
  const rows = new Int32Array(rowCount);
  const fill = rowsStart.slice();
  for (let row = 0; row < rowCount; row++) rows[fill[frontOfRow[row]]++] = row;

  const local = new Int32Array(columns.length);
  const inParent = new Int32Array(boundary.length);
  const index = new Int32Array(unknowns);
  const childrenOf: number[][] = Array.from({ length: fronts }, () => []);
  for (let f = 0; f < fronts; f++) if (parent[f] >= 0) childrenOf[parent[f]].push(f);
  for (let f = 0; f < fronts; f++) {
    const size = first[f + 1] - first[f];
    for (let k = 0; k < size; k++) index[first[f] + k] = k;
    for (let e = boundaryStart[f]; e < boundaryStart[f + 1]; e++)
      index[boundary[e]] = size + e - boundaryStart[f];
    for (let r = rowsStart[f]; r < rowsStart[f + 1]; r++) {
      const row = rows[r];
      for (let e = rowStart[row]; e < rowStart[row + 1]; e++) local[e] = index[placeOf[columns[e]]];
    }
    for (const child of childrenOf[f]) {
      for (let e = boundaryStart[child]; e < boundaryStart[child + 1]; e++) inParent[e] = index[boundary[e]];
    }
  }
  return {
    ...{ fronts, placeOf, unknownAt, first, parent, boundaryStart, boundary, inParent },
    ...{ frontOf, rowsStart, rows, local },
  };
}
