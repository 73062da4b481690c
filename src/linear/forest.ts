/**
 * Weighted union-find over GF(p): equations of one or two terms, solved in near-linear time.
 *
 * Every element equals a factor times the root of its tree; a root is a free unknown, or the zero root. Equations
 * `x_a = 0` and `x_a = c·x_b` are unions. A union that closes a cycle with a product of factors other than 1 sends the whole
 * tree to zero. Method: union-find with weighted edges, common practice, no source. Memory: 10 bytes an element.
 */
import type { Field } from './field.ts';

export class WeightedForest {
  /** The parent plus one; 0 marks a root. */
  readonly #link: Uint32Array;
  /** x_element = weight · x_parent. Meaningless at a root. */
  readonly #weight: Uint32Array;
  readonly #dead: Uint8Array;
  readonly #rank: Uint8Array;
  readonly #path: number[] = [];

  constructor(
    readonly size: number,
    readonly field: Field,
  ) {
    this.#link = new Uint32Array(size);
    this.#weight = new Uint32Array(size);
    this.#dead = new Uint8Array(size);
    this.#rank = new Uint8Array(size);
  }

  /** The root of an element's tree. Afterwards `weight(element)` is its factor to the root. */
  root(element: number): number {
    const link = this.#link;
    const weight = this.#weight;
    const path = this.#path;
    let length = 0;
    let root = element;
    for (let next = link[root]!; next !== 0; next = link[root]!) {
      path[length++] = root;
      root = next - 1;
    }
    // Compress from the root down; the element next to it hangs right already.
    for (let i = length - 2; i >= 0; i--) {
      const e = path[i]!;
      weight[e] = this.field.multiply(weight[e]!, weight[path[i + 1]!]!);
      link[e] = root + 1;
    }
    return root;
  }

  /** The factor of an element to its root; call `root` first. */
  weight(element: number): number {
    return this.#link[element] === 0 ? 1 : this.#weight[element]!;
  }

  isZero(element: number): boolean {
    return this.#dead[this.root(element)] === 1;
  }

  /** x_element = 0. */
  setZero(element: number): void {
    this.#dead[this.root(element)] = 1;
  }

  /** x_a = factor · x_b, factor ≠ 0. Returns whether anything new was learnt. */
  tie(a: number, factor: number, b: number): boolean {
    const { multiply, inverse } = this.field;
    const ra = this.root(a);
    const rb = this.root(b);
    const dead = this.#dead;
    if (ra === rb) {
      if (dead[ra] === 1 || this.weight(a) === multiply(factor, this.weight(b))) return false;
      dead[ra] = 1;
      return true;
    }
    if (dead[ra] === 1 && dead[rb] === 1) return false;
    // x_ra = factor · w_b / w_a · x_rb
    const ratio = multiply(multiply(factor, this.weight(b)), inverse(this.weight(a)));
    if (this.#rank[ra]! > this.#rank[rb]!) this.#hang(rb, inverse(ratio), ra);
    else this.#hang(ra, ratio, rb);
    return true;
  }

  #hang(child: number, factor: number, root: number): void {
    this.#link[child] = root + 1;
    this.#weight[child] = factor;
    this.#dead[root]! |= this.#dead[child]!;
    if (this.#rank[child] === this.#rank[root]) this.#rank[root]!++;
  }
}
