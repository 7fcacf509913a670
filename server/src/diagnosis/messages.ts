import type { FindingCode } from '@visviva/shared';
import type { Fault } from './diagnose';

/** Every sentence of a diagnosis. Short, in the order what, why, what to do. */

/** What is wrong at a place, and what should stand there; completes "th'': ...". */
export function faultText(fault: Fault): string {
  const { old, new: better } = fault;
  switch (fault.code) {
    case 'sign':
      return `\`${clip(old)}\` has the wrong sign: write \`${clip(better)}\``;
    case 'factor':
      return `\`${clip(old)}\` is off by a factor: write \`${clip(better)}\``;
    case 'missing-term':
      return `the term \`${clip(better)}\` is missing here`;
    case 'extra-term':
      return `the term \`${clip(old)}\` is one too many`;
    case 'swapped-symbol':
      return `\`${clip(old)}\` stands where \`${clip(better)}\` belongs`;
    case 'swapped-rows':
      return `\`${clip(old)}\` and \`${clip(better)}\` are exchanged`;
    case 'wrong-function':
      return `\`${clip(old)}\` should be \`${clip(better)}\``;
    case 'wrong-power':
      return `\`${clip(old)}\` has the wrong power: write \`${clip(better)}\``;
    case 'wrong-operator':
      return `the operator of \`${clip(old)}\` is wrong: write \`${clip(better)}\``;
    case 'grouping':
      return `the brackets of \`${clip(old)}\` are wrong: write \`${clip(better)}\``;
    default:
      return `write \`${clip(better)}\` for \`${clip(old)}\``;
  }
}

/** The title of a repair, as an editor offers it. */
export function repairTitle(faults: readonly Fault[]): string {
  if (faults.length > 1) return `Make ${faults.length} changes: ${faults.map(shortTitle).join('; ')}`;
  return shortTitle(faults[0]!);
}

function shortTitle(fault: Fault): string {
  const titles: Partial<Record<FindingCode, string>> = {
    'missing-term': `Add \`${clip(fault.new)}\``,
    'extra-term': `Take \`${clip(fault.old)}\` out`,
    'swapped-rows': `Exchange \`${clip(fault.old)}\` and \`${clip(fault.new)}\``,
  };
  return titles[fault.code] ?? `Write \`${clip(fault.new)}\` for \`${clip(fault.old)}\``;
}

const LONGEST = 60;

/** Code as quoted in a sentence: one line, and not too long. */
function clip(code: string): string {
  const line = code.replace(/\s+/g, ' ').trim();
  return line.length <= LONGEST ? line : `${line.slice(0, LONGEST - 3)}...`;
}
