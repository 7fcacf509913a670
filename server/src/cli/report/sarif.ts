import type { ReportRange } from '@visviva/shared';
import type { Fix, Location, Log, Notification, PhysicalLocation, Region, ReportingDescriptor, Result } from 'sarif';
import { version } from '@visviva/shared';
import { isAbsolute } from 'node:path';
import { codeDocs, type CodeDoc } from '../../diagnosis/codes';
import { uriOf } from '../../host/paths';
import { listFindings, type Listed } from './findings';
import { fromRoot, type Page } from './page';

/** Source: OASIS, Static Analysis Results Interchange Format (SARIF) Version 2.1.0, section 3. */
export function sarifReport(page: Page): string {
  const rules = codeDocs.map(rule);
  const log: Log = {
    $schema: 'https://docs.oasis-open.org/sarif/sarif/v2.1.0/os/schemas/sarif-schema-2.1.0.json',
    version: '2.1.0',
    runs: [
      {
        tool: { driver: { name: 'Visviva', semanticVersion: version, version, rules } },
        columnKind: 'utf16CodeUnits',
        invocations: [{ executionSuccessful: true, toolExecutionNotifications: page.report.skipped.map((s) => leftOut(page, s)) }],
        results: listFindings(page.report).map((f) => result(page, f)),
      },
    ],
  };
  return `${JSON.stringify(log, null, 2)}\n`;
}

const ruleNumbers = new Map<string, number>(codeDocs.map((d, i) => [d.code, i]));

function rule(doc: CodeDoc): ReportingDescriptor {
  const parts = [doc.meaning, `Why it matters: ${doc.why}`, `How it is found: ${doc.found}`];
  const remedy = `What to do: ${doc.remedy}`;
  return {
    id: doc.code,
    name: doc.code.split('-').map((w) => w[0]!.toUpperCase() + w.slice(1)).join(''),
    shortDescription: { text: sentence(doc.title) },
    fullDescription: { text: oneLine(doc.meaning) },
    help: {
      text: [...parts, `Example:\n${doc.example}`, remedy].join('\n\n'),
      markdown: [...parts.map(oneLine), `\`\`\`\n${doc.example}\n\`\`\``, oneLine(remedy)].join('\n\n'),
    },
    defaultConfiguration: { level: doc.code === 'unread' || doc.code === 'unused' ? 'warning' : 'error' },
    properties: { tags: ['correctness', doc.about] },
  };
}

function result(page: Page, f: Listed): Result {
  const { claim } = f;
  return {
    ruleId: f.code,
    ruleIndex: ruleNumbers.get(f.code)!,
    level: f.level,
    message: { text: f.alsoFor.length > 0 ? `${f.message} The same goes for ${f.alsoFor.join(', ')}.` : f.message },
    locations: [location(page, f)],
    ...(f.fingerprint === '' ? {} : { partialFingerprints: { 'finding/v1': f.fingerprint } }),
    ...(claim && (claim.line !== f.range.start.line || f.file !== claim.file) ? { relatedLocations: [declaration(page, claim)] } : {}),
    ...(f.repair ? { fixes: [fix(page, f)] } : {}),
    ...(f.accepted ? { suppressions: [suppression(f.accepted)] } : {}),
    ...(claim ? { properties: { system: claim.system, output: claim.output, quantity: claim.quantity, verdict: claim.verdict, ...(claim.witness ? { witness: claim.witness } : {}) } } : {}),
  };
}

function location(page: Page, f: Listed): Location {
  const name = f.claim?.function;
  return {
    physicalLocation: place(page, f.file, f.range),
    ...(name ? { logicalLocations: [{ name: name.split('.').at(-1)!, fullyQualifiedName: name, kind: 'function' }] } : {}),
  };
}

function declaration(page: Page, claim: NonNullable<Listed['claim']>): Location {
  return {
    id: 0,
    message: { text: `The claim: ${claim.output} = ${claim.quantity} of ${claim.system}.` },
    physicalLocation: { artifactLocation: artifact(page, claim.file), region: { startLine: claim.line } },
  };
}

function place(page: Page, file: string, range: ReportRange): PhysicalLocation {
  return { artifactLocation: artifact(page, file), region: region(range) };
}

/** Paths of the repository stay the same on every machine; what lies outside it has an address of its own. */
function artifact(page: Page, file: string): PhysicalLocation['artifactLocation'] & object {
  const path = fromRoot(page, file);
  if (isAbsolute(path)) return { uri: uriOf(path) };
  return { uri: path.split('/').map(encodeURIComponent).join('/'), uriBaseId: '%SRCROOT%' };
}

function region({ start, end }: ReportRange): Region {
  return { startLine: start.line, startColumn: start.column, endLine: end.line, endColumn: end.column };
}

function fix(page: Page, f: Listed): Fix {
  return {
    description: { text: f.repair!.title },
    artifactChanges: [
      {
        artifactLocation: artifact(page, f.claim!.file),
        replacements: f.repair!.edits.map((e) => ({ deletedRegion: region(e.range), insertedContent: { text: e.text } })),
      },
    ],
  };
}

function suppression(accepted: NonNullable<Listed['accepted']>): NonNullable<Result['suppressions']>[number] {
  return { kind: accepted.by === 'comment' ? 'inSource' : 'external', ...(accepted.reason ? { justification: accepted.reason } : {}) };
}

function leftOut(page: Page, s: { readonly file: string; readonly reason: string }): Notification {
  return {
    level: 'note',
    message: { text: `Left out: ${s.reason}.` },
    locations: [{ physicalLocation: { artifactLocation: artifact(page, s.file) } }],
  };
}

function oneLine(text: string): string {
  return text.replace(/\s*\n\s*/g, ' ').trim();
}

function sentence(text: string): string {
  return `${text[0]!.toUpperCase()}${text.slice(1)}.`;
}
