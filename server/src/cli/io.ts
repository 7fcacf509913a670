/** What a command may touch: two streams, the folder it was started in, and how far colour is welcome. */
export interface Io {
  /** The report. */
  out(text: string): void;
  /** Everything that is not the report. */
  log(text: string): void;
  /** A line for those who wait, in the place of the one before; the empty line takes it away. */
  status(line: string): void;
  /** All of standard input. */
  input(): string;
  readonly folder: string;
  readonly colour: boolean;
  /** True where people watch standard error. */
  readonly isWatched: boolean;
  readonly environment: Readonly<Record<string, string | undefined>>;
}

/** 0: every claim holds. 1: something differs, is unread or wrongly declared. 2: usage, configuration, internal failure. */
export type Status = 0 | 1 | 2;

/** A mistake of the caller, told in one line; the command ends with status 2. */
export class UsageError extends Error {}
