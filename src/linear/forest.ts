/**
 * Weighted union-find over GF(p): equations of one or two terms, solved in near-linear time.
 *
 * Every element equals a factor times the root of its tree; a root is a free unknown, or the zero root. A union that closes a
 * cycle with a product of factors other than 1 sends the whole tree to zero. Elements are numbered from 1, so that a fresh
 * array of links (0 = root) costs no initialisation. Method: union-find with weighted edges and path halving, common
 * practice, no source. Memory: 8 bytes an element.
 */
import type { Field } from './field.ts';

export class WeightedForest {
  /** Parent of each element; 0 for a root. Read by callers that scan for what is settled; written here only. */
  readonly link: Uint32Array;
  /** x_element = weight · x_parent; meaningless at roots and below the zero root. */
  readonly #weight: Uint32Array;
  /** The factor of the element last given to `root`, to its root. */
  rootWeight = 1;
  /** Number of equations that told something new: the rank they prove. */
  uses = 0;

  /**
   * @param size elements are 1 … size
   * @param zero the element that stands for zero; it must not be used as an unknown
   */
  constructor(
    size: number,
    readonly zero: number,
    readonly field: Field,
  ) {
    this.link = new Uint32Array(Math.max(size, zero) + 1);
    this.#weight = new Uint32Array(size + 1);
  }

  /** The root of an element's tree; its factor is left in `rootWeight`. */
  root(element: number): number {
    const link = this.link;
    const weight = this.#weight;
    const zero = this.zero;
    const p = this.field.p;
    let factor = 1;
    let e = element;
    for (;;) {
      const parent = link[e]!;
      if (parent === 0) break;
      if (parent === zero) return zero;
      const grandparent = link[parent]!;
      if (grandparent === zero) {
        link[e] = zero;
        return zero;
      }
      let w = weight[e]!;
      if (grandparent === 0) e = parent;
      else {
        const t = w * weight[parent]!;
        w = t - Math.floor(t / p) * p;
        weight[e] = w;
        link[e] = grandparent;
        e = grandparent;
      }
      const t = factor * w;
      factor = t - Math.floor(t / p) * p;
    }
    this.rootWeight = factor;
    return e;
  }

  /** The factor of a living element to its root. */
  weightToRoot(element: number): number {
    this.root(element);
    return this.rootWeight;
  }

  /** Hangs a fresh element below its root, as it was in another forest; a root below itself. */
  restore(element: number, root: number, weight: number): void {
    this.link[element] = element === root ? 0 : root;
    this.#weight[element] = weight;
  }

  isZero(element: number): boolean {
    return this.root(element) === this.zero;
  }

  /** x_element = 0. */
  setZero(element: number): void {
    const root = this.link[element] === 0 ? element : this.root(element);
    if (root === this.zero) return;
    this.link[root] = this.zero;
    this.uses++;
  }

  /** f·x_a + g·x_b = 0 with f, g ≠ 0. */
  tie(a: number, f: number, b: number, g: number): void {
    const { zero, link } = this;
    if (link[a] === zero && link[b] === zero) return;
    const { p, multiply, inverse } = this.field;
    const ra = this.root(a);
    const wa = this.rootWeight;
    const rb = this.root(b);
    const wb = this.rootWeight;
    if (ra === zero || rb === zero) {
      this.setZero(ra === zero ? rb : ra);
      return;
    }
    const u = multiply(f, wa);
    const v = multiply(g, wb);
    if (ra === rb) {
      if ((u + v) % p !== 0) this.setZero(ra);
      return;
    }
    // The larger number hangs below the smaller: packed strings of one growth chain then stay in shallow trees.
    if (ra > rb) {
      link[ra] = rb;
      this.#weight[ra] = multiply(p - v, inverse(u));
    } else {
      link[rb] = ra;
      this.#weight[rb] = multiply(p - u, inverse(v));
    }
    this.uses++;
  }
}
