import {
  SymbolKind,
  type DocumentSymbol as ProtocolSymbol,
  type SymbolInformation,
} from 'vscode-languageserver';
import type { DocumentSymbol } from '../service/api';
import { toRange } from './ranges';

const kindOf: Readonly<Record<DocumentSymbol['kind'], SymbolKind>> = {
  system: SymbolKind.Namespace,
  coordinate: SymbolKind.Variable,
  parameter: SymbolKind.Constant,
  input: SymbolKind.Event,
  claim: SymbolKind.Property,
  function: SymbolKind.Function,
};

export function toSymbols(symbols: readonly DocumentSymbol[]): ProtocolSymbol[] {
  return symbols.map((symbol) => ({
    name: symbol.name || '(unnamed)', // the protocol forbids empty names
    detail: symbol.detail,
    kind: kindOf[symbol.kind],
    range: toRange(symbol.range),
    selectionRange: toRange(symbol.nameRange),
    children: toSymbols(symbol.children),
  }));
}

/** For editors that do not know nested symbols. */
export function toFlatSymbols(symbols: readonly DocumentSymbol[], uri: string, within?: string): SymbolInformation[] {
  return symbols.flatMap((symbol) => [
    {
      name: symbol.name || '(unnamed)',
      kind: kindOf[symbol.kind],
      location: { uri, range: toRange(symbol.range) },
      containerName: within,
    },
    ...toFlatSymbols(symbol.children, uri, symbol.name),
  ]);
}
