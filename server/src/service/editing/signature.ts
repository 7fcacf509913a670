import { STATEMENT_WORDS } from '../../notation';
import type { Document } from '../../workspace/documents';
import type { Signature } from '../api';
import { writingPlace } from './context';
import { FUNCTION_HELP } from './functions';

/** What the function or statement at a place takes, and which part the cursor is in. */
export function signatureAt(document: Document, offset: number): Signature | undefined {
  const place = writingPlace(document, offset);
  if (!place?.placed || place.word === undefined) return undefined;
  const call = openCall(place.statement);
  const help = call && FUNCTION_HELP.find((f) => f.name === call.name);
  if (help) {
    return {
      label: `${help.name}(${help.parameters.join(', ')})`,
      description: help.description,
      parameters: help.parameters,
      active: Math.min(call.argument, help.parameters.length - 1),
    };
  }
  const word = STATEMENT_WORDS.find((w) => w.word === place.word);
  if (!word) return undefined;
  const label = word.snippet.replace(/\$\{\d+:?([^}]*)\}/g, (_, name: string) => name || '...');
  return { label, description: word.description, parameters: [], active: 0 };
}

/** The innermost call that is still open. */
function openCall(text: string): { readonly name: string; readonly argument: number } | undefined {
  const open: { name: string; argument: number }[] = [];
  for (let i = 0; i < text.length; i++) {
    const c = text[i]!;
    if (c === '(' || c === '[') open.push({ name: c === '(' ? (/[\p{L}\d]+$/u.exec(text.slice(0, i))?.[0] ?? '') : '', argument: 0 });
    else if (c === ')' || c === ']') open.pop();
    else if (c === ',' && open.length > 0) open.at(-1)!.argument++;
  }
  return open.findLast((o) => o.name !== '');
}
