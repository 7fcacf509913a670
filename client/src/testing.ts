import type { CheckedClaim } from '@visviva/shared';
import * as vscode from 'vscode';
import type { CheckerClient } from './checker-client';

/** Every system and claim of the workspace as a test: file, then function and system, then claims. */
export class ClaimTests implements vscode.Disposable {
  private readonly controller = vscode.tests.createTestController('visviva', 'Visviva');
  private readonly watcher: vscode.Disposable;

  constructor(private readonly checker: CheckerClient) {
    this.controller.resolveHandler = async (item) => {
      if (!item) await this.find();
      else if (item.uri && !item.parent) await this.check(item, undefined, new vscode.CancellationTokenSource().token);
    };
    this.controller.refreshHandler = () => this.find();
    this.controller.createRunProfile(vscode.l10n.t('Check'), vscode.TestRunProfileKind.Run, (request, token) => this.run(request, token), true);
    this.watcher = checker.onChecked((uri) => {
      const item = this.controller.items.get(uri);
      if (item) item.canResolveChildren = true;
      else if (this.found) this.file(vscode.Uri.parse(uri));
    });
  }

  private found = false;

  dispose(): void {
    this.watcher.dispose();
    this.controller.dispose();
  }

  /** Checks everything, with progress, and leaves the results in the view. */
  async runAll(): Promise<void> {
    await vscode.window.withProgress(
      { location: vscode.ProgressLocation.Notification, title: vscode.l10n.t('Visviva checks the workspace'), cancellable: true },
      async (progress, token) => {
        await this.find();
        const count = Math.max(1, this.controller.items.size);
        await this.run(new vscode.TestRunRequest(), token, (name) => progress.report({ message: name, increment: 100 / count }));
      },
    );
  }

  private async find(): Promise<void> {
    const files = await this.checker.files();
    const wanted = new Set(files.map((f) => f.toString()));
    this.controller.items.forEach((item) => {
      if (!wanted.has(item.id)) this.controller.items.delete(item.id);
    });
    for (const uri of files) this.file(uri);
    this.found = true;
  }

  private file(uri: vscode.Uri): vscode.TestItem {
    const known = this.controller.items.get(uri.toString());
    if (known) return known;
    const item = this.controller.createTestItem(uri.toString(), vscode.workspace.asRelativePath(uri), uri);
    item.canResolveChildren = true;
    this.controller.items.add(item);
    return item;
  }

  private async run(request: vscode.TestRunRequest, token: vscode.CancellationToken, tell?: (name: string) => void): Promise<void> {
    if (this.controller.items.size === 0) await this.find();
    const run = this.controller.createTestRun(request);
    const wanted = request.include ?? [...this.controller.items].map(([, item]) => item);
    const files = new Set(wanted.map((item) => top(item)));
    for (const file of files) {
      if (token.isCancellationRequested || run.token.isCancellationRequested) break;
      tell?.(file.label);
      run.started(file);
      await this.check(file, { run, only: wanted.includes(file) ? undefined : new Set(wanted.map((i) => i.id)) }, token);
    }
    run.end();
  }

  private async check(file: vscode.TestItem, into: { run: vscode.TestRun; only: ReadonlySet<string> | undefined } | undefined, token: vscode.CancellationToken): Promise<void> {
    const result = await this.checker.checkFile(file.uri!, token);
    if (!result) {
      into?.run.errored(file, new vscode.TestMessage(vscode.l10n.t('The file could not be checked.')));
      return;
    }
    const groups = new Map<string, vscode.TestItem>();
    const claims: [vscode.TestItem, CheckedClaim][] = [];
    for (const claim of result.claims) {
      const key = `${file.id}#${claim.system}#${claim.function}`;
      let group = groups.get(key);
      if (!group) {
        group = this.controller.createTestItem(key, claim.function === '' ? claim.system : `${claim.function} · ${claim.system}`, file.uri);
        group.range = new vscode.Range(claim.line, 0, claim.line, 0);
        groups.set(key, group);
      }
      const item = this.controller.createTestItem(`${key}#${claim.output}#${claim.quantity}`, `${claim.output} = ${claim.quantity}`, file.uri);
      item.range = new vscode.Range(claim.line, 0, claim.line, 0);
      group.children.add(item);
      claims.push([item, claim]);
    }
    file.children.replace([...groups.values()]);
    if (!into) return;
    const { run, only } = into;
    const each = result.milliseconds / Math.max(1, claims.length);
    for (const [item, claim] of claims) {
      if (only && !only.has(item.id) && !only.has(item.parent!.id)) continue;
      const message = new vscode.TestMessage(claim.message);
      message.location = new vscode.Location(file.uri!, item.range!);
      if (claim.verdict === 'holds') run.passed(item, each);
      else if (claim.verdict === 'differs') run.failed(item, message, each);
      else run.errored(item, message, each);
    }
    if (claims.length === 0) run.skipped(file);
    else if (claims.every(([, c]) => c.verdict === 'holds')) run.passed(file, result.milliseconds);
  }
}

function top(item: vscode.TestItem): vscode.TestItem {
  return item.parent ? top(item.parent) : item;
}
