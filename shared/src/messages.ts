/** What the server tells the editor beyond the protocol's own messages, typed once for both sides. */

/** Sent after each check of an open file, and when it closes (then without counts). */
export const statusNotification = 'visviva/status';

export interface FileStatus {
  readonly uri: string;
  /** The document version that was checked. */
  readonly version?: number;
  /** Undefined where the file is not checked: closed, switched off or too large. */
  readonly counts?: FileCounts;
  /** How long the check took. */
  readonly milliseconds?: number;
  /** Why there are no counts, as a sentence to show. */
  readonly reason?: string;
}

export interface FileCounts {
  readonly systems: number;
  readonly holds: number;
  readonly differs: number;
  readonly unread: number;
  readonly problems: number;
}
