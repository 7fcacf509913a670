import type { Report } from '@visviva/shared';
import type { FileDetails } from '../../service/api';
import { seenFrom } from '../../host/repository';

/** What a report is written from. */
export interface Page {
  readonly report: Report;
  /** The folder that the paths of the report are relative to. */
  readonly folder: string;
  /** The root of the repository around it. */
  readonly root: string;
  readonly colour: boolean;
  readonly environment: Readonly<Record<string, string | undefined>>;
  /** The text of a file of the report. */
  readonly read: (file: string) => string | undefined;
  /** Equations and terms behind the claims of a file of the report, for formats that show them. */
  readonly details: (file: string) => Promise<FileDetails | undefined>;
}

/** Writes a report in one format. */
export type Writer = (page: Page) => string | Promise<string>;

/** A file of the report as people and services of the repository call it: from its root. */
export function fromRoot(page: Pick<Page, 'root' | 'folder'>, file: string): string {
  return seenFrom(page.root, page.folder, file);
}
