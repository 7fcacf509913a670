import { Budget } from '../../server/src/text/budget';
import { createService } from '../../server/src/service';
import type { FileResult, Files } from '../../server/src/service/api';

/** A project held in memory: file names to text. */
export function filesOf(texts: ReadonlyMap<string, string>): Files {
  return { read: (file) => texts.get(file), declarations: () => [...texts.keys()] };
}

/** What the product says about one file of a project held in memory. */
export async function checkText(file: string, text: string, others: ReadonlyMap<string, string> = new Map()): Promise<FileResult> {
  return createService(filesOf(new Map([...others, [file, text]]))).check(file, new Budget());
}

/** The same without a search for repairs, which takes most of the time where much is wrong. */
export async function verdictsOf(file: string, text: string, others: ReadonlyMap<string, string> = new Map()): Promise<FileResult> {
  return createService(filesOf(new Map([...others, [file, text]]))).check(file, new Budget(), 'verdicts');
}
