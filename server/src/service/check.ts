import type { Evidence, Problem, ReportClaim, Witness } from '@visviva/shared';
import type { Decision } from '../comparison/pair';
import { checkSubject, type ClaimResult, type SubjectRequest, type SubjectResult } from '../comparison/subject';
import type { Diagnosis } from '../diagnosis/diagnose';
import { describeClaim, type RawFinding } from '../diagnosis/findings';
import { inOrder } from '../diagnosis/describe';
import { symbolText, type SymbolData } from '../expression/node';
import { symbolsOf } from '../expression/reach';
import { checkDimensions } from '../mechanics/dimensions';
import { printFormula } from '../notation';
import { findUnused } from '../mechanics/unused';
import type { DeclarationProblem, System } from '../mechanics/system';
import type { Subject } from '../program/form';
import type { Block, Statement } from '../notation/tree';
import { BudgetSpent, type Budget } from '../text/budget';
import type { Place } from '../text/span';
import type { Document, Documents, PlacedBlock } from '../workspace/documents';
import type { Imports } from '../workspace/imports';
import { declares, type SystemEntry, type Systems } from '../workspace/systems';
import type { FileResult } from './api';
import { lostFractions } from './lost-fractions';
import type { Remembered, ResultCache } from './result-cache';

/** Everything that was found out about one declaration. */
export interface BlockOutcome {
  readonly placed: PlacedBlock;
  readonly entry: SystemEntry | undefined;
  readonly result: SubjectResult | undefined;
  readonly problems: readonly DeclarationProblem[];
  /** What is wrong with the code, and the repair; made for reports only. */
  readonly diagnosis?: Diagnosis;
  /** The result as it is kept for the next time. */
  readonly remembered?: Remembered<Diagnosis>;
  /** Why the block was left before its claims were read. */
  readonly cut?: string;
  /** Findings about the code itself: ambiguous names. */
  readonly ambiguities: readonly { readonly message: string; readonly place: Place }[];
}

export interface Project {
  readonly documents: Documents;
  readonly systems: Systems;
  readonly imports: Imports;
  readonly results: ResultCache<Diagnosis>;
}

/** Checks every declaration of a document. */
export async function checkDocument(project: Project, document: Document, budget: Budget): Promise<BlockOutcome[]> {
  const outcomes: BlockOutcome[] = [];
  for (const placed of document.blocks) {
    outcomes.push(await checkBlock(project, document, placed, budget, project.results));
  }
  return withUnused(document, outcomes);
}

/** @param results where to look for what is known already; none for a text that is only tried out */
export async function checkBlock(
  project: Project,
  document: Document,
  placed: PlacedBlock,
  budget: Budget,
  results?: ResultCache<Diagnosis>,
): Promise<BlockOutcome> {
  try {
    return await outcomeOf(project, document, placed, budget, results);
  } catch (error) {
    if (!(error instanceof BudgetSpent)) throw error;
    return { placed, entry: undefined, result: undefined, problems: [], ambiguities: [], cut: budget.reason };
  }
}

async function outcomeOf(
  project: Project,
  document: Document,
  placed: PlacedBlock,
  budget: Budget,
  results?: ResultCache<Diagnosis>,
): Promise<BlockOutcome> {
  const { block } = placed;
  const lookup = await project.systems.lookup(document, block, budget);
  const problem = (code: Problem['code'], message: string): BlockOutcome => ({
    placed,
    entry: undefined,
    result: undefined,
    problems: [
      ...block.errors.map((e): DeclarationProblem => ({ ...e, severity: 'error' })),
      { code, message, span: block.nameSpan, severity: 'error' },
    ],
    ambiguities: [],
  });
  if (lookup.kind === 'none') {
    return problem('undeclared', `no declaration of \`${block.name}\` with \`coordinates\` was found in this file or the project`);
  }
  if (lookup.kind === 'several') {
    const places = [...new Set(lookup.files)].join(', ');
    return problem('ambiguous', `\`${block.name}\` is declared more than once (${places}): give the systems names of their own`);
  }
  const { entry } = lookup;
  await project.imports.prepare(document);
  let remembered = results?.find(document, placed, entry.derived);
  const result = remembered?.result ?? checkSubject({ ...subjectRequest(project, document, placed, entry, budget), withoutProof: !results });
  // What a budget cut short is no result to keep.
  if (!remembered && !budget.why) remembered = results?.add(document, placed, entry.derived, result);
  const own = declares(block)
    ? [...entry.problems, ...checkDimensions(block).map((d): DeclarationProblem => ({ ...d, severity: 'warning' }))]
    : [
        ...block.errors.map((e): DeclarationProblem => ({ ...e, severity: 'error' })),
        ...misplaced(block),
        ...(entry.isExtended ? entry.problems : []),
      ];
  return {
    placed,
    entry,
    result,
    problems: [...own, ...result.problems],
    ambiguities: result.ambiguities,
    ...(remembered ? { remembered } : {}),
  };
}

