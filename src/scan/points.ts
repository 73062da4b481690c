/** The points of a plan: exact values of its parameters, by number. */
import {
  add,
  divide,
  exact,
  multiply,
  type Rational,
  rational,
  textFromRational,
} from '../algebra/rational.ts';
import type { PointsPlan, ScanAxis } from './plan.ts';
import { distinctBelow, SeededRandom } from './random.ts';

/** All points of a plan in their order: on a grid the last parameter runs fastest, lists and samples keep their own order. */
export interface Points {
  readonly count: number;
  /** One exact value a parameter, as text in lowest terms. */
  at(point: number): readonly string[];
}

/** Cost: a step for every point of a sample, nothing for grids and lists. */
export function pointsIn({ parameters, points }: Pick<PointsPlan, 'parameters' | 'points'>): Points {
  if (points !== 'grid' && 'list' in points) {
    const { list } = points;
    return { count: list.length, at: (point) => list[point]! };
  }
  const axes = parameters.map(valuesOn);
  const size = axes.reduce((product, values) => product * BigInt(values.length), 1n);
  if (points === 'grid') return { count: Number(size), at: (point) => onGrid(axes, BigInt(point)) };
  const random = new SeededRandom(BigInt(points.seed));
  const drawn = [...distinctBelow(size, points.sample, random)];
  return { count: drawn.length, at: (point) => onGrid(axes, drawn[point]!) };
}

/** Parts of each point that are done apart. */
export function sectorsIn({ task }: Pick<PointsPlan, 'task'>): number {
  return task.kind === 'search' ? task.sectors : 1;
}

/** What a plan has to do, part by part: its points, or every sector of each, the number of the sector behind the values. */
export function partsIn(plan: PointsPlan): Points {
  const points = pointsIn(plan);
  const sectors = sectorsIn(plan);
  if (sectors === 1) return points;
  return {
    count: points.count * sectors,
    at: (part) => [...points.at(Math.floor(part / sectors)), String((part % sectors) + 1)],
  };
}

/** The number of points that the axes span, which may be far above what can be listed. */
export function gridSize(axes: readonly ScanAxis[]): bigint {
  return axes.reduce(
    (product, axis) => product * BigInt('steps' in axis ? axis.steps + 1 : valuesOn(axis).length),
    1n,
  );
}

/** The values of an axis; none where the plan lists its points. */
export function valuesOn(axis: ScanAxis): readonly string[] {
  if ('values' in axis) return axis.values;
  if (!('steps' in axis)) return [];
  const [from, to] = [exact(axis.from), exact(axis.to)];
  const step: Rational = divide(add(to, multiply(from, rational(-1n))), rational(BigInt(axis.steps)));
  return Array.from({ length: axis.steps + 1 }, (_, i) =>
    textFromRational(add(from, multiply(step, rational(BigInt(i))))),
  );
}

function onGrid(axes: readonly (readonly string[])[], point: bigint): string[] {
  const values: string[] = [];
  let rest = point;
  for (let i = axes.length - 1; i >= 0; i--) {
    const size = BigInt(axes[i]!.length);
    values.unshift(axes[i]![Number(rest % size)]!);
    rest /= size;
  }
  return values;
}
