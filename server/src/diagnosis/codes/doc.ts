import type { FindingCode, ProblemCode } from '@visviva/shared';

/** What a person can read about a code of the report. Plain text; examples keep their line breaks. */
export interface CodeDoc {
  readonly code: FindingCode | ProblemCode;
  readonly about: 'claim' | 'declaration';
  /** A short sentence without a full stop. */
  readonly title: string;
  readonly meaning: string;
  readonly why: string;
  readonly found: string;
  readonly example: string;
  readonly remedy: string;
}
