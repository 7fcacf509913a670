import { panelRequest, type PanelData, type PanelParams, type Settings } from '@visviva/shared';
import { InlayHintKind, type CancellationToken, type CodeLens, type Connection, type Range } from 'vscode-languageserver';
import type { Service } from '../service/api';
import type { Budget } from '../text/budget';
import type { OpenFile, OpenFiles } from './open-files';
import { withPanelPictures } from './pictures';
import { fromPosition, toPosition, toRange } from './ranges';

export const visualCapabilities = { codeLensProvider: {}, inlayHintProvider: true };

interface VisualContext {
  readonly connection: Connection;
  readonly service: Service;
  readonly files: OpenFiles;
  readonly settings: () => Settings;
  /** True for an editor that has the panel and the commands behind the lenses. */
  readonly hasPanel: () => boolean;
  readonly budgetFor: (token: CancellationToken) => Budget;
  readonly guarded: <P extends unknown[], R>(what: string, fallback: R, handler: (...parameters: P) => R | Promise<R>) => (...parameters: P) => Promise<R>;
}

/** What is shown beside the code: lenses, equations at the ends of lines, the panel. */
export function registerVisualFeatures(context: VisualContext): void {
  const { connection, service, files, guarded, budgetFor } = context;
  /** The time that loading a parser takes is not the budget's. */
  const openOf = async (uri: string): Promise<OpenFile | undefined> => {
    const open = files.get(uri);
    if (!open || !context.settings().enable || !service.handles(open.file)) return undefined;
    await service.prepare(open.file);
    return open;
  };

  connection.onCodeLens(
    guarded('code lenses', null, async ({ textDocument }, token: CancellationToken): Promise<CodeLens[] | null> => {
      const open = await openOf(textDocument.uri);
      if (!open || !context.settings().codeLens) return null;
      const lenses = await service.lenses(open.file, budgetFor(token));
      return lenses.flatMap((lens) => {
        const range = toRange(lens.range);
        const place = [textDocument.uri, range.start];
        const verdict = { title: lens.verdict, command: context.hasPanel() ? 'visviva.show' : '', arguments: place };
        if (!context.hasPanel()) return [{ range, command: verdict }];
        return [
          { range, command: verdict },
          { range, command: { title: 'show', command: 'visviva.show', arguments: place } },
          { range, command: { title: 'derive', command: 'visviva.derive', arguments: place } },
        ];
      });
    }),
  );

  connection.languages.inlayHint.on(
    guarded('inlay hints', null, async ({ textDocument, range }, token: CancellationToken) => {
      const open = await openOf(textDocument.uri);
      if (!open || !context.settings().inlayEquations) return null;
      const inlays = await service.inlays(open.file, budgetFor(token));
      return inlays
        .filter((i) => within(i.position.line - 1, range))
        .map((i) => ({ position: toPosition(i.position), label: i.text, kind: InlayHintKind.Type, paddingLeft: true }));
    }),
  );

  connection.onRequest(
    panelRequest,
    guarded('the panel', null, async ({ textDocument, position }: PanelParams, token: CancellationToken): Promise<PanelData | null> => {
      const open = await openOf(textDocument.uri);
      if (!open) return null;
      const { version } = open.document;
      const data = await service.panel(open.file, fromPosition(position), budgetFor(token));
      return data ? withPanelPictures({ ...data, uri: textDocument.uri, version }) : null;
    }),
  );
}

function within(line: number, range: Range): boolean {
  return range.start.line <= line && line <= range.end.line;
}
