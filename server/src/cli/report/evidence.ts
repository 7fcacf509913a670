import type { Evidence, ReportClaim } from '@visviva/shared';
import { formatNumber } from '../../text/number';
import { harmless } from './width';

/** What claims that hold rest on: a line per kind of evidence, which names its outputs where there are several kinds. */
export function evidenceLines(claims: readonly ReportClaim[]): string[] {
  const kinds = new Map<string, { readonly outputs: string[]; readonly evidence: Evidence[] }>();
  let held = 0;
  for (const { verdict, evidence, output } of claims) {
    if (verdict !== 'holds' || !evidence) continue;
    held++;
    const key = evidence.kind === 'identity' ? '' : `numeric ${evidence.inexact ?? ''}`;
    const kind = kinds.get(key) ?? { outputs: [], evidence: [] };
    kinds.set(key, kind);
    kind.outputs.push(output);
    kind.evidence.push(evidence);
  }
  const [...all] = kinds.values();
  return all.map(({ outputs, evidence }) => {
    const about = held === claims.length && all.length === 1 ? '' : `${outputs.map(harmless).join(', ')} `;
    return `${about}${outputs.length > 1 && about !== '' ? 'hold' : 'holds'}: ${evidenceText(evidence)}`;
  });
}

function evidenceText(all: readonly Evidence[]): string {
  if (all[0]!.kind === 'identity') return 'identity, failure chance below 1e-15';
  const states = Math.min(...all.map((e) => e.states));
  const worst = Math.max(...all.map((e) => e.worst));
  const { inexact } = all[0]!;
  const numbers = `${states} states, worst relative difference ${formatNumber(worst, 1)}`;
  return inexact === undefined ? numbers : `${numbers}; not proved exactly: ${harmless(inexact)}`;
}
