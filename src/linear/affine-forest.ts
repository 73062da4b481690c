/**
 * Union-find in which every unknown is a factor times its root plus a combination of a few parameters.
 *
 * Equations between at most two roots, and any number of parameters, are solved in near-linear time. A root that keeps many
 * equations from this form is promoted to a parameter: the heavy columns of structured Gaussian elimination ("Solving large
 * sparse linear systems over finite fields", CRYPTO '90). In a search these are the top parts of charges, a few a range.
 */
import type { Field } from './field.ts';

/** The parameters of a root that stands for zero, and of an unknown that needs none. */
const NO_PARAMETERS: readonly number[] = [];

export class AffineForest {
  /** Parent, −1 for a root, ZERO below the root that is zero. */
  readonly #link: Int32Array;
  readonly #weight: Float64Array;
  /** Coefficients of the parameters, entry j for parameter j; may be shorter than their number. */
  readonly #offset: (readonly number[])[];
  readonly #path: number[] = [];
  parameters = 0;

  // The relation of the element last looked up: x = weight · x_root + offset · t, root −1 for none.
  root = -1;
  weight = 0;
  offset: readonly number[] = NO_PARAMETERS;

  constructor(
    readonly size: number,
    readonly field: Field,
  ) {
    this.#link = new Int32Array(size).fill(ROOT);
    this.#weight = new Float64Array(size);
    this.#offset = new Array<readonly number[]>(size).fill(NO_PARAMETERS);
  }

  /** Looks an element up: `root`, `weight` and `offset` describe it afterwards. */
  find(element: number): void {
    const link = this.#link;
    const weight = this.#weight;
    const path = this.#path;
    let length = 0;
    let e = element;
    while (link[e]! >= 0) {
      path[length++] = e;
      e = link[e]!;
    }
    // Compress from the root down.
    for (let i = length - 2; i >= 0; i--) {
      const child = path[i]!;
      const parent = path[i + 1]!;
      this.#offset[child] = this.#sum(this.#offset[child]!, weight[child]!, this.#offset[parent]!);
      weight[child] = this.field.multiply(weight[child]!, weight[parent]!);
      link[child] = e;
    }
    if (length === 0) {
      this.root = link[e] === ROOT ? e : -1;
      this.weight = 1;
      this.offset = this.#offset[e]!;
    } else {
      this.root = link[e] === ROOT ? e : -1;
      this.weight = weight[element]!;
      this.offset =
        link[e] === ROOT
          ? this.#offset[element]!
          : this.#sum(this.#offset[element]!, weight[element]!, this.#offset[e]!);
    }
  }

  isRoot(element: number): boolean {
    return this.#link[element] === ROOT;
  }

  /** f·x_a + offset·t = 0 for a root a. */
  settle(a: number, f: number, offset: readonly number[]): void {
    const factor = this.#negativeInverse(f);
    this.#link[a] = SETTLED;
    this.#offset[a] = this.#scaled(factor, offset);
  }

  /** f·x_a + g·x_b + offset·t = 0 for different roots a and b. */
  tie(a: number, f: number, b: number, g: number, offset: readonly number[]): void {
    const factor = this.#negativeInverse(f);
    this.#link[a] = b;
    this.#weight[a] = this.field.multiply(factor, g);
    this.#offset[a] = this.#scaled(factor, offset);
  }

  /** Turns a root into the next parameter. */
  promote(root: number): void {
    const offset = new Array<number>(this.parameters + 1).fill(0);
    offset[this.parameters++] = 1;
    this.#link[root] = SETTLED;
    this.#offset[root] = offset;
  }

  #negativeInverse(f: number): number {
    return this.field.p - this.field.inverse(f);
  }

  #scaled(factor: number, offset: readonly number[]): readonly number[] {
    return offset.every((v) => v === 0)
      ? NO_PARAMETERS
      : offset.map((v) => (v === 0 ? 0 : this.field.multiply(factor, v)));
  }

  #sum(a: readonly number[], factor: number, b: readonly number[]): readonly number[] {
    if (b.length === 0) return a;
    const { p, multiply } = this.field;
    const sum = a.slice();
    for (let i = 0; i < b.length; i++) sum[i] = ((sum[i] ?? 0) + multiply(factor, b[i]!)) % p;
    return sum;
  }
}

const ROOT = -1;
const SETTLED = -2;
