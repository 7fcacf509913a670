import { parseDocument } from 'htmlparser2';
import { findAll, getAttributeValue, textContent } from 'domutils';
import type { Element } from 'domhandler';
import { describe, expect, it } from 'vitest';
import { Folder, RIGHT, rope, WRONG } from './support/command';

function xmlOf(text: string): { all(name: string): Element[] } {
  const root = parseDocument(text, { xmlMode: true });
  return { all: (name) => findAll((e) => e.name === name, root.children) };
}

const FOLDER = {
  'right.ts': rope(RIGHT, 'right'),
  'wrong.ts': rope(WRONG, 'wrong'),
  'unread.ts': rope('lookUp(th)', 'unread'),
};

describe('--format junit', () => {
  it('has one test case per claim: failures differ, errors are unread', () => {
    using f = new Folder(FOLDER);
    const r = f.run('check', '--format', 'junit');
    expect(r.status).toBe(1);
    const xml = xmlOf(r.out);
    const cases = xml.all('testcase');
    expect(cases).toHaveLength(6);
    expect(getAttributeValue(xml.all('testsuites')[0]!, 'failures')).toBe('1');
    expect(getAttributeValue(xml.all('testsuites')[0]!, 'errors')).toBe('1');
    expect(xml.all('testsuite').map((s) => getAttributeValue(s, 'name'))).toEqual(['right.ts', 'unread.ts', 'wrong.ts']);
    const failed = xml.all('failure')[0]!;
    expect(getAttributeValue(failed, 'type')).toBe('sign');
    expect(getAttributeValue(failed.parent as Element, 'name')).toBe("rates: return[1] = th''");
    expect(textContent(failed)).toContain('wrong.ts:10:');
    expect(getAttributeValue(xml.all('error')[0]!, 'message')).toContain('lookUp');
  });

  it('stays well formed with hostile names', () => {
    using f = new Folder({ 'a&<b>"\u0001.ts': rope(WRONG) });
    const r = f.run('check', '--format', 'junit');
    expect(r.out).not.toContain('\u0001');
    expect(getAttributeValue(xmlOf(r.out).all('testsuite')[0]!, 'name')).toBe('a&<b>"\ufffd.ts');
  });
});

describe('--format markdown', () => {
  it('tells the summary, a row per function, each finding with its repair, and the equations', () => {
    using f = new Folder(FOLDER);
    const { out } = f.run('check', '--format', 'markdown');
    expect(out).toContain('3 files, 3 systems, 6 claims: 4 hold, 1 differs, 1 not read.');
    expect(out).toContain('| ❌ | `wrong` | `rates` | 1 of 2 claims differs | `wrong.ts:7` |');
    expect(out).toContain('| ✅ | `right` | `rates` | 2 claims hold | `right.ts:7` |');
    expect(out).toMatch(/```diff\n-.*\(g \/ l\).*\n\+.*-\(g \/ l\).*\n```/);
    expect(out).toMatch(/```text\nm\*l\^2\*th'' \+ m\*g\*l\*sin\(th\) = 0\n/);
    expect(out).toMatch(/```math\n.*\\ddot.*\\sin/);
    expect(out.match(/<details/g)).toHaveLength(out.match(/<\/details>/g)!.length);
  });

  it('keeps hostile names from becoming marks, and stays within what services take', () => {
    const files: Record<string, string> = { 'a|b`<img src=x>.ts': rope(WRONG) };
    for (let i = 0; i < 120; i++) files[`many/rope${i}.ts`] = rope(WRONG, `rope-${i}`);
    using f = new Folder(files);
    const { out } = f.run('check', '--format', 'markdown');
    const outsideCode = out.replace(/(?<!`)(`+)(?!`)[^]*?(?<!`)\1(?!`)/g, '');
    expect(outsideCode.includes('<img')).toBe(false);
    expect(out).toContain('&lt;img');
    expect(out.length).toBeLessThan(65_000);
    expect(out).toMatch(/\d+ further sections are left out here/);
  });

  it('says so when all is well', () => {
    using f = new Folder({ 'right.ts': rope(RIGHT) });
    expect(f.run('check', '--format', 'markdown').out).toContain('### Visviva: Code and declared physics agree');
  });
});

describe('annotations', () => {
  const hostile = { 'a,b%:c.ts': rope(WRONG), 'unread.ts': rope('lookUp(th)', 'other') };

  it('are workflow commands on GitHub Actions', () => {
    using f = new Folder(hostile);
    const r = f.run('check', '--format', 'github');
    const lines = r.out.trimEnd().split('\n');
    expect(lines).toHaveLength(2);
    expect(lines[0]).toMatch(/^::error file=a%2Cb%25%3Ac\.ts,line=10,endLine=10,col=\d+,endColumn=\d+,title=Visviva%3A sign::th''/);
    expect(lines[1]).toMatch(/^::warning file=unread\.ts,line=10,/);
  });

  it('are logging commands on Azure Pipelines', () => {
    using f = new Folder({ 'a;b].ts': rope(WRONG) });
    const [line] = f.run('check', '--format', 'azure').out.split('\n');
    expect(line).toMatch(/^##vso\[task\.logissue type=error;sourcepath=[^;\]]*\/a%3Bb%5D\.ts;linenumber=10;columnnumber=\d+;code=sign;\]th''/);
  });

  it('are service messages on TeamCity', () => {
    using f = new Folder({ "a'b|c[é].ts": rope(WRONG) });
    const lines = f.run('check', '--format', 'teamcity').out.trimEnd().split('\n');
    expect(lines[0]).toMatch(/^##teamcity\[inspectionType id='sign' name='.*' description='.*' category='Visviva'\]$/);
    expect(lines[1]).toContain("typeId='sign' message='th|'|': ");
    expect(lines[1]).toContain("file='a|'b||c|[|0x00e9|].ts' line='10' SEVERITY='ERROR']");
  });

  it('are a Code Quality report on GitLab', () => {
    using f = new Folder(hostile);
    const issues = JSON.parse(f.run('check', '--format', 'gitlab').out) as Record<string, unknown>[];
    expect(issues).toHaveLength(2);
    expect(issues[0]).toMatchObject({ check_name: 'visviva-sign', severity: 'critical', location: { path: 'a,b%:c.ts', lines: { begin: 10, end: 10 } } });
    expect(new Set(issues.map((i) => i['fingerprint'])).size).toBe(2);
  });

  it('suit the system that the command runs on', () => {
    using f = new Folder({ 'rope.ts': rope(WRONG) });
    const on = (variable: string) => f.runWith({ [variable]: 'true' }, 'check', '--format', 'annotations').out;
    expect(on('GITHUB_ACTIONS')).toMatch(/^::error /);
    expect(on('TF_BUILD')).toMatch(/^##vso/);
    expect(on('TEAMCITY_VERSION')).toMatch(/^##teamcity/);
    const nowhere = f.run('check', '--format', 'annotations');
    expect(nowhere.status).toBe(2);
    expect(nowhere.log).toContain('Name the format instead');
  });
});
