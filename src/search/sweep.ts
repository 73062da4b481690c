/**
 * The exhaustive search's first stage: which candidates are zero in every charge, modulo p.
 *
 * State is one link and one weight a candidate of the sector (8 bytes); no equation is stored. Outputs
 * are visited by falling range m. In a layer, strings that are still alive and reach an output without growing mark it as hit
 * (few in most models); every other output has parents by growth at its two ends only, and those depend on its first and last
 * window alone (see `EndRows`). Hit outputs are gathered in full, twice.
 *
 * The order only decides how much is found; every step uses an equation of the system, so what it calls zero is zero.
 * Cost: a few nanoseconds an output for the swept part, plus some look-ups a term and cell for a hit one.
 */
import type { Field } from '../linear/field.ts';
import { WeightedForest } from '../linear/forest.ts';
import type { Hamiltonian } from '../model/hamiltonian.ts';
import { Addresses } from './addresses.ts';
import { EndCounts, EndPairs } from './end-pairs.ts';
import { EndRows } from './end-rows.ts';
import { HitSet } from './hit-set.ts';
import { Living } from './living.ts';
import { type Sector, sectorCandidates, ungraded } from './sectors.ts';
import { ShortRow } from './short-row.ts';
import { Neighbourhood, type WindowTable, windowTable } from './windows.ts';

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

/** Pairs of a first and a last window whose rows are prepared one by one. */
const MAX_WINDOW_PAIRS = 2 ** 25;

export interface SweepOptions {
  readonly onProgress?: OnProgress;
  readonly store?: SnapshotStore | undefined;
  /** Candidates to look at; all of them by default. */
  readonly sector?: Sector;
}

/** The strings of range ≤ `range` that are not known to be zero after the sweeps, packed, in rising order. */
export function aliveStrings(
  h: Hamiltonian,
  range: number,
  field: Field,
  options: SweepOptions = {},
): Float64Array {
  const { onProgress = () => {}, store, sector = ungraded(h) } = options;
  const sweep = new Sweep(h, range, field, sector, onProgress);
  const saved = store?.load(field.p);
  if (saved !== undefined) sweep.restore(saved);
  for (let layer = saved === undefined ? range + h.range - 1 : saved.layer - 1; layer >= 1; layer--) {
    sweep.layer(layer);
    if (layer === 1 || layer >= 2 * h.range) store?.save(field.p, sweep.snapshot(layer));
  }
  const alive = Array.from({ length: range }, (_, i) => sweep.living.of(i + 1));
  const list = new Float64Array(alive.reduce((sum, strings) => sum + strings.length, 0));
  let at = 0;
  for (const strings of alive) {
    list.set(strings, at);
    at += strings.length;
  }
  return list;
}

class Sweep {
  readonly living: Living;
  readonly #h: Hamiltonian;
  readonly #range: number;
  readonly #table: WindowTable;
  readonly #near: Neighbourhood;
  readonly #coefficients: Float64Array;
  readonly #addresses: Addresses;
  readonly #forest: WeightedForest;
  readonly #row: ShortRow;
  #ends: EndRows | undefined;
  readonly #report: () => void;
  #layer = 0;
  #visited = 0;

