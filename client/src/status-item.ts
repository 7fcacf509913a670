import type { FileCounts, FileStatus } from '@visviva/shared';
import * as vscode from 'vscode';

/** The one status bar item: what became of the claims in the active editor. A click shows the output. */
export class StatusItem implements vscode.Disposable {
  private readonly item = vscode.window.createStatusBarItem('visviva.status', vscode.StatusBarAlignment.Left, 10);
  private readonly byUri = new Map<string, FileStatus>();
  private readonly subscription = vscode.window.onDidChangeActiveTextEditor(() => this.show());
  private notice: string | undefined;

  constructor() {
    this.item.name = 'Visviva';
    this.item.command = 'visviva.showOutput';
  }

  starting(): void {
    this.notice = 'The checker is starting.';
    this.show();
  }

  running(): void {
    this.notice = undefined;
    this.show();
  }

  stopped(notice: string): void {
    this.byUri.clear();
    this.notice = notice;
    this.show();
  }

  update(status: FileStatus): void {
    const key = vscode.Uri.parse(status.uri).toString();
    if (status.counts || status.reason) this.byUri.set(key, status);
    else this.byUri.delete(key);
    this.show();
  }

  dispose(): void {
    this.subscription.dispose();
    this.item.dispose();
  }

  private show(): void {
    const active = vscode.window.activeTextEditor?.document.uri.toString();
    const status = active === undefined ? undefined : this.byUri.get(active);
    if (this.notice !== undefined) {
      this.set('$(warning) Visviva', this.notice);
    } else if (status?.counts && claimsOf(status.counts) + status.counts.systems + status.counts.problems > 0) {
      this.set(summary(status.counts), details(status.counts, status.milliseconds));
    } else if (status?.reason) {
      this.set('$(circle-slash) Visviva', status.reason);
    } else {
      this.item.hide();
    }
  }

  private set(text: string, tooltip: string): void {
    this.item.text = text;
    this.item.tooltip = tooltip;
    this.item.accessibilityInformation = { label: `Visviva: ${tooltip}` };
    this.item.show();
  }
}

function claimsOf({ holds, differs, unread }: FileCounts): number {
  return holds + differs + unread;
}

function summary(counts: FileCounts): string {
  const parts = [`$(check) ${counts.holds}`];
  if (counts.differs > 0) parts.push(`$(error) ${counts.differs}`);
  if (counts.unread > 0) parts.push(`$(question) ${counts.unread}`);
  if (counts.problems > 0) parts.push(`$(warning) ${counts.problems}`);
  return `Visviva ${parts.join(' ')}`;
}

/** One sentence about a file's claims, for the tooltip and the log. */
export function details(counts: FileCounts, milliseconds?: number): string {
  const time = milliseconds === undefined ? '' : `\nChecked in ${Math.max(1, Math.round(milliseconds))} ms.`;
  return (
    `${counts.holds} of ${plural(claimsOf(counts), 'claim')} ${counts.holds === 1 ? 'holds' : 'hold'}, ` +
    `${counts.differs} ${counts.differs === 1 ? 'differs' : 'differ'}, ${counts.unread} unread; ` +
    `${plural(counts.problems, 'problem')} in declarations.${time}`
  );
}

function plural(count: number, word: string): string {
  return `${count} ${word}${count === 1 ? '' : 's'}`;
}
