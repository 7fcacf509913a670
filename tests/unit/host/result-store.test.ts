import { mkdtempSync, readdirSync, readFileSync, realpathSync, rmSync, utimesSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import { ResultStore, type Stored } from '../../../server/src/host/result-store';

let folder: string;
beforeEach(() => {
  folder = realpathSync(mkdtempSync(join(tmpdir(), 'visviva-store-')));
});
afterEach(() => rmSync(folder, { recursive: true, force: true }));

const entry = (result: string): Stored<string> => ({ reads: { 'a.ts': 'x', 'b.ts': null }, declaring: null, result });
const open = (maker = '1'): ResultStore<string> => new ResultStore(join(folder, 'cache'), maker);
const files = (): string[] => readdirSync(join(folder, 'cache')).map((f) => join(folder, 'cache', f));

describe('results on disk', () => {
  test('are found again, by what they are about and what made them', () => {
    open().add('subject', entry('held'));
    expect(open().find('subject')).toEqual(entry('held'));
    expect(open().find('other')).toBeUndefined();
    expect(open('2').find('subject')).toBeUndefined();
  });

  test('are not believed once damaged, cut or swapped', () => {
    open().add('subject', entry('held'));
    open().add('other', entry('differs'));
    const [first, second] = files() as [string, string];
    const whole = readFileSync(first, 'utf8');
    for (const damaged of ['', '\n', whole.slice(0, -1), whole.slice(0, 20), whole.replace('x', 'y'), readFileSync(second, 'utf8')]) {
      writeFileSync(first, damaged);
      const found = [open().find('subject'), open().find('other')].filter((x) => x !== undefined);
      expect(found).toHaveLength(1);
    }
    open().add('subject', entry('held'));
    open().add('other', entry('differs'));
    expect(open().find('subject')).toEqual(entry('held'));
  });

  test('stay within bounds, the longest unused going first, and leave no other files behind', () => {
    const store = open();
    for (let k = 0; k < 10; k++) {
      store.add(`subject ${k}`, entry(String(k)));
      const at = 1_000_000 + k;
      for (const f of files()) if (readFileSync(f, 'utf8').endsWith(`"result":"${k}"}`)) utimesSync(f, at, at);
    }
    store.prune(4);
    expect(files()).toHaveLength(4);
    expect([6, 7, 8, 9].map((k) => open().find(`subject ${k}`)?.result)).toEqual(['6', '7', '8', '9']);
  });

  test('a folder that cannot be written does no harm', () => {
    writeFileSync(join(folder, 'cache'), 'a file');
    expect(() => {
      const store = open();
      store.add('subject', entry('held'));
      store.prune();
    }).not.toThrow();
    expect(open().find('subject')).toBeUndefined();
  });
});
