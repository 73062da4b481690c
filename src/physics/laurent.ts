/** Laurent polynomials in e^{iq} with Gaussian rational coefficients, and how they are written as sines and cosines. Exact. */
import {
  add,
  divide,
  multiply,
  ONE,
  type Rational,
  rational,
  textFromRational,
  ZERO,
} from '../algebra/rational.ts';

type Gaussian = readonly [re: Rational, im: Rational];

const MINUS: Rational = rational(-1n);

export class Laurent {
  static readonly zero = new Laurent(new Map());

  /** Coefficients that are not zero, by exponent. */
  private constructor(readonly coefficients: ReadonlyMap<number, Gaussian>) {}

  static of(entries: Iterable<readonly [exponent: number, re: Rational, im?: Rational]>): Laurent {
    const sum = new Map<number, Gaussian>();
    for (const [exponent, re, im = ZERO] of entries) {
      const [x, y] = sum.get(exponent) ?? [ZERO, ZERO];
      sum.set(exponent, [add(x, re), add(y, im)]);
    }
    for (const [exponent, [re, im]] of sum)
      if (re.numerator === 0n && im.numerator === 0n) sum.delete(exponent);
    return sum.size === 0 ? Laurent.zero : new Laurent(sum);
  }

  static constant(re: Rational, im: Rational = ZERO): Laurent {
    return Laurent.of([[0, re, im]]);
  }

  isZero(): boolean {
    return this.coefficients.size === 0;
  }

  /** The value where it does not depend on q and is real, else null. */
  asConstant(): Rational | null {
    if (this.isZero()) return ZERO;
    const own = this.coefficients.get(0);
    return this.coefficients.size === 1 && own !== undefined && own[1].numerator === 0n ? own[0] : null;
  }

  plus(other: Laurent): Laurent {
    return Laurent.of([...this.entries(), ...other.entries()]);
  }

  minus(other: Laurent): Laurent {
    return this.plus(other.scaled(MINUS));
  }

  times(other: Laurent): Laurent {
    const terms: [number, Rational, Rational][] = [];
    for (const [e, [a, b]] of this.coefficients)
      for (const [f, [c, d]] of other.coefficients)
        terms.push([
          e + f,
          add(multiply(a, c), multiply(MINUS, multiply(b, d))),
          add(multiply(a, d), multiply(b, c)),
        ]);
    return Laurent.of(terms);
  }

  /** Times a Gaussian rational. */
  scaled(re: Rational, im: Rational = ZERO): Laurent {
    return this.times(Laurent.constant(re, im));
  }

  /** The complex conjugate at real q. */
  conjugate(): Laurent {
    return Laurent.of([...this.entries()].map(([e, re, im]) => [-e, re, multiply(MINUS, im)] as const));
  }

  /** q → −q. */
  reversed(): Laurent {
    return Laurent.of([...this.entries()].map(([e, re, im]) => [-e, re, im] as const));
  }

  equals(other: Laurent): boolean {
    return this.minus(other).isZero();
  }

  /** The value at a real q, a float: approximate. */
  valueAt(q: number): [re: number, im: number] {
    let [x, y] = [0, 0];
    for (const [e, [re, im]] of this.coefficients) {
      const [a, b] = [float(re), float(im)];
      x += a * Math.cos(e * q) - b * Math.sin(e * q);
      y += a * Math.sin(e * q) + b * Math.cos(e * q);
    }
    return [x, y];
  }

  *entries(): Generator<[number, Rational, Rational]> {
    for (const [e, [re, im]] of this.coefficients) yield [e, re, im];
  }

  /** For example `2 cos(q) + i sin(2q)`; `latex` for mathematics in LaTeX. */
  toText(latex = false): string {
    const half = rational(1n, 2n);
    const conjugate = this.conjugate();
    const real = trigonometric(this.plus(conjugate).scaled(half), latex);
    const imaginary = trigonometric(this.minus(conjugate).scaled(ZERO, rational(-1n, 2n)), latex);
    if (imaginary === '0') return real;
    const wrapped = / [+-] /.test(imaginary) ? `i (${imaginary})` : times('i', imaginary);
    if (real === '0') return wrapped;
    return wrapped.startsWith('-') ? `${real} - ${wrapped.slice(1)}` : `${real} + ${wrapped}`;
  }
}

function times(letter: string, term: string): string {
  const negative = term.startsWith('-');
  const size = negative ? term.slice(1) : term;
  return `${negative ? '-' : ''}${size === '1' ? letter : `${letter} ${size}`}`;
}

/** A Laurent polynomial that is real at real q, in cosines and sines of multiples of q. */
function trigonometric(real: Laurent, latex: boolean): string {
  let text = '';
  const put = (c: Rational, name: string) => {
    if (c.numerator === 0n) return;
    const negative = c.numerator < 0n;
    const size = { ...c, numerator: negative ? -c.numerator : c.numerator };
    const one = size.numerator === 1n && size.denominator === 1n;
    const number =
      latex && size.denominator !== 1n
        ? `\\tfrac{${size.numerator}}{${size.denominator}}`
        : textFromRational(size);
    const term = name === '' ? number : one ? name : `${number}${latex ? '\\,' : ' '}${name}`;
    text += `${text === '' ? (negative ? '-' : '') : negative ? ' - ' : ' + '}${term}`;
  };
  const two = rational(2n);
  for (const e of [...real.coefficients.keys()].filter((k) => k >= 0).sort((a, b) => a - b)) {
    const [re, im] = real.coefficients.get(e)!;
    const argument = e === 1 ? 'q' : `${e}q`;
    if (e === 0) put(re, '');
    else {
      put(multiply(two, re), latex ? `\\cos ${argument}` : `cos(${argument})`);
      put(multiply(rational(-2n), im), latex ? `\\sin ${argument}` : `sin(${argument})`);
    }
  }
  return text === '' ? '0' : text;
}

function float({ numerator, denominator }: Rational): number {
  return Number(numerator) / Number(denominator);
}

export type LaurentMatrix = readonly (readonly Laurent[])[];

export function matrixProduct(a: LaurentMatrix, b: LaurentMatrix): Laurent[][] {
  return a.map((row) =>
    b[0]!.map((_, j) =>
      row.reduce((sum, x, k) => (x.isZero() ? sum : sum.plus(x.times(b[k]![j]!))), Laurent.zero),
    ),
  );
}

/** Coefficients of det(λ − M), lowest power of λ first, the last one 1. Faddeev and LeVerrier's recursion. */
export function characteristicPolynomial(m: LaurentMatrix): Laurent[] {
  const n = m.length;
  const coefficients: Laurent[] = Array.from({ length: n + 1 }, () => Laurent.zero);
  coefficients[n] = Laurent.constant(ONE);
  let power: Laurent[][] = m.map((row) => row.map(() => Laurent.zero));
  for (let k = 1; k <= n; k++) {
    const shifted = power.map((row, i) =>
      row.map((x, j) => (i === j ? x.plus(coefficients[n - k + 1]!) : x)),
    );
    power = matrixProduct(m, shifted);
    const trace = power.reduce((sum, row, i) => sum.plus(row[i]!), Laurent.zero);
    coefficients[n - k] = trace.scaled(divide(MINUS, rational(BigInt(k))));
  }
  return coefficients;
}
