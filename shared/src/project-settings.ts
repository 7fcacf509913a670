import type { FindingCode, ProblemCode, Severity } from './report';

/**
 * What a project says in `visviva.json`, under `visviva` in package.json or under `[tool.visviva]` in pyproject.toml. Editor
 * and command read the same files.
 */
export interface ProjectSettings {
  /** Only these files of the folder; patterns as in a .gitignore. */
  readonly include?: readonly string[];
  /** Not these, of what `include` takes. */
  readonly exclude?: readonly string[];
  /** Milliseconds that the check of one file may take. */
  readonly timeLimit?: number;
  /** How much a finding counts, by its code. */
  readonly severity?: Readonly<Partial<Record<FindingCode | ProblemCode, Severity>>>;
  /** Which Python the code is written in: `/` between integers differs. */
  readonly python?: 2 | 3;
  /** Nothing claimed is a failure. */
  readonly requireClaims?: boolean;
  /** Claims that cannot be read are told, and are no failure. */
  readonly allowUnread?: boolean;
  /** So many findings are no failure yet. */
  readonly maxFindings?: number;
  /** The file that lists the findings to accept, from the folder of the configuration. */
  readonly baseline?: string;
}

const severities: readonly Severity[] = ['error', 'warning', 'note'];

/** Every code of a report; the type makes sure that none is forgotten. */
const codes: Readonly<Record<FindingCode | ProblemCode, true>> = {
  sign: true, factor: true, 'missing-term': true, 'extra-term': true, 'swapped-symbol': true, 'swapped-rows': true,
  'wrong-function': true, 'wrong-power': true, 'wrong-operator': true, grouping: true, 'rounded-constant': true,
  differs: true, unread: true, syntax: true, undeclared: true, unused: true, ambiguous: true, dimension: true,
  'not-quadratic': true, singular: true, inconsistent: true,
};

export function isCode(text: string): text is FindingCode | ProblemCode {
  return Object.hasOwn(codes, text);
}

export const reportCodes: readonly string[] = Object.keys(codes);

type Check = (value: unknown) => string | undefined;

const list: Check = (v) => (Array.isArray(v) && v.every((x) => typeof x === 'string' && x !== '') ? undefined : 'must be a list of patterns, such as ["src/"]');
const flag: Check = (v) => (typeof v === 'boolean' ? undefined : 'must be true or false');
const whole = (least: number, most: number, what: string): Check => (v) =>
  typeof v === 'number' && Number.isInteger(v) && v >= least && v <= most ? undefined : `must be ${what}`;

const checks: Readonly<Record<keyof ProjectSettings, Check>> = {
  include: list,
  exclude: list,
  timeLimit: whole(50, 600_000, 'a whole number of milliseconds from 50 to 600000'),
  severity: (v) => {
    if (typeof v !== 'object' || v === null || Array.isArray(v)) return 'must give codes a severity, such as { "unused": "note" }';
    for (const [code, value] of Object.entries(v)) {
      if (!isCode(code)) return `knows no code "${code}"; visviva explain lists them`;
      if (!severities.includes(value as Severity)) return `gives "${code}" the severity ${JSON.stringify(value)}, not "error", "warning" or "note"`;
    }
    return undefined;
  },
  python: (v) => (v === 2 || v === 3 ? undefined : 'must be 2 or 3'),
  requireClaims: flag,
  allowUnread: flag,
  maxFindings: whole(0, 1_000_000, 'a whole number, 0 or more'),
  baseline: (v) => (typeof v === 'string' && v !== '' ? undefined : 'must be the name of a file'),
};

/** The settings in a value, and what is wrong with it; each fault is a sentence without its full stop. */
export function readProjectSettings(value: unknown): { readonly settings: ProjectSettings; readonly faults: readonly string[] } {
  if (typeof value !== 'object' || value === null || Array.isArray(value)) return { settings: {}, faults: ['the settings must be an object'] };
  const settings: Record<string, unknown> = {};
  const faults: string[] = [];
  for (const [name, given] of Object.entries(value)) {
    if (name === '$schema') continue;
    if (!Object.hasOwn(checks, name)) {
      faults.push(`there is no setting "${name}"; the settings are ${Object.keys(checks).join(', ')}`);
      continue;
    }
    const fault = checks[name as keyof ProjectSettings](given);
    if (fault) faults.push(`"${name}" ${fault}`);
    else settings[name] = given;
  }
  return { settings: settings as ProjectSettings, faults };
}
