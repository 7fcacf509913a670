/** What passes between the server's thread and the one that checks. */

/** Work of the other thread: a method of the service, or what follows a check. */
export type Work =
  | 'prepare' | 'check' | 'rewrites' | 'hover' | 'hovers' | 'definition' | 'references' | 'rename' | 'derive' | 'compare'
  | 'lenses' | 'inlays' | 'panel';

export type ToWorker =
  | { readonly kind: 'folders'; readonly folders: readonly string[] }
  | { readonly kind: 'update'; readonly file: string; readonly text: string }
  | { readonly kind: 'close'; readonly file: string }
  | { readonly kind: 'invalidate'; readonly file: string }
  | {
      readonly kind: 'call';
      readonly id: number;
      readonly work: Work;
      /** Without the budget, which is made anew from these milliseconds and the flag. */
      readonly args: readonly unknown[];
      readonly milliseconds: number | undefined;
    };

export interface FromWorker {
  readonly id: number;
  readonly value?: unknown;
  /** The stack of what went wrong. */
  readonly failure?: string;
  /** What the call's budget ran out of. */
  readonly why?: 'cancelled' | 'time' | 'steps';
}

/** Shared memory: the id of the call that is no longer wanted. */
export interface WorkerData {
  readonly flag: SharedArrayBuffer;
}
