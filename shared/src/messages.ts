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

/** Sent by the editor when other documents come into view: they are checked first. */
export const visibleNotification = 'visviva/visible';

export interface VisibleParams {
  readonly uris: readonly string[];
}

/** Asks for a first declaration of the function at a place; answered with null where nothing looks like dynamics. */
export const suggestRequest = 'visviva/suggest';

export interface SuggestParams {
  readonly textDocument: { readonly uri: string };
  /** Lines and characters from 0, as in the protocol. */
  readonly position: { readonly line: number; readonly character: number };
}

export interface Suggestion {
  readonly function: string;
  /** The document version it was made from. */
  readonly version: number;
  /** The line (from 0) before which it belongs. */
  readonly line: number;
  /** A comment of the file's language, without a line end. */
  readonly text: string;
}

export interface FileCounts {
  readonly systems: number;
  readonly holds: number;
  readonly differs: number;
  readonly unread: number;
  readonly problems: number;
}

/** Tells the server which theme its pictures are shown in. */
export const themeNotification = 'visviva/theme';

export interface Theme {
  /** A colour for text, such as `#1f1f1f`. */
  readonly text: string;
}

/** What this product's own extension tells the server when it starts, beside the settings. */
export interface ClientOptions {
  /** It has the panel, and the commands that lenses call. */
  readonly panel?: boolean;
  /** Formulas in hovers may be pictures, in this theme. */
  readonly theme?: Theme;
}

/** Asks for derived equations or code of the system at a place; answered with null where there is none. */
export const deriveRequest = 'visviva/derive';

export interface DeriveParams {
  readonly textDocument: { readonly uri: string };
  readonly position: { readonly line: number; readonly character: number };
  /** `code`: a function in the file's own language. */
  readonly as: 'text' | 'tex' | 'code';
}

export interface DerivedText {
  readonly system: string;
  readonly text: string;
  /** The document version it was made from. */
  readonly version: number;
  /** Where code belongs: below this line (from 0), the last one of the function or declaration. */
  readonly line: number;
}

/** Asks for all files of the workspace that declare something, as addresses. */
export const filesRequest = 'visviva/files';

/** Asks for the claims of one file of the workspace, checked now. */
export const checkFileRequest = 'visviva/checkFile';

export interface CheckedFile {
  readonly claims: readonly CheckedClaim[];
  readonly milliseconds: number;
}

export interface CheckedClaim {
  readonly system: string;
  readonly function: string;
  readonly output: string;
  readonly quantity: string;
  /** From 0. */
  readonly line: number;
  readonly verdict: 'holds' | 'differs' | 'unread';
  readonly message: string;
}
