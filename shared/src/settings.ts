/** The settings of `visviva.*` that the server reads. */
export interface Settings {
  /** False: nothing is checked and nothing is shown. */
  readonly enable: boolean;
  /** Milliseconds that the check of one file may take. */
  readonly timeLimit: number;
}

export const defaultSettings: Settings = { enable: true, timeLimit: 2000 };

/** Settings from whatever the editor sent; a value that makes no sense counts as not set. */
export function readSettings(value: unknown): Settings {
  const given = typeof value === 'object' && value !== null ? (value as Record<string, unknown>) : {};
  const limit = given['timeLimit'];
  return {
    enable: typeof given['enable'] === 'boolean' ? given['enable'] : defaultSettings.enable,
    timeLimit:
      typeof limit === 'number' && Number.isFinite(limit)
        ? Math.min(60_000, Math.max(50, limit))
        : defaultSettings.timeLimit,
  };
}
