/** Does a certificate prove what was recorded for a point? The checker says that it is right, and this says that it is about the point. */
import { terms } from '../../certificate/document.ts';
import { checkNow } from '../../check/check.ts';
import { sha256 } from '../../check/sha256.ts';
import type { PointsPlan } from '../../scan/plan.ts';
import type { Outcome } from '../../scan/record.ts';
import { hamiltonianAt } from '../../scan/run.ts';

/** What an accepted certificate holds, as far as it is compared. */
interface Document {
  readonly kind: string;
  readonly model: { readonly cell: number; readonly terms: unknown };
  readonly claim: {
    readonly range?: number;
    readonly dimensions?: readonly number[];
    readonly atMost?: number;
  };
  readonly charges: readonly { readonly range: number; readonly terms: unknown }[];
}

/** Null when the certificate is accepted and proves the outcome; else the reason. */
export function faultOfCertificate(
  plan: PointsPlan,
  values: readonly string[],
  outcome: Outcome,
  text: string,
): string | null {
  if (outcome.status !== 'done' || outcome.certificate === undefined || !('id' in outcome.certificate))
    return 'none was recorded for the point';
  if (`sha256:${sha256(text)}` !== outcome.certificate.id) return 'not the text that was recorded';
  const verdict = checkNow(text);
  if (verdict.status !== 'accepted') return `${verdict.status}: ${verdict.reason}`;
  const { kind, model, claim, charges } = JSON.parse(text) as Document;
  const h = hamiltonianAt(plan, values);
  if (
    model.cell !== h.chain.cell ||
    JSON.stringify(model.terms) !== JSON.stringify(terms(h.chain, h.density))
  )
    return 'about another Hamiltonian';
  const { answer } = outcome;
  if (answer.kind === 'search') {
    if (kind !== 'exhaustive' || JSON.stringify(claim.dimensions) !== JSON.stringify(answer.dimensionByRange))
      return 'proves other numbers of charges than were recorded';
    const recorded = answer.charges?.map(({ range, terms: list }) => ({ range, terms: list }));
    return recorded === undefined || JSON.stringify(recorded) === JSON.stringify(charges)
      ? null
      : 'proves other charges than were recorded';
  }
  if (answer.kind === 'decide' && ['every-range', 'every-range-modular', 'half-steps'].includes(kind)) {
    const most =
      answer.bound && Math.max(answer.bound.generic, ...answer.bound.exceptional.map(([, atMost]) => atMost));
    return claim.atMost === most ? null : 'proves another bound than was recorded';
  }
  return 'of another kind than the task';
}
