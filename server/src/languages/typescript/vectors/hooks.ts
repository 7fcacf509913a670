/**
 * What React's hooks give during one rendering (its reference, "Hooks"), for those that hold simulation state and code: a
 * ref's value is what was written to it, so it counts as state wherever the file writes it. `useState` is not here: what it
 * gives is known only while the program runs, and so is what gets attached to a ref that begins empty.
 */
export const REACT = `
export const useRef = (first) => (first == null ? attached() : { current: first });
export const useCallback = (f) => f;
export const useMemo = (f) => f();
export default { useRef, useCallback, useMemo };
`;
