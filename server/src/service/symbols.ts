import { printFormula } from '../notation';
import type { Statement, SymbolItem } from '../notation/tree';
import type { Document } from '../workspace/documents';
import type { DocumentSymbol } from './api';
import { subjectName } from './check';

/** The outline of a document: its declarations, with symbols and claims below each. */
export function symbolsOf(document: Document): DocumentSymbol[] {
  const { lines } = document;
  return document.blocks.map(({ block, subject }) => ({
    name: block.name || '(no name)',
    detail: subjectName(subject),
    kind: 'system' as const,
    range: lines.range(block.span),
    nameRange: lines.range(block.nameSpan),
    children: block.statements.flatMap((s) => childrenOf(document, s)),
  }));
}

const KINDS = { coordinates: 'coordinate', parameters: 'parameter', inputs: 'input' } as const;

function childrenOf(document: Document, s: Statement): DocumentSymbol[] {
  const { lines } = document;
  switch (s.kind) {
    case 'coordinates':
    case 'parameters':
    case 'inputs':
      return s.items
        .filter((item) => item.name !== '')
        .map((item) => ({
          name: item.index ? `${item.name}[${item.index}]` : item.name,
          detail: itemDetail(item, s.remark),
          kind: KINDS[s.kind],
          range: lines.range(item.nameSpan),
          nameRange: lines.range(item.nameSpan),
          children: [],
        }));
    case 'checks':
      return s.items.map((claim) => ({
        name: printFormula(claim.left),
        detail: `${claim.op} ${printFormula(claim.right)}`,
        kind: 'claim' as const,
        range: lines.range(claim.span),
        nameRange: lines.range(claim.left.span),
        children: [],
      }));
    default:
      return [];
  }
}

function itemDetail(item: SymbolItem, remark: string | undefined): string {
  const unit = item.unit ? `[${item.unit.text}]` : '';
  return [unit, item.remark ?? remark ?? ''].filter((t) => t !== '').join(' ');
}
