/** One rotation of all spins, with rational entries: what it does to operators, and where the Z axis of free fermions may point. */
import { Operator } from '../algebra/operator.ts';
import {
  add,
  divide,
  multiply,
  negate,
  ONE,
  type Rational,
  rational,
  squareRoot,
  ZERO,
} from '../algebra/rational.ts';
import { firstSpin, letterAt, spanOf, type Word } from '../algebra/word.ts';

/** A proper rotation: entry [i][j] takes the axis j to its part along i; axes in the order X, Y, Z. */
export type Rotation = readonly (readonly Rational[])[];

type Vector = readonly Rational[];

/** Codes of the letters in the order X, Y, Z. */
const LETTER_CODES = [1n, 3n, 2n] as const;

/** The same rotation on every spin. Cost: 3^letters for every string. */
export function rotateOperator(operator: Operator, rotation: Rotation): Operator {
  const sum = new Map<Word, Rational>();
  for (const [word, coefficient] of operator.terms()) {
    let parts: [Word, Rational][] = [[0n, coefficient]];
    for (let s = firstSpin(word); s < spanOf(word); s++) {
      const letter = letterAt(word, s);
      if (letter === 0) continue;
      const j = LETTER_CODES.indexOf(BigInt(letter) as 1n | 2n | 3n);
      parts = parts.flatMap(([image, c]) =>
        LETTER_CODES.flatMap((code, i): [Word, Rational][] => {
          const entry = rotation[i]![j]!;
          return entry.numerator === 0n ? [] : [[image | (code << BigInt(2 * s)), multiply(c, entry)]];
        }),
      );
    }
    for (const [image, c] of parts) sum.set(image, add(sum.get(image) ?? ZERO, c));
  }
  return Operator.fromTerms([...sum].filter(([, c]) => c.numerator !== 0n));
}

export function inverseRotation(rotation: Rotation): Rotation {
  return [0, 1, 2].map((i) => [0, 1, 2].map((j) => rotation[j]![i]!));
}

/**
 * A rotation that takes the direction of a vector to Z, or null where its length is irrational.
 *
 * A Householder reflection takes it there, and turning X round makes it proper.
 */
export function rotationToZ(vector: Vector): Rotation | null {
  const length = squareRoot(dot(vector, vector));
  if (length === undefined || length.numerator === 0n) return null;
  const unit = vector.map((c) => divide(c, length));
  const normal = [unit[0]!, unit[1]!, add(unit[2]!, negate(ONE))];
  const size = dot(normal, normal);
  return [0, 1, 2].map((i) =>
    [0, 1, 2].map((j) => {
      const own = i === j ? ONE : ZERO;
      const reflected =
        size.numerator === 0n
          ? own
          : add(own, negate(divide(multiply(rational(2n), multiply(normal[i]!, normal[j]!)), size)));
      return i === 0 ? negate(reflected) : reflected;
    }),
  );
}

/**
 * Directions that Z must have if H is to be bilinear in Jordan–Wigner fermions after one rotation of all spins: that of a field, of the
 * letters inside a longer string, or the one at right angles to both sides of a bond. Necessary, not sufficient; the first that H tells.
 */
export function fermionAxes(density: Operator): Vector[] {
  const inside: Vector[] = [];
  const beside: Vector[] = [];
  const vectorAt = (word: Word, s: number): Vector =>
    LETTER_CODES.map((code) =>
      density.coefficient((word & ~(3n << BigInt(2 * s))) | (code << BigInt(2 * s))),
    );
  for (const word of density.numerators.keys()) {
    const [first, last] = [firstSpin(word), spanOf(word) - 1];
    if (first === last) inside.push(vectorAt(word, first));
    else if (last > first + 1) inside.push(vectorAt(word, first + 1));
    else beside.push(vectorAt(word, first), vectorAt(word, last));
  }
  if (inside.length > 0) return inside.slice(0, 1);
  const [a] = beside;
  if (a === undefined) return [];
  for (const b of beside) {
    const normal = cross(a, b);
    if (normal.some((c) => c.numerator !== 0n)) return [normal];
  }
  // One direction alone, as in an Ising chain: any at right angles to it will do.
  return [0, 1, 2].map((i) =>
    cross(
      a,
      [0, 1, 2].map((j) => (i === j ? ONE : ZERO)),
    ),
  );
}

function dot(a: Vector, b: Vector): Rational {
  return a.reduce((sum, c, i) => add(sum, multiply(c, b[i]!)), ZERO);
}

function cross(a: Vector, b: Vector): Vector {
  const part = (i: number, j: number) => add(multiply(a[i]!, b[j]!), negate(multiply(a[j]!, b[i]!)));
  return [part(1, 2), part(2, 0), part(0, 1)];
}
