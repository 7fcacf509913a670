import { Ajv2020 } from 'ajv/dist/2020.js';
import addFormats from 'ajv-formats';
import type { Log, Result } from 'sarif';
import { describe, expect, it } from 'vitest';
import { Folder, RIGHT, rope, WRONG } from './support/command';
import { sarifSchema } from './support/sarif-schema';

const ajv = addFormats.default(new Ajv2020({ allErrors: true }));
const isValid = ajv.compile(sarifSchema);

function sarif(f: Folder, ...args: string[]): Log {
  const r = f.run('check', '--format', 'sarif', ...args);
  expect(r.log).toBe('');
  const log = JSON.parse(r.out) as Log;
  expect(isValid(log), JSON.stringify(isValid.errors)).toBe(true);
  return log;
}

function results(log: Log): Result[] {
  return log.runs[0]!.results!;
}

const marks = (log: Log) => results(log).map((r) => r.partialFingerprints!['finding/v1']);

describe('--format sarif', () => {
  it('meets the standard for code that differs, is unread or wrongly declared', () => {
    using f = new Folder({
      'src/wrong.ts': rope(WRONG, 'wrong'),
      'src/unread.ts': rope('lookUp(th)', 'unread'),
      'src/undeclared.ts': rope(RIGHT, 'undeclared').replace('gravity (0, -g)', 'gravity (0, -h)'),
      'src/binary.ts': new Uint8Array([64, 0, 1]),
    });
    const log = sarif(f);
    const found = results(log);
    expect(found.map((r) => r.ruleId)).toEqual(expect.arrayContaining(['sign', 'unread', 'undeclared']));
    for (const r of found) expect(log.runs[0]!.tool.driver.rules![r.ruleIndex!]!.id).toBe(r.ruleId);
    const wrong = found.find((r) => r.ruleId === 'sign')!;
    expect(wrong).toMatchObject({
      level: 'error',
      locations: [{ physicalLocation: { artifactLocation: { uri: 'src/wrong.ts', uriBaseId: '%SRCROOT%' }, region: { startLine: 10 } } }],
      properties: { system: 'wrong', output: 'return[1]', quantity: "th''" },
    });
    expect(found.find((r) => r.ruleId === 'unread')!.level).toBe('warning');
    expect(log.runs[0]!.invocations![0]!.toolExecutionNotifications![0]!.message.text).toContain('binary');
    for (const rule of log.runs[0]!.tool.driver.rules!) expect(rule.help!.text.length).toBeGreaterThan(100);
  });

  it('carries a fix that makes the claim hold when it is made', () => {
    using f = new Folder({ 'rope.ts': rope(WRONG) });
    const [change] = results(sarif(f))[0]!.fixes![0]!.artifactChanges;
    const lines = f.read('rope.ts').split('\n');
    for (const r of change!.replacements) {
      const { startLine, startColumn, endLine, endColumn } = r.deletedRegion;
      expect(endLine).toBe(startLine);
      const line = lines[startLine! - 1]!;
      lines[startLine! - 1] = line.slice(0, startColumn! - 1) + r.insertedContent!.text + line.slice(endColumn! - 1);
    }
    f.write('rope.ts', lines.join('\n'));
    expect(f.run('check').status).toBe(0);
  });

  it('names files from the root of the repository, wherever it runs, with every character escaped', () => {
    using f = new Folder({ '.git/HEAD': '', 'a b/ü#%/rope 1.ts': rope(WRONG) });
    const uri = (log: Log) => results(log)[0]!.locations![0]!.physicalLocation!.artifactLocation!.uri;
    const expected = 'a%20b/%C3%BC%23%25/rope%201.ts';
    expect(uri(sarif(f))).toBe(expected);
    expect(decodeURIComponent(expected)).toBe('a b/ü#%/rope 1.ts');
    using inside = f.inside('a b');
    expect(uri(sarif(inside))).toBe(expected);
    expect(marks(sarif(inside))).toEqual(marks(sarif(f)));
  });

  it('keeps its fingerprints when lines move and blanks change, not when the fault changes', () => {
    using f = new Folder({ 'rope.ts': rope(WRONG) });
    const before = marks(sarif(f));
    expect(before).toHaveLength(1);
    f.write('rope.ts', `// one\n// two\n\n${rope(WRONG.replace('g / l', 'g/l'))}`);
    expect(marks(sarif(f))).toEqual(before);
    f.write('rope.ts', rope('-2 * (g / l) * Math.sin(th)'));
    expect(marks(sarif(f))).not.toEqual(before);
  });

  it('tells equal findings of two functions apart', () => {
    using f = new Folder({ 'rope.ts': rope(WRONG, 'one') + rope(WRONG, 'two').replace('rates', 'others') });
    expect(new Set(marks(sarif(f))).size).toBe(2);
  });
});
