import type { SubjectRequest } from '../../comparison/subject';
import type { Expr } from '../../expression/node';
import type { Expression } from '../../program/form';
import { Atoms } from './atoms';
import type { Scene } from './candidates/candidate';
import type { Model } from './model';
import type { SourceMap } from './sites';
import type { Evaluation } from './tagged';

/** Gathers what the makers of candidates see. */
export function makeScene(request: SubjectRequest, model: Model, map: SourceMap, source: string, functions: readonly Expr[]): Scene {
  const code = withoutComments(source, request);
  const atoms = new Atoms(request, model, map, source, code).gather(functions);
  const valuesOf = (e: Expression, evaluations: readonly Evaluation[]): readonly Float64Array[] | undefined => {
    const own = model.tagged.evaluations.get(map.byNode.get(e)!);
    if (own?.length === evaluations.length) {
      const values = own.map((x) => model.valueAt(x));
      return values.every((v) => v !== undefined) ? values : undefined;
    }
    // `x ?? 0`: what is declared is there.
    if (e.kind === 'logical' && e.op === 'coalesce') return valuesOf(e.left, evaluations);
    const literal = literalValue(e);
    return literal === undefined ? undefined : evaluations.map(() => new Float64Array(model.n).fill(literal));
  };
  return {
    model,
    program: request.program,
    source,
    code,
    atoms,
    siteOf: (e) => map.byNode.get(e),
    valuesOf,
    assignedBefore: (site, evaluations) => {
      const { start, end } = site.assignment!.target.span;
      const name = source.slice(start, end);
      const earlier = map.sites.filter(
        (s) =>
          s.owner === site.owner &&
          s.assignment?.value === s.node &&
          s.span.end < start &&
          source.slice(s.assignment.target.span.start, s.assignment.target.span.end) === name,
      );
      const last = earlier.at(-1);
      return last?.assignment?.op === undefined && last ? valuesOf(last.node, evaluations) : undefined;
    },
  };
}

function withoutComments(source: string, request: SubjectRequest): string {
  let code = source;
  for (const { span } of request.program.comments) code = code.slice(0, span.start) + ' '.repeat(span.end - span.start) + code.slice(span.end);
  return code;
}

function literalValue(e: Expression): number | undefined {
  if (e.kind === 'number') return e.value.toNumber();
  if (e.kind === 'unary' && e.op === '-' && e.operand.kind === 'number') return -e.operand.value.toNumber();
  return undefined;
}
