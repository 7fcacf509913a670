import type { ReportClaim, ReportRange } from '@visviva/shared';
import type { DocumentSymbol, FileDetails, FileResult, Files, Hover, Service } from '../../../server/src/service/api';
import type { Budget } from '../../../server/src/text/budget';

/**
 * A service that finds what the text tells it to, so that the wiring can be tested by itself. Words in the text: `sign`
 * is a differing claim's finding at that word, `unread` an unread one, `throw` makes the check fail, `slow` makes it take
 * 60 ms, `heavy` makes it use up 70 ms of its budget and be unread if that is too much, `needs:FILE` makes the result depend on another file.
 */
export class ScriptedService implements Service {
  readonly texts = new Map<string, string>();
  readonly checked: string[] = [];
  readonly stopped: string[] = [];
  readonly readings = 0;

  constructor(readonly files: Files) {}

  update(file: string, text: string): void {
    this.texts.set(file, text);
  }
  close(file: string): void {
    this.texts.delete(file);
  }
  invalidate(): void {}
  handles(file: string): boolean {
    return /\.(ts|js|visviva)$/.test(file);
  }
  async prepare(): Promise<void> {}
  async guards(): Promise<[]> {
    return [];
  }
  async details(): Promise<FileDetails> {
    return { systems: [], claims: [] };
  }

  async check(file: string, budget: Budget): Promise<FileResult> {
    const text = this.textOf(file);
    const told = text.replace('\n@visviva', '');
    this.checked.push(told);
    if (text.includes('slow')) {
      for (let i = 0; i < 6; i++) {
        await new Promise((done) => setTimeout(done, 10));
        if (!budget.look()) {
          this.stopped.push(told);
          break;
        }
      }
    }
    if (text.includes('heavy')) {
      const start = performance.now();
      while (performance.now() - start < 70 && budget.look());
      if (budget.why) return { ...empty(file), claims: [claim(file, 'unread', rangeAt(text, 0, 5))] };
    }
    if (text.includes('throw')) throw new Error('the scripted failure');
    const dependsOn = [...text.matchAll(/needs:(\S+)/g)].map((match) => match[1]!);
    const seen = [text, ...dependsOn.map((other) => this.textOf(other))].join('\n');
    return {
      file,
      language: 'typescript',
      systems: [],
      claims: [
        ...[...seen.matchAll(/sign/g)].map((match) => claim(file, 'differs', rangeAt(seen, match.index, 4))),
        ...[...seen.matchAll(/unread/g)].map((match) => claim(file, 'unread', rangeAt(seen, match.index, 6))),
      ],
      problems: [],
      dependsOn,
      unfinished: [],
    };
  }

  hovers(): Promise<readonly never[]> {
    return Promise.resolve([]);
  }

  async hover(file: string): Promise<Hover | undefined> {
    if (this.textOf(file).includes('throw')) throw new Error('the scripted failure');
    return { markdown: '**crane** has `th\'\'`', range: rangeAt(this.textOf(file), 0, 3), formulas: [] };
  }

  async symbols(file: string): Promise<readonly DocumentSymbol[]> {
    const range = rangeAt(this.textOf(file), 0, 3);
    const leaf: DocumentSymbol = { name: 'th', detail: 'rad', kind: 'coordinate', range, nameRange: range, children: [] };
    return [{ name: 'crane', detail: 'system', kind: 'system', range, nameRange: range, children: [leaf] }];
  }

  async lenses(): Promise<readonly []> {
    return [];
  }

  async inlays(): Promise<readonly []> {
    return [];
  }

  async panel(): Promise<undefined> {}

  async workspaceSymbols(): Promise<readonly []> {
    return [];
  }

  async complete(): Promise<readonly []> {
    return [];
  }

  async signature(): Promise<undefined> {}

  async folds(): Promise<readonly []> {
    return [];
  }

  async tokens(): Promise<readonly []> {
    return [];
  }

  async definition(): Promise<undefined> {}

  async references(): Promise<undefined> {}

  async rename(): Promise<{ readonly failure: string }> {
    return { failure: 'scripted' };
  }

  async rewrites(): Promise<readonly []> {
    return [];
  }

  async derive(): Promise<readonly []> {
    return [];
  }

  async suggest(): Promise<readonly []> {
    return [];
  }

  async compare(): Promise<{ readonly comparisons: readonly [] }> {
    return { comparisons: [] };
  }

  private textOf(file: string): string {
    return this.texts.get(file) ?? this.files.read(file) ?? '';
  }
}

function empty(file: string): FileResult {
  return { file, language: 'typescript', systems: [], claims: [], problems: [], dependsOn: [], unfinished: [] };
}

function claim(file: string, verdict: 'differs' | 'unread', range: ReportRange): ReportClaim {
  const code = verdict === 'differs' ? 'sign' : 'unread';
  return {
    file,
    language: 'typescript',
    system: 'crane',
    function: 'rates',
    output: 'return[3]',
    quantity: "th''",
    line: 1,
    verdict,
    findings: [{ code, message: `scripted ${code}`, range }],
  };
}

function rangeAt(text: string, offset: number, length: number): ReportRange {
  const before = text.slice(0, offset).split('\n');
  const position = { line: before.length, column: before.at(-1)!.length + 1 };
  return { start: position, end: { line: position.line, column: position.column + length } };
}
