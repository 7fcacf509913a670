import type { FileResult, Hover, HoverItem, Service } from '../../service/api';
import { Budget } from '../../text/budget';
import { LineIndex } from '../../text/line-index';
import { Line } from './line';
import type { ToWorker, Work } from './messages';

/** What a person waits for comes before checks, and checks before what may be wanted later. */
const URGENT = 2;
const CHECK = 1;
const LATER = -1;

const OLD = '*As it was before the last change; the check is running.*';

export interface WorkingService extends Service {
  /** When nothing is left to do in the other thread. */
  settled(): Promise<void>;
  /** Ends the other thread; the next call starts another one. */
  stop(): Promise<void>;
}

/**
 * A service whose checks run in a thread of their own, while whatever is asked about a text alone is answered at once by
 * `local`. Hovers are answered from what the last check left, as long as the text at the place is the same.
 * @param entry address of the worker's program
 * @param folders the project's folders, which the thread looks through by itself
 */
export function inAnotherThread(local: Service, folders: () => readonly string[], entry: URL): WorkingService {
  const open = new Map<string, string>();
  const hovers = new Map<string, { readonly of: string; readonly items: readonly HoverItem[] }>();
  const prepared = new Map<string, Promise<unknown>>();
  const keeping = new Set<Promise<void>>();
  let sentFolders = '';
  const line = new Line(entry, () => {
    const state: ToWorker[] = [{ kind: 'folders', folders: folders() }];
    for (const [file, text] of open) state.push({ kind: 'update', file, text });
    return state;
  });
  const tellFolders = (): void => {
    const now = JSON.stringify(folders());
    if (now === sentFolders) return;
    sentFolders = now;
    line.tell({ kind: 'folders', folders: folders() });
  };
  const call = <T>(work: Work, args: readonly unknown[], budget: Parameters<Line['call']>[2], urgency = URGENT): Promise<T> => {
    tellFolders();
    return line.call(work, args, budget, urgency) as Promise<T>;
  };

  /** What the last check left for a place; of a text that has changed since only while nothing newer can be had at once. */
  const known = (file: string, position: Parameters<Service['hover']>[1]): Hover | undefined => {
    const last = hovers.get(file);
    const text = open.get(file);
    if (!last || text === undefined) return undefined;
    const isOld = last.of !== text;
    if (isOld && !line.isBusy) return undefined;
    const lines = new LineIndex(text);
    const at = lines.offset(position);
    for (const item of last.items) {
      const [start, end] = [lines.offset(item.range.start), lines.offset(item.range.end)];
      if (at < start || at > end) continue;
      if (text.slice(start, end) !== item.text) return undefined;
      return { formulas: item.formulas, markdown: isOld ? `${item.markdown}\n\n${OLD}` : item.markdown, range: item.shown };
    }
    return undefined;
  };

  const keepHovers = async (file: string): Promise<void> => {
    const of = open.get(file);
    try {
      // What was more urgent may have interrupted it.
      while (of !== undefined && open.get(file) === of) {
        const budget = new Budget();
        const items = await call<readonly HoverItem[] | undefined>('hovers', [file], budget, LATER);
        if (!items || budget.why) continue;
        if (open.get(file) === of) hovers.set(file, { of, items });
        return;
      }
    } catch {
      // Nothing is kept; a hover asks for itself then.
    }
  };

  return {
    ...local,
    get readings() {
      return local.readings;
    },
    update(file, text) {
      open.set(file, text);
      local.update(file, text);
      line.tell({ kind: 'update', file, text });
      line.drop((work, args) => work === 'hovers' && args[0] === file);
    },
    close(file) {
      open.delete(file);
      hovers.delete(file);
      local.close(file);
      line.tell({ kind: 'close', file });
    },
    invalidate(file) {
      local.invalidate(file);
      line.tell({ kind: 'invalidate', file });
    },
    prepare(file) {
      const kind = file.slice(file.lastIndexOf('.') + 1);
      const loading = prepared.get(kind) ?? call('prepare', [file], undefined);
      prepared.set(kind, loading);
      loading.catch(() => prepared.delete(kind));
      return loading as Promise<void>;
    },
    async check(file, budget, depth): Promise<FileResult> {
      const result = await call<FileResult>('check', [file, depth], budget, CHECK);
      if (!budget.why && result.claims.length > 0) {
        const kept = keepHovers(file).finally(() => keeping.delete(kept));
        keeping.add(kept);
      }
      return result;
    },
    async hover(file, position, budget) {
      return known(file, position) ?? (await call('hover', [file, position], budget));
    },
    rewrites: (file, range, budget) => call('rewrites', [file, range], budget),
    definition: (file, position, budget) => call('definition', [file, position], budget),
    references: (file, position, budget) => call('references', [file, position], budget),
    rename: (file, position, name, budget) => call('rename', [file, position, name], budget),
    lenses: (file, budget) => call('lenses', [file], budget),
    inlays: (file, budget) => call('inlays', [file], budget),
    panel: (file, position, budget) => call('panel', [file, position], budget),
    derive: (file, as, budget) => call('derive', [file, as], budget),
    compare: (file, against, system, budget) => call('compare', [file, against, system], budget),
    settled: async () => void (await Promise.all(keeping)),
    stop: () => line.stop(),
  };
}
