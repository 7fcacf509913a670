import { spawn } from 'node:child_process';
import { fileURLToPath } from 'node:url';
import { describe, expect, it } from 'vitest';
import { codeDocs } from '../../server/src/diagnosis/codes';
import { Folder, RIGHT, rope, visviva } from './support/command';

const here = fileURLToPath(new URL('.', import.meta.url));

describe('visviva explain', () => {
  it('lists all codes', () => {
    const r = visviva(here, 'explain');
    expect(r.status).toBe(0);
    for (const d of codeDocs) expect(r.out).toContain(`  ${d.code}`);
  });

  it.each(codeDocs.map((d) => [d.code]))('%s', (code) => {
    const doc = codeDocs.find((d) => d.code === code)!;
    for (const part of [doc.meaning, doc.why, doc.found, doc.example, doc.remedy]) expect(part.trim()).not.toBe('');
    expect(doc.title).not.toMatch(/\.$/);
  });

  it('tells about one, and ends with 2 for an unknown one', () => {
    const r = visviva(here, 'explain', 'missing-term');
    expect(r.out).toContain('missing-term: a term of the derived equation is not in the code\n\nWhat it means\n  All terms');
    const unknown = visviva(here, 'explain', 'nonsense');
    expect(unknown.status).toBe(2);
    expect(unknown.log).toContain('There is no code "nonsense".');
  });
});

describe('visviva derive', () => {
  it('prints the equations as text, TeX and code', () => {
    using f = new Folder({ 'rope.ts': rope(RIGHT) });
    const text = f.run('derive', 'rope.ts');
    expect(text.status).toBe(0);
    expect(text.out).toContain("m*l^2*th'' + m*g*l*sin(th) = 0");
    expect(f.run('derive', 'rope.ts', '--as', 'tex').out).toContain('\\ddot{\\mathit{th}}');
    expect(f.run('derive', 'rope.ts', '--as', 'typescript').out).toContain('Math.sin(th)');
  });

  it('says what is missing', () => {
    using f = new Folder({ 'rope.ts': rope(RIGHT), 'empty.ts': '' });
    expect(f.run('derive', 'empty.ts')).toMatchObject({ status: 1, out: '', log: 'empty.ts declares no system.\n' });
    expect(f.run('derive', 'rope.ts', '--system', 'x')).toMatchObject({ status: 2, out: '' });
    expect(f.run('derive', 'gone.ts').status).toBe(2);
    expect(f.run('derive', '.').status).toBe(2);
  });
});

describe('visviva serve', () => {
  it('speaks the protocol on standard input and output', async () => {
    const command = fileURLToPath(new URL('../../dist/visviva.mjs', import.meta.url));
    const server = spawn(process.execPath, [command, 'serve', '--stdio'], { stdio: ['pipe', 'pipe', 'inherit'] });
    const send = (message: object) => {
      const body = JSON.stringify({ jsonrpc: '2.0', ...message });
      server.stdin.write(`Content-Length: ${Buffer.byteLength(body)}\r\n\r\n${body}`);
    };
    const answer = new Promise<string>((resolve) => {
      let all = '';
      server.stdout.on('data', (d: Buffer) => {
        all += d.toString();
        if (all.includes('"capabilities"')) resolve(all);
      });
    });
    send({ id: 1, method: 'initialize', params: { processId: null, rootUri: null, capabilities: {} } });
    expect(await answer).toContain('hoverProvider');
    const ended = new Promise<number | null>((resolve) => server.on('exit', resolve));
    send({ id: 2, method: 'shutdown' });
    send({ method: 'exit' });
    expect(await ended).toBe(0);
  });

  it('asks for the transport', () => {
    expect(visviva(here, 'serve').status).toBe(2);
  });
});
