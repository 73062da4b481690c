/**
 * The exhaustive search's first stage: which candidates are zero in every charge, modulo p.
 *
 * State is one link and one weight a candidate (8 bytes), addressed by the packed string itself; no equation is stored. Outputs
 * are visited by falling range m. In a layer, strings that are still alive and reach an output without growing mark it as hit
 * (few in most models); every other output has parents by growth at its two ends only, and those depend on its first and last
 * window alone, so the layer is swept block by block with the parents of a block known beforehand: rows of one parent first,
 * they kill most strings, then rows of two or more. Hit outputs are gathered in full, twice.
 *
 * The order only decides how much is found; every step uses an equation of the system, so what it calls zero is zero.
 * Cost: a few nanoseconds an output for the swept part, plus some look-ups a term and cell for a hit one.
 */
import { LimitError } from '../errors.ts';
import type { Field } from '../linear/field.ts';
import { WeightedForest } from '../linear/forest.ts';
import type { Hamiltonian } from '../model/hamiltonian.ts';
import { EndCounts, EndPairs } from './end-pairs.ts';
import { HitSet } from './hit-set.ts';
import { type End, type EndParent, endParents, Neighbourhood, windowTable } from './windows.ts';

/** Spins a candidate may have: its packed form indexes an array. */
export const MAX_SPINS = 15;

/** What a running search tells. */
export interface Progress {
  readonly stage: 'sweep' | 'solve';
  /** Range of the outputs at hand. */
  readonly layer: number;
  /** Share of the work done, 0 … 1, by the number of outputs. */
  readonly done: number;
  readonly candidates: number;
}

/** The state after a layer: everything that later layers can see. */
export interface Snapshot {
  /** Outputs of this range and above have been visited; 1 when the sweeps are over. */
  readonly layer: number;
  /**
   * For every range that has been touched: the strings alive, the roots of their trees and the factors to them. All other
   * strings of these ranges are zero.
   */
  readonly ranges: readonly {
    readonly cells: number;
    readonly strings: Float64Array;
    readonly roots: Float64Array;
    readonly weights: Float64Array;
  }[];
}

/** Where snapshots are kept. Large layers are saved when they are done, small ones are not worth it. */
export interface SnapshotStore {
  load(prime: number): Snapshot | undefined;
  save(prime: number, snapshot: Snapshot): void;
}

/** Called every few milliseconds to tenths of a second; whatever it throws stops the search. */
export type OnProgress = (progress: Progress) => void;

/** Ends of which more than one string in so many is alive are crowded. */
const CROWDED_SHARE = 64;

/** Rows of more classes than this wait for the elimination of the core. */
const MAX_CLASSES = 12;

