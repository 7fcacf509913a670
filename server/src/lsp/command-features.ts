import {
  checkFileRequest,
  deriveRequest,
  filesRequest,
  type CheckedFile,
  type DerivedText,
  type DeriveParams,
  type ReportClaim,
} from '@visviva/shared';
import type { CancellationToken, Connection } from 'vscode-languageserver';
import type { Clock } from '../host/clock';
import type { DeriveForm, Service } from '../service/api';
import type { Budget } from '../text/budget';
import type { Addresses } from './addresses';
import type { OpenFiles } from './open-files';
import { fromPosition } from './ranges';

interface CommandContext {
  readonly connection: Connection;
  readonly service: Service;
  readonly addresses: Addresses;
  readonly files: OpenFiles;
  readonly clock: Clock;
  readonly declaring: () => readonly string[];
  readonly budgetFor: (token: CancellationToken) => Budget;
  readonly guarded: <P extends unknown[], R>(what: string, fallback: R, handler: (...parameters: P) => R | Promise<R>) => (...parameters: P) => Promise<R>;
}

/** What the extension's own commands and its testing view ask for. */
export function registerCommandFeatures({ connection, service, addresses, files, clock, declaring, budgetFor, guarded }: CommandContext): void {
  connection.onRequest(
    deriveRequest,
    guarded('derived equations', null, async ({ textDocument, position, as }: DeriveParams, token: CancellationToken): Promise<DerivedText | null> => {
      const open = files.get(textDocument.uri);
      if (!open || !service.handles(open.file)) return null;
      const { version } = open.document;
      await service.prepare(open.file);
      const form: DeriveForm = as !== 'code' ? as : /\.py$/i.test(open.file) ? 'python' : /\.[mc]?tsx?$/i.test(open.file) ? 'typescript' : 'javascript';
      const systems = await service.derive(open.file, form, budgetFor(token));
      const at = fromPosition(position).line;
      const found = systems.findLast((s) => s.range.start.line <= at) ?? systems[0];
      if (!found) return null;
      // Below the function that the declaration is about.
      const symbols = await service.panel(open.file, { line: found.range.start.line, column: found.range.start.column + 1 }, budgetFor(token));
      return { system: found.system, text: found.text, version, line: (symbols?.endLine ?? found.range.end.line) - 1 };
    }),
  );

  connection.onRequest(
    filesRequest,
    guarded('the files that declare something', [] as string[], () => {
      const all = new Set([...declaring(), ...files.all().filter((o) => (o.result?.result.systems.length ?? 0) > 0).map((o) => o.file)]);
      return [...all].sort().map((file) => addresses.uriOf(file));
    }),
  );

  connection.onRequest(
    checkFileRequest,
    guarded('the check of a file', null, async ({ uri }: { readonly uri: string }, token: CancellationToken): Promise<CheckedFile | null> => {
      const file = addresses.fileOf(uri);
      if (!service.handles(file)) return null;
      await service.prepare(file);
      const start = clock();
      const { claims } = await service.check(file, budgetFor(token), 'verdicts');
      return { claims: claims.map(checkedClaim), milliseconds: clock() - start };
    }),
  );
}

function checkedClaim(c: ReportClaim): CheckedFile['claims'][number] {
  const { system, output, quantity, verdict } = c;
  const message = c.findings.map((f) => f.message).join('\n') || `${output} ${verdict === 'holds' ? 'equals' : 'differs from'} ${quantity}.`;
  return { system, function: c.function, output, quantity, verdict, line: c.line - 1, message };
}
