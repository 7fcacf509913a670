import type { Fault } from './diagnose';

/** Every sentence of a diagnosis. Short, in the order what, why, what to do. */

/** What is wrong at a place, and what should stand there; completes "th'': ...". */
export function faultText(fault: Fault): string {
  const old = clip(fault.old);
  switch (fault.code) {
    case 'sign':
      return `\`${old}\` has the wrong sign: ${toDo(fault)}`;
    case 'factor':
      return /^[\d.]+$/.test(old) ? `the number is wrong: ${toDo(fault)}` : `\`${old}\` is off by a factor: ${toDo(fault)}`;
    case 'missing-term':
      return `a term is missing: ${toDo(fault)}`;
    case 'extra-term':
      return `the term \`${old}\` is one too many: ${toDo(fault)}`;
    case 'swapped-symbol':
      return `\`${old}\` stands where \`${clip(fault.new)}\` belongs`;
    case 'swapped-rows':
      return `\`${old}\` and \`${clip(fault.new)}\` are exchanged`;
    case 'wrong-function':
      return `the wrong function: ${toDo(fault)}`;
    case 'wrong-power':
      return `\`${old}\` has the wrong power: ${toDo(fault)}`;
    case 'wrong-operator':
      return `\`${old}\` has the wrong operator: ${toDo(fault)}`;
    case 'grouping':
      return `the brackets of \`${old}\` are wrong: ${toDo(fault)}`;
    default:
      return toDo(fault);
  }
}

/** The same where the term of the equation is already named. */
export function termAndFault(term: string, fault: Fault): string {
  return `${term}: ${toDo(fault)}`;
}

/** After the reason why a claim was not read: what makes it readable, and right. */
export function readableText(fault: Fault): string {
  return `With \`${clip(fault.new)}\` for \`${clip(fault.old)}\` every claim holds.`;
}

/** What to do, for the end of a sentence. */
function toDo(fault: Fault): string {
  const old = clip(fault.old);
  const better = clip(fault.new);
  switch (fault.code) {
    case 'missing-term':
      return `add \`${better}\``;
    case 'extra-term':
      return `take \`${old}\` out`;
    case 'swapped-rows':
      return `exchange \`${old}\` and \`${better}\``;
    default:
      return `write \`${better}\` for \`${old}\``;
  }
}

/** The title of a repair, as an editor offers it. */
export function repairTitle(faults: readonly Fault[]): string {
  if (faults.length > 1) return `Make ${faults.length} changes: ${faults.map(shortTitle).join('; ')}`;
  return shortTitle(faults[0]!);
}

function shortTitle(fault: Fault): string {
  const words = toDo(fault);
  return words[0]!.toUpperCase() + words.slice(1);
}

const LONGEST = 60;

/** Code as quoted in a sentence: one line, and not too long. */
function clip(code: string): string {
  const line = code.replace(/\s+/g, ' ').trim();
  return line.length <= LONGEST ? line : `${line.slice(0, LONGEST - 3)}...`;
}

export const NO_EXPLANATION = 'the code does not compute what the declared energies give';

export function declarationText(change: string): string {
  return `Or the declaration is wrong: every claim holds with ${change}.`;
}

export function derivedText(equation: string): string {
  return `The energies give ${equation}.`;
}
