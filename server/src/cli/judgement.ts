import { InvalidArgumentError, Option, type Command } from 'commander';
import type { ProjectSettings, Report } from '@visviva/shared';
import type { Status } from './io';
import { listFindings, type Listed } from './report/findings';

/** What counts as a failure. What the command line leaves open, the configuration of the folder decides. */
export interface Judgement {
  readonly requireClaims?: boolean;
  readonly allowUnread?: boolean;
  readonly maxFindings?: number;
}

export function addJudgement(command: Command): Command {
  return command
    .option('--require-claims', 'end with status 1 when nothing is claimed')
    .option('--allow-unread', 'claims that cannot be read are told, and are no failure')
    .addOption(new Option('--max-findings <n>', 'end with status 0 while there are no more findings than this').argParser(wholeNumber));
}

export function wholeNumber(text: string): number {
  if (!/^\d{1,6}$/.test(text)) throw new InvalidArgumentError('It must be a whole number, 0 or more.');
  return Number(text);
}

export function judgementOf(options: Judgement, settings: ProjectSettings): Judgement {
  const { requireClaims, allowUnread, maxFindings } = settings;
  return { requireClaims, allowUnread, maxFindings, ...defined(options) };
}

function defined({ requireClaims, allowUnread, maxFindings }: Judgement): Judgement {
  return Object.fromEntries(Object.entries({ requireClaims, allowUnread, maxFindings }).filter(([, v]) => v !== undefined)) as Judgement;
}

export function statusOf(report: Report, judgement: Judgement): Status {
  const failing = listFindings(report).filter((f) => fails(f, judgement)).length;
  if (failing > (judgement.maxFindings ?? 0)) return 1;
  return report.summary.claims === 0 && judgement.requireClaims ? 1 : 0;
}

function fails(f: Listed, judgement: Judgement): boolean {
  if (f.accepted) return false;
  const { claim } = f;
  if (!claim) return f.level === 'error';
  if (claim.verdict === 'holds') return f.given === 'error';
  if (claim.verdict === 'unread' && judgement.allowUnread) return false;
  // A severity that the project gives decides by itself; else all that differs or is unread counts.
  return f.given === undefined || f.given === 'error';
}
