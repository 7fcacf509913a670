/** The settings of `visviva.*` that the server reads. */
export interface Settings {
  /** False: nothing is checked and nothing is shown. */
  readonly enable: boolean;
  /** Milliseconds that the check of one file may take. */
  readonly timeLimit: number;
  readonly checkOn: 'type' | 'save';
  /** How findings are shown. */
  readonly severity: Readonly<Record<'differs' | 'unread' | 'declaration', ShownAs>>;
  /** Patterns of files in the workspace that are not checked, as in a `.gitignore`. */
  readonly exclude: readonly string[];
  readonly codeLens: boolean;
  /** Derived equations at the ends of the lines that claim them. */
  readonly inlayEquations: boolean;
}

export type ShownAs = 'error' | 'warning' | 'information' | 'hint' | 'none';

export const severities: readonly ShownAs[] = ['error', 'warning', 'information', 'hint', 'none'];

export const defaultSettings: Settings = {
  enable: true,
  timeLimit: 2000,
  checkOn: 'type',
  severity: { differs: 'error', unread: 'information', declaration: 'error' },
  exclude: [],
  codeLens: true,
  inlayEquations: false,
};

/** Settings from whatever the editor sent; a value that makes no sense counts as not set. */
export function readSettings(value: unknown): Settings {
  const given = recordOf(value);
  const flag = (key: 'enable' | 'codeLens' | 'inlayEquations'): boolean =>
    typeof given[key] === 'boolean' ? given[key] : defaultSettings[key];
  const limit = given['timeLimit'];
  const severity = recordOf(given['severity']);
  const shownAs = (key: keyof Settings['severity']): ShownAs =>
    severities.find((s) => s === severity[key]) ?? defaultSettings.severity[key];
  const exclude = given['exclude'];
  return {
    enable: flag('enable'),
    timeLimit:
      typeof limit === 'number' && Number.isFinite(limit)
        ? Math.min(60_000, Math.max(50, limit))
        : defaultSettings.timeLimit,
    checkOn: given['checkOn'] === 'save' ? 'save' : 'type',
    severity: { differs: shownAs('differs'), unread: shownAs('unread'), declaration: shownAs('declaration') },
    exclude: Array.isArray(exclude) ? exclude.filter((e): e is string => typeof e === 'string') : [],
    codeLens: flag('codeLens'),
    inlayEquations: flag('inlayEquations'),
  };
}

function recordOf(value: unknown): Readonly<Record<string, unknown>> {
  return typeof value === 'object' && value !== null ? (value as Record<string, unknown>) : {};
}
