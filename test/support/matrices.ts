/** Explicit matrices on a few spins: the textbook definition of everything the packed strings claim. Exact, dense, slow. */
import type { Operator } from '../../src/algebra/operator.ts';
import { LETTERS, letterAt, type Word } from '../../src/algebra/word.ts';

/** Square complex matrix of integers, row by row: real and imaginary parts. */
export interface Matrix {
  readonly size: number;
  readonly re: bigint[];
  readonly im: bigint[];
}

const PAULI: Readonly<Record<string, Matrix>> = {
  I: matrix(2, [1, 0, 0, 1], [0, 0, 0, 0]),
  X: matrix(2, [0, 1, 1, 0], [0, 0, 0, 0]),
  Y: matrix(2, [0, 0, 0, 0], [0, -1, 1, 0]),
  Z: matrix(2, [1, 0, 0, -1], [0, 0, 0, 0]),
};

function matrix(size: number, re: number[], im: number[]): Matrix {
  return { size, re: re.map(BigInt), im: im.map(BigInt) };
}

export function zeroMatrix(size: number): Matrix {
  return { size, re: new Array(size * size).fill(0n), im: new Array(size * size).fill(0n) };
}

/** The Kronecker product. */
export function kronecker(a: Matrix, b: Matrix): Matrix {
  const result = zeroMatrix(a.size * b.size);
  for (let i = 0; i < a.size; i++)
    for (let j = 0; j < a.size; j++)
      for (let k = 0; k < b.size; k++)
        for (let l = 0; l < b.size; l++) {
          const [x, y] = [a.size * i + j, b.size * k + l];
          const at = (i * b.size + k) * result.size + j * b.size + l;
          result.re[at] = a.re[x]! * b.re[y]! - a.im[x]! * b.im[y]!;
          result.im[at] = a.re[x]! * b.im[y]! + a.im[x]! * b.re[y]!;
        }
  return result;
}

export function times(a: Matrix, b: Matrix): Matrix {
  const { size } = a;
  const result = zeroMatrix(size);
  for (let i = 0; i < size; i++)
    for (let k = 0; k < size; k++) {
      const [p, q] = [a.re[i * size + k]!, a.im[i * size + k]!];
      if (p === 0n && q === 0n) continue;
      for (let j = 0; j < size; j++) {
        const [r, s] = [b.re[k * size + j]!, b.im[k * size + j]!];
        result.re[i * size + j]! += p * r - q * s;
        result.im[i * size + j]! += p * s + q * r;
      }
    }
  return result;
}

/** a + (x + iy) b. */
export function plus(a: Matrix, b: Matrix, x = 1n, y = 0n): Matrix {
  return {
    size: a.size,
    re: a.re.map((v, i) => v + x * b.re[i]! - y * b.im[i]!),
    im: a.im.map((v, i) => v + x * b.im[i]! + y * b.re[i]!),
  };
}

/** (x + iy) a. */
export function scaled(a: Matrix, x: bigint, y = 0n): Matrix {
  return plus(zeroMatrix(a.size), a, x, y);
}

/** The matrix of a string on so many spins, spin 0 leftmost. */
export function matrixOfWord(word: Word, spins: number): Matrix {
  let result = matrix(1, [1], [0]);
  for (let spin = 0; spin < spins; spin++) result = kronecker(result, PAULI[LETTERS[letterAt(word, spin)]!]!);
  return result;
}

/** `denominator` times the matrix of an operator. */
export function matrixOfOperator(operator: Operator, spins: number): Matrix {
  let result = zeroMatrix(2 ** spins);
  for (const [word, value] of operator.numerators) result = plus(result, matrixOfWord(word, spins), value);
  return result;
}
