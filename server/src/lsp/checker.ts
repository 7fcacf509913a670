import { declarationMark, statusNotification, type FileCounts, type FileStatus, type Settings } from '@visviva/shared';
import { DiagnosticSeverity, type Connection, type Diagnostic } from 'vscode-languageserver';
import type { Clock } from '../host/clock';
import { sizeLimit } from '../host/text-file';
import type { FileResult, Service } from '../service/api';
import { remembered, withLastReading } from '../service/last-reading';
import { Budget } from '../text/budget';
import type { Addresses } from './addresses';
import { CheckQueue, type Run } from './check-queue';
import { toDiagnostics } from './diagnostics';
import { contentOf, lineOf, type OpenFile, type OpenFiles } from './open-files';

/** A check that ran out of time is repeated once, after a pause, with so many times the time. */
const patience = 3;
const pause = 500;
/** So long after a verdict the search for its fault begins. */
const searchDelay = 200;

export interface CheckerContext {
  readonly connection: Connection;
  readonly service: Service;
  readonly addresses: Addresses;
  readonly files: OpenFiles;
  readonly clock: Clock;
  /** Of the editor, with what the project of the file says. */
  readonly settings: (file: string) => Settings;
  readonly isExcluded: (file: string) => boolean;
  /** True where the editor keeps track of which version a diagnostic belongs to: it then hears of each one checked. */
  readonly tracksVersions: () => boolean;
}

/** Checks open files and keeps the editor's diagnostics and status in step with the results. */
export class Checker {
  private readonly queue: CheckQueue;
  private visible: ReadonlySet<string> = new Set();

  constructor(private readonly context: CheckerContext) {
    this.queue = new CheckQueue((run) => this.run(run), context.clock, (uri) => this.visible.has(uri));
  }

  request(open: OpenFile, atLeast = 0): void {
    this.queue.request(open.document.uri, atLeast);
  }

  /** The documents in view, whose checks come first. */
  setVisible(uris: readonly string[]): void {
    this.visible = new Set(uris);
  }

  requestAll(): void {
    for (const open of this.context.files.all()) this.request(open);
  }

  /** Takes away everything that the editor shows of a document that is closed. */
  close(open: OpenFile): void {
    this.queue.forget(open.document.uri);
    void this.context.connection.sendDiagnostics({ uri: open.document.uri, diagnostics: [] });
    this.tell({ uri: open.document.uri });
  }

  private async run(run: Run): Promise<void> {
    const { clock, files, service, settings } = this.context;
    const open = files.get(run.key);
    if (!open) return;
    const { document, file } = open;
    const version = document.version;
    const stale = (): boolean => run.cancelled() || files.get(run.key) !== open || document.version !== version;

    const reason = this.reasonToSkip(open);
    if (reason !== undefined) {
      this.publish(open, version, []);
      this.tell({ uri: run.key, version, reason });
      return;
    }
    // Most files declare nothing; they cost nothing, not even the loading of a parser.
    if (!document.getText().includes(declarationMark)) {
      open.dependsOn = [];
      this.publish(open, version, []);
      this.tell({ uri: run.key, version, counts: nothing });
      return;
    }
    open.result = undefined;
    const again = open.ranOutAt === version;
    try {
      await service.prepare(file); // loading a parser is not the file's fault
      const start = clock();
      const budget = new Budget({ milliseconds: settings(file).timeLimit * (again ? patience : 1) }, clock, stale);
      const result = await service.check(file, budget, 'verdicts');
      if (stale()) return;
      if (budget.why === 'time' && !again) {
        open.ranOutAt = version;
        this.request(open, pause);
      }
      this.show(open, version, result);
      this.tell({ uri: run.key, version, counts: count(result), milliseconds: clock() - start });
      if (result.claims.some((c) => c.verdict === 'differs')) this.searchLater(open, version, run.key);
    } catch (error) {
      this.context.connection.console.error(`Check of ${file} failed: ${describe(error)}`);
      if (stale()) return;
      this.publish(open, version, [internalFailure()]);
      this.tell({ uri: run.key, version, reason: 'The check failed; the output channel has the details.' });
    }
  }

  private show(open: OpenFile, version: number, found: FileResult): void {
    const now = { text: open.document.getText(), result: found };
    const result = withLastReading(open.known, now);
    open.known = remembered(open.known, now);
    open.dependsOn = result.dependsOn;
    open.result = { version, result };
    const diagnostics = toDiagnostics(result, {
      uriOf: (name) => this.context.addresses.uriOf(name),
      line: (line) => lineOf(open.document, line),
      severity: this.context.settings(open.file).severity,
    });
    this.publish(open, version, diagnostics);
  }

  /** Verdicts come at once; the search for the fault and its repair waits until nobody types. */
  private searchLater(open: OpenFile, version: number, uri: string): void {
    const { clock, files, service, settings, connection } = this.context;
    const stale = (): boolean => files.get(uri) !== open || open.document.version !== version;
    setTimeout(() => {
      if (stale()) return;
      const budget = new Budget({ milliseconds: settings(open.file).timeLimit }, clock, stale);
      service.check(open.file, budget, 'repairs').then(
        (result) => {
          if (!stale()) this.show(open, version, result);
        },
        (error: unknown) => connection.console.error(`The search in ${open.file} failed: ${describe(error)}`),
      );
    }, searchDelay);
  }

  private reasonToSkip({ document, file }: OpenFile): string | undefined {
    if (!this.context.settings(file).enable) return 'Checking is switched off (visviva.enable).';
    if (this.context.isExcluded(file)) return 'The file is left out by the settings (visviva.exclude).';
    if (!this.context.service.handles(file)) return 'Files of this kind are not read.';
    if (document.getText().length > sizeLimit) return 'The file is too large to be read.';
    return undefined;
  }

  private publish(open: OpenFile, version: number, diagnostics: Diagnostic[]): void {
    const content = contentOf(diagnostics);
    const before = open.published;
    const sameVersion = before?.version === version || !this.context.tracksVersions();
    open.published = { version, content };
    if (before?.content === content && sameVersion) return;
    void this.context.connection.sendDiagnostics({ uri: open.document.uri, version, diagnostics });
  }

  private tell(status: FileStatus): void {
    void this.context.connection.sendNotification(statusNotification, status);
  }
}

const nothing: FileCounts = { systems: 0, holds: 0, differs: 0, unread: 0, problems: 0 };

function count(result: FileResult): FileCounts {
  const of = (verdict: string): number => result.claims.filter((claim) => claim.verdict === verdict).length;
  return {
    systems: result.systems.length,
    holds: of('holds'),
    differs: of('differs'),
    unread: of('unread'),
    problems: result.problems.length,
  };
}

function internalFailure(): Diagnostic {
  return {
    range: { start: { line: 0, character: 0 }, end: { line: 0, character: 0 } },
    severity: DiagnosticSeverity.Information,
    source: 'visviva',
    code: 'unread',
    message: 'This file could not be checked because of a fault in Visviva; its output channel has the details.',
  };
}

/** The whole stack: a failure that reaches this place is a fault of ours. */
export function describe(error: unknown): string {
  return error instanceof Error ? (error.stack ?? error.message) : String(error);
}
