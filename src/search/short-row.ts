/** One equation in terms of the roots of a forest: kept while it has few of them. */
import type { WeightedForest } from '../linear/forest.ts';

/** Rows of more roots than this wait for the elimination of the core. */
const MAX_ROOTS = 12;

export class ShortRow {
  readonly #roots = new Float64Array(MAX_ROOTS);
  readonly #factors = new Float64Array(MAX_ROOTS);
  #length = 0;

  constructor(readonly forest: WeightedForest) {}

  clear(): void {
    this.#length = 0;
  }

  /** Adds coefficient · x_element; false when the row has grown too long. */
  add(element: number, coefficient: number): boolean {
    const { forest } = this;
    const { zero, field } = forest;
    if (forest.link[element] === zero) return true;
    const root = forest.root(element);
    if (root === zero) return true;
    const term = field.multiply(coefficient, forest.rootWeight);
    for (let i = 0; i < this.#length; i++)
      if (this.#roots[i] === root) {
        this.#factors[i] = (this.#factors[i]! + term) % field.p;
        return true;
      }
    if (this.#length === MAX_ROOTS) return false;
    this.#roots[this.#length] = root;
    this.#factors[this.#length++] = term;
    return true;
  }

  /** Uses the equation when one or two roots are left in it. */
  use(): void {
    let kept = 0;
    for (let i = 0; i < this.#length; i++)
      if (this.#factors[i] !== 0) {
        this.#roots[kept] = this.#roots[i]!;
        this.#factors[kept++] = this.#factors[i]!;
      }
    if (kept === 1) this.forest.setZero(this.#roots[0]!);
    else if (kept === 2)
      this.forest.tie(this.#roots[0]!, this.#factors[0]!, this.#roots[1]!, this.#factors[1]!);
  }
}
