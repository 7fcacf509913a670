import type { ReportClaim } from '@visviva/shared';
import { LineIndex } from '../text/line-index';
import type { Budget } from '../text/budget';
import type { FileResult, Service } from './api';

/** A piece of a text and what is to stand there; offsets in UTF-16 units. */
export interface TextChange {
  readonly start: number;
  readonly end: number;
  readonly text: string;
}

export interface RepairedText {
  readonly text: string;
  /** What was done, one title per repair. */
  readonly titles: readonly string[];
}

/**
 * The verified repairs of a report, each once, as far as they do not touch each other; those that do are left for the next
 * check. Everything else of the text, line ends and byte order mark included, stays as it is.
 * @param text what was checked
 */
export function applyRepairs(text: string, claims: readonly ReportClaim[]): RepairedText {
  const lines = new LineIndex(text);
  const done = new Set<string>();
  const changes: TextChange[] = [];
  const titles: string[] = [];
  for (const { findings } of claims) {
    for (const { repair, file } of findings) {
      if (!repair?.verified || file !== undefined) continue;
      const own = repair.edits.map((e) => ({ start: lines.offset(e.range.start), end: lines.offset(e.range.end), text: e.text }));
      const key = JSON.stringify(own);
      if (done.has(key) || own.some((a) => changes.some((b) => a.start <= b.end && b.start <= a.end))) continue;
      done.add(key);
      changes.push(...own);
      titles.push(repair.title);
    }
  }
  return { text: changed(text, changes), titles };
}

function changed(text: string, changes: readonly TextChange[]): string {
  let out = text;
  for (const c of [...changes].sort((a, b) => b.start - a.start)) out = out.slice(0, c.start) + c.text + out.slice(c.end);
  return out;
}

const MOST_ROUNDS = 6;

/**
 * Repairs an open document until no verified repair is left. The service keeps the repaired text as the document's own.
 * Never makes a claim worse: a round that does is taken back.
 * @param text the document's text now
 */
export async function repairDocument(service: Service, file: string, text: string, budget: () => Budget): Promise<RepairedText> {
  let current = text;
  const titles: string[] = [];
  let result = await service.check(file, budget());
  for (let round = 0; round < MOST_ROUNDS; round++) {
    const next = applyRepairs(current, result.claims);
    if (next.titles.length === 0) break;
    service.update(file, next.text);
    const after = await service.check(file, budget());
    if (isWorse(result, after)) {
      service.update(file, current);
      break;
    }
    current = next.text;
    titles.push(...next.titles);
    result = after;
  }
  return { text: current, titles };
}

function isWorse(before: FileResult, after: FileResult): boolean {
  if (before.claims.length !== after.claims.length) return true;
  return before.claims.some((c, i) => after.claims[i]!.verdict !== c.verdict && after.claims[i]!.verdict !== 'holds');
}