  constructor(h: Hamiltonian, range: number, field: Field, sector: Sector, onProgress: OnProgress) {
    const r = h.range;
    this.#h = h;
    this.#range = range;
    this.#table = windowTable(h);
    const { cellBits, values } = this.#table;
    this.#near = new Neighbourhood(this.#table, range + r - 1);
    this.#coefficients = Float64Array.from(values, (v) => field.residue(v));
    this.#addresses = new Addresses(sector, cellBits, range);
    this.#forest = new WeightedForest(this.#addresses.size, this.#addresses.size + 1, field);
    this.#row = new ShortRow(this.#forest);
    this.living = new Living(cellBits, this.#addresses, this.#forest);
    const candidates = sectorCandidates(sector, range);
    let total = 0;
    for (let cells = 1; cells < range + r; cells++) total += this.#bound(cells);
    this.#report = () =>
      onProgress({ stage: 'sweep', layer: this.#layer, done: this.#visited / total, candidates });
  }

  /**
   * A layer of outputs, in stages by their two end cells. While most strings of range m with some ends are alive, a mark for each
   * would cost more than it tells: outputs with such ends wait, and for the others those strings are parents that their end
   * windows give away, like growth. Each stage thins out the strings for the next.
   */
  layer(m: number): void {
    this.#layer = m;
    this.#stages(m);
    this.#visited += this.#bound(m);
    this.#report();
  }

  snapshot(layer: number): Snapshot {
    return {
      layer,
      // A layer's outputs grow from strings up to r − 1 cells shorter; below that nothing has been touched.
      ranges: Array.from({ length: this.#range }, (_, i) => i + 1)
        .filter((cells) => layer === 1 || cells > layer - this.#h.range)
        .map((cells) => {
          const strings = this.living.of(cells);
          const roots = strings.map((string) => this.#forest.root(this.#addresses.of(string)));
          const weights = strings.map((string) => this.#forest.weightToRoot(this.#addresses.of(string)));
          return { cells, strings, roots, weights };
        }),
    };
  }

  restore(saved: Snapshot): void {
    const { link, zero } = this.#forest;
    const cellMask = this.#bound(1) - 1;
    for (const { cells, strings, roots, weights } of saved.ranges) {
      this.#addresses.forEach(this.#bound(cells - 1), this.#bound(cells), (string, element) => {
        if ((string & cellMask) !== 0) link[element] = zero;
      });
      strings.forEach((string, i) => {
        this.#forest.restore(this.#addresses.of(string), roots[i]!, weights[i]!);
      });
      this.living.restore(cells, strings);
    }
    for (let cells = saved.layer; cells < this.#range + this.#h.range; cells++)
      this.#visited += this.#bound(cells);
  }

  /** Made when the first layer needs them: wide windows never do. */
  get #endRows(): EndRows {
    this.#ends ??= new EndRows(
      this.#h,
      this.#table,
      this.#range,
      this.#coefficients,
      this.#addresses,
      this.#forest,
      this.#report,
    );
    return this.#ends;
  }

  /** One past the largest packed string of so many cells. */
  #bound(cells: number): number {
    return 2 ** (this.#table.cellBits * cells);
  }

  #stages(m: number): void {
    const r = this.#h.range;
    const contents = this.#bound(1);
    const apart = m >= 2 * r;
    const windowPairs = 4 ** this.#table.bits;
    if (this.#bound(m) > HitSet.LARGEST || (apart && windowPairs > MAX_WINDOW_PAIRS)) {
      for (let visit = 0; visit < 2; visit++) this.#scatter(m);
      return;
    }
    const all = EndPairs.all(contents);
    const none = EndPairs.none(contents);
    if (m > this.#range || !apart) {
      const hits = apart && m === this.#range + r - 1 ? undefined : new HitSet(this.#bound(m));
      if (hits !== undefined) this.#mark(m, apart ? m : Math.max(1, m - r + 1), none, hits);
      if (apart) this.#endRows.sweep({ range: m, hits, ready: all, crowded: none });
      if (hits !== undefined) this.#gatherHits(m, hits, all);
      return;
    }
    const hits = new HitSet(this.#bound(m));
    const lastUnit = this.#bound(m - 1);
    const crowd = this.#bound(m - 2) / 2 ** this.#addresses.sector.grading.bits / CROWDED_SHARE;
    for (let pending = all; !pending.isEmpty(); ) {
      const counts = new EndCounts(contents);
      for (const string of this.living.of(m))
        counts.add(string & (contents - 1), Math.floor(string / lastUnit));
      let crowded = counts.above(crowd);
      let ready = pending.without(crowded);
      if (ready.isEmpty()) {
        // Nothing thins out any more: every living string is marked, whatever it costs.
        ready = pending;
        crowded = none;
      }
      hits.clear();
      this.#mark(m, m, crowded, hits);
      this.#endRows.sweep({ range: m, hits, ready, crowded });
      this.#gatherHits(m, hits, ready);
      pending = pending.without(ready);
    }
  }

  /** Marks every output of range m that a living string of range ≥ `from` reaches; of range m itself, only those not crowded. */
  #mark(m: number, from: number, crowded: EndPairs, hits: HitSet): void {
    const near = this.#near;
    const low = this.#bound(m - 1);
    const high = this.#bound(m);
    const cellMask = this.#bound(1) - 1;
    for (let cells = from; cells <= Math.min(this.#range, m + this.#h.range - 1); cells++) {
      const strings = this.living.of(cells);
      for (let at = 0; at < strings.length; at++) {
        if ((at & 0x3fff) === 0) this.#report();
        const string = strings[at]!;
        if (cells === m && crowded.has(string & cellMask, Math.floor(string / low))) continue;
        near.visit(string, cells);
        for (let i = 0; i < near.count; i++) {
          const output = near.images[i]!;
          if (output >= low && output < high) hits.add(output);
        }
      }
    }
  }

  /**
   * Outputs of range m that living strings reach, one string after the other, with no list of them: for long interactions in wide
   * cells, whose outputs outnumber the candidates by far. An output is gathered again for each string that is still alive then.
   */
  #scatter(m: number): void {
    const { link, zero } = this.#forest;
    const reach = this.#h.range - 1;
    const low = this.#bound(m - 1);
    const high = this.#bound(m);
    const outputs: number[] = [];
    for (let cells = Math.max(1, m - reach); cells <= Math.min(this.#range, m + reach); cells++) {
      const strings = this.living.of(cells);
      for (let at = 0; at < strings.length; at++) {
        if ((at & 0x3ff) === 0) this.#report();
        const element = this.#addresses.of(strings[at]!);
        if (link[element] === zero) continue;
        this.#near.visit(strings[at]!, cells);
        outputs.length = 0;
        for (let i = 0; i < this.#near.count; i++) {
          const output = this.#near.images[i]!;
          if (output >= low && output < high) outputs.push(output);
        }
        for (let i = 0; i < outputs.length && link[element] !== zero; i++) this.#gather(outputs[i]!, m);
      }
    }
  }

  #gatherHits(m: number, hits: HitSet, ready: EndPairs): void {
    const cellMask = this.#bound(1) - 1;
    const lastUnit = this.#bound(m - 1);
    for (let visit = 0, seen = 0; visit < 2; visit++)
      hits.forEach((output) => {
        if (!ready.has(output & cellMask, Math.floor(output / lastUnit))) return;
        this.#gather(output, m);
        if ((++seen & 0x3fff) === 0) this.#report();
      });
  }

  /** One equation in full. */
  #gather(output: number, m: number): void {
    const near = this.#near;
    const row = this.#row;
    const { backward } = this.#table;
    const limit = this.#bound(this.#range);
    near.visit(output, m);
    row.clear();
    for (let i = 0; i < near.count; i++) {
      const parent = near.images[i]!;
      if (parent >= limit) continue;
      if (!row.add(this.#addresses.of(parent), this.#coefficients[backward[near.entries[i]!]!]!)) return;
    }
    row.use();
  }
}
