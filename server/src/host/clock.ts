/** Milliseconds from some fixed moment; only differences mean anything. */
export type Clock = () => number;

export const clock: Clock = () => performance.now();