/** The strings of range ≤ `range` that are not known to be zero after the sweeps, packed, in rising order. */
export function aliveStrings(
  h: Hamiltonian,
  range: number,
  field: Field,
  onProgress: OnProgress = () => {},
  store?: SnapshotStore,
): Float64Array {
  const n = h.chain.cell;
  const r = h.range;
  if (n * range > MAX_SPINS)
    throw new LimitError(
      `search: range ${range} in cells of ${n} is ${n * range} spins; arrays hold candidates of up to ${MAX_SPINS}`,
    );
  const table = windowTable(h);
  const { bits, cellBits } = table;
  const coefficients = Float64Array.from(table.values, (v) => field.residue(v));
  const near = new Neighbourhood(table, range + r - 1);
  const bound = (cells: number) => 2 ** (cellBits * cells);
  const limit = bound(range);
  const cellMask = bound(1) - 1;
  const windowSize = 2 ** bits;
  // "Nothing in the first cell, X in the second" is no representative: its place is the zero root's.
  const zero = bound(1);
  const forest = new WeightedForest(limit - 1, zero, field);
  const link = forest.link;
  const ends = endParents(h, table);
  const candidates = limit - bound(range - 1);

  let layer = 0;
  let visited = 0;
  const total = [...Array(range + r - 1)].reduce((sum, _, i) => sum + bound(i + 1), 0);
  const report = () => onProgress({ stage: 'sweep', layer, done: visited / total, candidates });

  const classes = new Float64Array(MAX_CLASSES);
  const factors = new Float64Array(MAX_CLASSES);
  let count = 0;
  /** Adds a parent to the row being reduced; false when the row has grown too long. */
  const addParent = (parent: number, coefficient: number): boolean => {
    if (link[parent] === zero) return true;
    const root = forest.root(parent);
    if (root === zero) return true;
    const term = field.multiply(coefficient, forest.rootWeight);
    for (let i = 0; i < count; i++)
      if (classes[i] === root) {
        factors[i] = (factors[i]! + term) % field.p;
        return true;
      }
    if (count === MAX_CLASSES) return false;
    classes[count] = root;
    factors[count++] = term;
    return true;
  };
  const use = (): void => {
    let kept = 0;
    for (let i = 0; i < count; i++)
      if (factors[i] !== 0) {
        classes[kept] = classes[i]!;
        factors[kept++] = factors[i]!;
      }
    if (kept === 1) forest.setZero(classes[0]!);
    else if (kept === 2) forest.tie(classes[0]!, factors[0]!, classes[1]!, factors[1]!);
  };

  const gather = (output: number, m: number): void => {
    near.visit(output, m);
    count = 0;
    for (let i = 0; i < near.count; i++) {
      const parent = near.images[i]!;
      if (parent < limit && !addParent(parent, coefficients[table.backward[near.entries[i]!]!]!)) return;
    }
    use();
  };

  // Strings of each range that were alive when last looked at: a scan of the candidates happens once a range.
  const living: Float64Array[] = [];
  const livingOf = (cells: number): Float64Array => {
    const known = living[cells];
    const list = known === undefined ? scan(bound(cells - 1), bound(cells)) : known.filter(isAlive);
    living[cells] = list;
    return list;
  };
  const isAlive = (string: number): boolean =>
    link[string] === 0 || (link[string] !== zero && forest.root(string) !== zero);
  const scan = (begin: number, end: number): Float64Array => {
    let list = new Float64Array(1024);
    let length = 0;
    for (let string = begin; string < end; string++) {
      if (link[string] === zero || (string & cellMask) === 0 || !isAlive(string)) continue;
      if (length === list.length) {
        const longer = new Float64Array(2 * length);
        longer.set(list);
        list = longer;
      }
      list[length++] = string;
    }
    report();
    return list.slice(0, length);
  };

  /** Marks every output of range m that a living string of range ≥ `from` reaches; of range m itself, only strings that count. */
  const mark = (m: number, from: number, counts: (string: number) => boolean, hits: HitSet): void => {
    const low = bound(m - 1);
    const high = bound(m);
    for (let cells = from; cells <= Math.min(range, m + r - 1); cells++) {
      const strings = livingOf(cells);
      for (let at = 0; at < strings.length; at++) {
        if ((at & 0x3fff) === 0) report();
        if (cells === m && !counts(strings[at]!)) continue;
        near.visit(strings[at]!, cells);
        for (let i = 0; i < near.count; i++) {
          const output = near.images[i]!;
          if (output >= low && output < high) hits.add(output);
        }
      }
    }
  };

  /**
   * One block of growth rows: the outputs with a given last window, for every middle and a list of first windows. All strings in
   * play are an offset plus the middle times a unit, so the loops touch typed arrays only, in rising order of memory.
   */
  const killBlock = (block: Block, middles: number, hits: HitSet | undefined): void => {
    const { length, outputs, parents, units } = block;
    for (let middle = 0; middle < middles; middle++) {
      if ((middle & 0xffff) === 0) report();
      for (let i = 0; i < length; i++) {
        const parent = parents[i]! + Math.imul(middle, units[i]!);
        if (link[parent] === zero) continue;
        if (hits?.has(outputs[i]! + middle * windowSize)) continue;
        forest.setZero(parent);
      }
    }
  };

  const tieBlock = (
    block: Block,
    right: EndParent,
    rightUnit: number,
    middles: number,
    hits: HitSet | undefined,
  ): void => {
    const { length, outputs, windows, parents, units, factors: lefts } = block;
    const offset = right.image * rightUnit;
    const coefficient = coefficients[right.value]!;
    for (let middle = 0; middle < middles; middle++) {
      if ((middle & 0xffff) === 0) report();
      const fromRight = offset + Math.imul(middle, windowSize);
      for (let i = 0; i < length; i++) {
        const a = fromRight + windows[i]!;
        const b = parents[i]! + Math.imul(middle, units[i]!);
        const zeroA = link[a] === zero;
        if (zeroA && link[b] === zero) continue;
        if (hits?.has(outputs[i]! + middle * windowSize)) continue;
        if (zeroA) forest.setZero(b);
        else if (link[b] === zero) forest.setZero(a);
        else forest.tie(a, coefficient, b, lefts[i]!);
      }
    }
  };

  const reduceBlock = (
    lefts: readonly End[],
    rights: readonly EndParent[],
    top: number,
    rightUnit: number,
    middles: number,
    hits: HitSet | undefined,
  ): void => {
    for (let middle = 0; middle < middles; middle++) {
      if ((middle & 0xffff) === 0) report();
      const from = middle * windowSize;
      for (const left of lefts) {
        if (hits?.has(top + from + left.window)) continue;
        count = 0;
        let short = true;
        for (const q of rights)
          short &&= addParent(q.image * rightUnit + from + left.window, coefficients[q.value]!);
        for (const q of left.parents)
          short &&= addParent((q.image + from + top) / bound(q.lost), coefficients[q.value]!);
        if (short) use();
      }
    }
  };

  /**
   * Rows of the outputs of range m that are not hit and whose end cells are in `ready`: those of one parent (`single`), or of
   * several. Parents come from the two ends: by growth, or of range m with end cells in `crowded`.
   */
  const endRows = (
    m: number,
    hits: HitSet | undefined,
    ready: EndPairs,
    crowded: EndPairs,
    single: boolean,
  ): void => {
    const middles = bound(m - 2 * r);
    const rightUnit = bound(m - r);
    const lost = Math.max(1, m - range);
    for (const last of ends.last) {
      const top = last.window * rightUnit;
      const leftParents = (ls: readonly End[]): Block =>
        blockOf(ls, top, (l) => {
          const q = l.parents[0]!;
          return {
            parent: (q.image + top) / bound(q.lost),
            unit: windowSize / bound(q.lost),
            factor: coefficients[q.value]!,
          };
        });
      for (let cell = 1; cell <= cellMask; cell++) {
        if (!ready.has(cell, last.cell)) continue;
        const rights = last.parents.filter(
          (q) => q.lost >= lost || (q.lost === 0 && crowded.has(cell, q.cell)),
        );
        const lefts = ends.first.flatMap((end) =>
          end.cell !== cell
            ? []
            : [
                {
                  ...end,
                  parents: end.parents.filter(
                    (q) => q.lost >= lost || (q.lost === 0 && crowded.has(q.cell, last.cell)),
                  ),
                },
              ],
        );
        const leftsWith = (parents: number) => lefts.filter((l) => l.parents.length === parents);
        const right = rights[0];
        if (single) {
          if (right === undefined) killBlock(leftParents(leftsWith(1)), middles, hits);
          else if (rights.length === 1)
            killBlock(
              blockOf(leftsWith(0), top, (l) => ({
                parent: right.image * rightUnit + l.window,
                unit: windowSize,
                factor: 0,
              })),
              middles,
              hits,
            );
          continue;
        }
        if (rights.length === 1) tieBlock(leftParents(leftsWith(1)), right!, rightUnit, middles, hits);
        const longer = rights.length > 1 ? lefts : lefts.filter((l) => l.parents.length > 1);
        if (longer.length > 0) reduceBlock(longer, rights, top, rightUnit, middles, hits);
      }
    }
  };

  const gatherHits = (m: number, hits: HitSet, ready: EndPairs): void => {
    const lastUnit = bound(m - 1);
    for (let visit = 0, seen = 0; visit < 2; visit++)
      hits.forEach((output) => {
        if (!ready.has(output & cellMask, Math.floor(output / lastUnit))) return;
        gather(output, m);
        if ((++seen & 0x3fff) === 0) report();
      });
  };

  /**
   * A layer of outputs, in stages by their two end cells. While most strings of range m with some ends are alive, a mark for each
   * would cost more than it tells: outputs with such ends wait, and for the others those strings are parents that their end
   * windows give away, like growth. Each stage thins out the strings for the next.
   */
  const sweepLayer = (m: number): void => {
    const apart = m >= 2 * r;
    const all = EndPairs.all(cellMask + 1);
    const none = EndPairs.none(cellMask + 1);
    if (m > range || !apart) {
      const hits = apart && m === range + r - 1 ? undefined : new HitSet(bound(m));
      if (hits !== undefined) mark(m, apart ? m : Math.max(1, m - r + 1), () => true, hits);
      if (apart) for (const single of [true, false]) endRows(m, hits, all, none, single);
      if (hits !== undefined) gatherHits(m, hits, all);
      return;
    }
    const hits = new HitSet(bound(m));
    const lastUnit = bound(m - 1);
    const crowd = bound(m - 2) / CROWDED_SHARE;
    for (let pending = all; !pending.isEmpty(); ) {
      const counts = new EndCounts(cellMask + 1);
      for (const string of livingOf(m)) counts.add(string & cellMask, Math.floor(string / lastUnit));
      let crowded = counts.above(crowd);
      let ready = pending.without(crowded);
      if (ready.isEmpty()) {
        // Nothing thins out any more: every living string is marked, whatever it costs.
        ready = pending;
        crowded = none;
      }
      hits.clear();
      mark(m, m, (string) => !crowded.has(string & cellMask, Math.floor(string / lastUnit)), hits);
      for (const single of [true, false]) endRows(m, hits, ready, crowded, single);
      gatherHits(m, hits, ready);
      pending = pending.without(ready);
    }
  };

  const snapshot = (): Snapshot => ({
    layer,
    // A layer's outputs grow from strings up to r − 1 cells shorter; below that nothing has been touched.
    ranges: Array.from({ length: range }, (_, i) => i + 1)
      .filter((cells) => layer === 1 || cells > layer - r)
      .map((cells) => {
        const strings = livingOf(cells);
        const roots = strings.map((string) => forest.root(string));
        return { cells, strings, roots, weights: strings.map((string) => forest.weightToRoot(string)) };
      }),
  });
  const restore = (saved: Snapshot): void => {
    for (const { cells, strings, roots, weights } of saved.ranges) {
      for (let string = bound(cells - 1); string < bound(cells); string++)
        if ((string & cellMask) !== 0) link[string] = zero;
      for (const [i, string] of strings.entries()) forest.restore(string, roots[i]!, weights[i]!);
      living[cells] = strings;
    }
  };

  const saved = store?.load(field.p);
  if (saved !== undefined) restore(saved);
  for (layer = saved === undefined ? range + r - 1 : saved.layer - 1; layer >= 1; layer--) {
    sweepLayer(layer);
    visited += bound(layer);
    report();
    if (layer === 1 || layer >= 2 * r) store?.save(field.p, snapshot());
  }

  const alive = Array.from({ length: range }, (_, i) => livingOf(i + 1));
  const list = new Float64Array(alive.reduce((sum, strings) => sum + strings.length, 0));
  let at = 0;
  for (const strings of alive) {
    list.set(strings, at);
    at += strings.length;
  }
  return list;
}

/** Growth rows that differ in their first window only; entry i of each array belongs to one window. */
interface Block {
  readonly length: number;
  readonly windows: Int32Array;
  /** Outputs at middle 0; with longer interactions they pass 32 bits, parents never do. */
  readonly outputs: Float64Array;
  /** Parent at middle 0, and what it gains a middle. */
  readonly parents: Int32Array;
  readonly units: Int32Array;
  readonly factors: Float64Array;
}

function blockOf(
  lefts: readonly End[],
  top: number,
  of: (left: End) => { parent: number; unit: number; factor: number },
): Block {
  const rows = lefts.map(of);
  return {
    length: rows.length,
    windows: Int32Array.from(lefts, (l) => l.window),
    outputs: Float64Array.from(lefts, (l) => top + l.window),
    parents: Int32Array.from(rows, (row) => row.parent),
    units: Int32Array.from(rows, (row) => row.unit),
    factors: Float64Array.from(rows, (row) => row.factor),
  };
}
