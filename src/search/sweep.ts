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
import { HitSet } from './hit-set.ts';
import { type EndParent, growthAtEnds, Neighbourhood, windowTable } from './windows.ts';

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

/** Called every few milliseconds to tenths of a second; whatever it throws stops the search. */
export type OnProgress = (progress: Progress) => void;

/** Rows of more classes than this wait for the elimination of the core. */
const MAX_CLASSES = 12;

/** The strings of range ≤ `range` that are not known to be zero after the sweeps, packed, in rising order. */
export function aliveStrings(
  h: Hamiltonian,
  range: number,
  field: Field,
  onProgress: OnProgress = () => {},
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
  // "Nothing in the first cell, X in the second" is no representative: its place is the zero root's.
  const zero = bound(1);
  const forest = new WeightedForest(limit - 1, zero, field);
  const link = forest.link;
  const ends = growthAtEnds(h, table);
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

  const mark = (m: number, from: number, hits: HitSet): void => {
    const low = bound(m - 1);
    const high = bound(m);
    for (let cells = from; cells <= Math.min(range, m + r - 1); cells++)
      for (let string = bound(cells - 1); string < bound(cells); string++) {
        if ((string & 0x3ffff) === 0) report();
        if (link[string] === zero || (string & cellMask) === 0) continue;
        if (link[string] !== 0 && forest.root(string) === zero) continue;
        near.visit(string, cells);
        for (let i = 0; i < near.count; i++) {
          const output = near.images[i]!;
          if (output >= low && output < high) hits.add(output);
        }
      }
  };

  /** Rows of one parent (`single`), or of several, over the outputs of range m that are not hit. */
  const growth = (m: number, hits: HitSet | undefined, single: boolean): void => {
    const middles = bound(m - 2 * r);
    const rightUnit = bound(m - r);
    const windowSize = 2 ** bits;
    const lost = Math.max(1, m - range);
    const shrinking = (parents: readonly EndParent[]) => parents.filter((q) => q.lost >= lost);
    const lefts = ends.first.map((end) => ({ window: end.window, parents: shrinking(end.parents) }));
    const leftOf = (parents: number) => lefts.filter((l) => l.parents.length === parents);
    const none = leftOf(0);
    const one = leftOf(1);
    for (const last of ends.last) {
      const rights = shrinking(last.parents);
      const top = last.window * rightUnit;
      const killed = single ? (rights.length === 1 ? none : rights.length === 0 ? one : []) : [];
      const tied = !single && rights.length === 1 ? one : [];
      const rest = single
        ? []
        : lefts.filter(
            (l) => l.parents.length + rights.length > 1 && !(rights.length === 1 && l.parents.length === 1),
          );
      if (killed.length + tied.length + rest.length === 0) continue;
      // A parent is at offset + middle·unit: lists of numbers keep the loops over the middle free of objects.
      const leftOffset = (q: EndParent) => Math.floor(q.image / bound(q.lost)) + top / bound(q.lost);
      const right = rights[0];
      const rightOffset = right === undefined ? 0 : right.image * rightUnit;
      const rightCoefficient = right === undefined ? 0 : coefficients[right.value]!;
      const offsets = killed.map((l) =>
        right === undefined ? leftOffset(l.parents[0]!) : rightOffset + l.window,
      );
      const units = killed.map((l) =>
        right === undefined ? windowSize / bound(l.parents[0]!.lost) : windowSize,
      );
      const windows = killed.map((l) => l.window);
      const tieWindows = tied.map((l) => l.window);
      const tieOffsets = tied.map((l) => leftOffset(l.parents[0]!));
      const tieUnits = tied.map((l) => windowSize / bound(l.parents[0]!.lost));
      const tieCoefficients = tied.map((l) => coefficients[l.parents[0]!.value]!);
      for (let middle = 0; middle < middles; middle++) {
        if ((middle & 0xffff) === 0) report();
        for (let i = 0; i < offsets.length; i++) {
          const parent = offsets[i]! + middle * units[i]!;
          if (link[parent] === zero) continue;
          if (hits?.has(top + middle * windowSize + windows[i]!)) continue;
          forest.setZero(parent);
        }
        const fromRight = rightOffset + middle * windowSize;
        for (let i = 0; i < tieOffsets.length; i++) {
          const a = fromRight + tieWindows[i]!;
          const b = tieOffsets[i]! + middle * tieUnits[i]!;
          if (link[a] === zero && link[b] === zero) continue;
          if (hits?.has(top + middle * windowSize + tieWindows[i]!)) continue;
          forest.tie(a, rightCoefficient, b, tieCoefficients[i]!);
        }
        for (const l of rest) {
          if (hits?.has(top + middle * windowSize + l.window)) continue;
          count = 0;
          let short = true;
          for (const q of rights)
            short &&= addParent(q.image * rightUnit + middle * windowSize + l.window, coefficients[q.value]!);
          for (const q of l.parents)
            short &&= addParent(
              leftOffset(q) + (middle * windowSize) / bound(q.lost),
              coefficients[q.value]!,
            );
          if (short) use();
        }
      }
    }
  };

  for (layer = range + r - 1; layer >= 1; layer--) {
    const apart = layer >= 2 * r;
    const hits = apart && layer === range + r - 1 ? undefined : new HitSet(bound(layer));
    if (hits !== undefined) mark(layer, apart ? layer : Math.max(1, layer - r + 1), hits);
    if (apart) {
      growth(layer, hits, true);
      growth(layer, hits, false);
    }
    if (hits !== undefined)
      for (let visit = 0, seen = 0; visit < 2; visit++)
        hits.forEach((output) => {
          gather(output, layer);
          if ((++seen & 0x3fff) === 0) report();
        });
    visited += bound(layer);
    report();
  }

  let alive = 0;
  const isAlive = (string: number) =>
    (string & cellMask) !== 0 && link[string] !== zero && forest.root(string) !== zero;
  for (let string = 1; string < limit; string++) if (isAlive(string)) alive++;
  const list = new Float64Array(alive);
  for (let string = 1, at = 0; string < limit; string++) if (isAlive(string)) list[at++] = string;
  return list;
}