export function subjectRequest(
  project: Project,
  document: Document,
  { block, subject }: PlacedBlock,
  entry: SystemEntry,
  budget: Budget,
): SubjectRequest {
  return {
    block,
    derived: entry.derived,
    spellings: entry.spellings,
    file: document.file,
    program: document.program,
    library: document.core.library,
    subject,
    importFile: project.imports.reader(document),
    budget,
  };
}

const OF_THE_SYSTEM: ReadonlySet<Statement['kind']> = new Set([
  'energy', 'generalized-force', 'force', 'torque', 'constraint', 'point', 'body', 'gravity', 'spring', 'damper',
] as const);

/** Statements that belong to the declaration with the coordinates; here they would be passed over in silence. */
function misplaced(block: Block): DeclarationProblem[] {
  return block.statements
    .filter((s) => OF_THE_SYSTEM.has(s.kind))
    .map((s) => ({
      code: 'inconsistent',
      message: `this block only names \`${block.name}\`: what its energies are stands with its \`coordinates\``,
      span: s.span,
      severity: 'error',
    }));
}

/** A name counts as used when any declaration of the file uses it, so this waits for the last of them. */
function withUnused(document: Document, outcomes: BlockOutcome[]): BlockOutcome[] {
  return outcomes.map((o) => {
    const system = o.entry?.derived.system;
    if (!system || !declares(o.placed.block) || system.blocked) return o;
    const claimed = outcomes.some((x) => x.placed.block.name === system.name && x.result && x.result.claims.length > 0);
    if (!claimed || document.language === 'visviva') return o;
    const shift = o.placed.block.span.start - system.block.span.start;
    const family = outcomes.flatMap((x) => (x.placed.block.name === system.name && x.entry ? [...x.entry.derived.system.scope.used] : []));
    // Stabilising terms vanish on the constraints: what claims that hold depend on is in use, though no energy has it.
    const right = outcomes.flatMap((x) =>
      x.placed.block.name === system.name ? (x.result?.claims ?? []).flatMap((c) => (c.decision.verdict === 'holds' && c.found ? [c.found] : [])) : [],
    );
    const unused = findUnused(system, new Set([...family, ...symbolsOf(...right)])).map((p) => ({ ...p, span: { start: p.span.start + shift, end: p.span.end + shift } }));
    return unused.length > 0 ? { ...o, problems: [...o.problems, ...unused] } : o;
  });
}

export function fileResult(document: Document, outcomes: readonly BlockOutcome[]): FileResult {
  const { lines, file } = document;
  const problems: Problem[] = [];
  const claims: ReportClaim[] = [];
  const dependsOn = new Set<string>();
  for (const o of outcomes) {
    for (const p of o.problems) {
      problems.push({ file, code: p.code, message: p.message, range: lines.range(p.span), severity: p.severity });
    }
    problems.push(...lostFractions(document, o.result?.reading?.drops ?? []));
    for (const a of o.ambiguities) {
      problems.push({ file: a.place.file, code: 'ambiguous', message: a.message, range: lines.range(a.place.span), severity: 'error' });
    }
    if (o.entry && o.entry.file !== file) dependsOn.add(o.entry.file);
    o.result?.reading?.files.forEach((f) => dependsOn.add(f));
    if (o.result) o.result.claims.forEach((_, i) => claims.push(reportClaim(document, o, i)));
    else claims.push(...unresolvedClaims(document, o));
  }
  return {
    file,
    language: document.program.language,
    systems: document.blocks
      .filter((b) => declares(b.block))
      .map((b) => ({ name: b.block.name, range: lines.range(b.block.span) })),
    claims,
    problems: distinct(problems).sort(
      (a, b) => a.range.start.line - b.range.start.line || a.range.start.column - b.range.start.column,
    ),
    dependsOn: [...dependsOn].sort(),
    unfinished: [...new Set(outcomes.flatMap((o) => (isUnfinished(o.placed.subject) ? [subjectName(o.placed.subject)] : [])))],
  };
}

function reportClaim(document: Document, outcome: BlockOutcome, index: number): ReportClaim {
  const { lines, file, program } = document;
  const { derived } = outcome.entry!;
  const { system } = derived;
  const { claims } = outcome.result!;
  const claim = claims[index]!;
  const here = { file, span: claim.span };
  const findings = describeClaim(derived, claims, index, here, outcome.diagnosis, { reading: outcome.result!.reading, language: document.language }).map((f) => reportFinding(document, f, claim));
  const { decision } = claim;
  return {
    file,
    language: program.language,
    system: system.name,
    function: subjectName(outcome.placed.subject),
    output: claim.output,
    quantity: claim.quantity,
    line: lines.position(claim.span.start).line,
    verdict: decision.verdict,
    ...(decision.verdict === 'unread'
      ? {}
      : { evidence: evidenceOf(decision) }),
    ...(decision.verdict === 'differs' ? { witness: reportWitness(system, decision.witness) } : {}),
    findings,
  };
}

/** The claims of a block whose system was not found, or was left: none of them passes in silence. */
function unresolvedClaims(document: Document, { placed, problems, cut }: BlockOutcome): ReportClaim[] {
  const { lines, file, program } = document;
  const { block, subject } = placed;
  const items = block.statements.flatMap((s) => (s.kind === 'checks' ? s.items : []));
  const reason = cut ?? problems[problems.length - 1]!.message;
  return items.flatMap((claim) => {
    const listed = claim.right.kind === 'list' || claim.right.kind === 'tuple' ? claim.right.items : undefined;
    const output = printFormula(claim.left);
    const each = listed
      ? listed.map((item, i) => [`${output}[${i + program.indexBase}]`, printFormula(item)] as const)
      : [[output, printFormula(claim.right)] as const];
    return each.map(([name, quantity]): ReportClaim => ({
      file,
      language: program.language,
      system: block.name,
      function: subjectName(subject),
      output: name,
      quantity,
      line: lines.position(claim.span.start).line,
      verdict: 'unread',
      findings: [{ code: 'unread', message: `${name} is not checked: ${reason}.`, range: lines.range(claim.span) }],
    }));
  });
}

function evidenceOf(decision: Exclude<Decision, { readonly verdict: 'unread' }>): Evidence {
  const { states, worst } = decision;
  const proof = decision.verdict === 'holds' ? decision.proof : undefined;
  if (proof?.kind === 'identity') return { kind: 'identity', states, worst, chance: proof.chance };
  return { kind: 'numeric', states, worst, ...(proof ? { inexact: proof.stopped } : {}) };
}

function reportFinding(document: Document, f: RawFinding, claim: ClaimResult): ReportClaim['findings'][number] {
  if (f.place.file === document.file) {
    const edits = f.repair?.edits.map((e) => ({ range: document.lines.range(e.span), text: e.text }));
    return {
      code: f.code,
      message: f.message,
      range: document.lines.range(f.place.span),
      ...(edits ? { repair: { title: f.repair!.title, edits, verified: true } } : {}),
    };
  }
  // Text of another file: the editor shows the claim, the report names the place.
  return { code: f.code, message: f.message, range: document.lines.range(claim.span), file: document.file };
}

function reportWitness(system: System, witness: Parameters<typeof inOrder>[1]): Witness {
  const state: Record<string, number> = Object.create(null) as Record<string, number>;
  for (const [symbol, value] of inOrder(system, witness)) state[symbolText(symbol.data as SymbolData)] = value;
  return { state, expected: witness.expected, found: witness.found };
}

function isUnfinished(subject: Subject): boolean {
  return subject.kind === 'function' && /\bsyntax error\b/.test(subject.node.opaque ?? '');
}

export function subjectName(subject: Subject): string {
  return subject.kind === 'file' ? '' : subject.path;
}

function distinct(problems: readonly Problem[]): Problem[] {
  const seen = new Set<string>();
  return problems.filter((p) => {
    const key = JSON.stringify(p);
    if (seen.has(key)) return false;
    seen.add(key);
    return true;
  });
}
