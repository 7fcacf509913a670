import { spawn } from 'node:child_process';
import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import {
  createMessageConnection,
  StreamMessageReader,
  StreamMessageWriter,
  type PublishDiagnosticsParams,
} from 'vscode-languageserver-protocol/node';
import { megabytes, quantile, report, type Row } from './measure';

/**
 * The time from a keystroke to its diagnostics, as an editor sees it: the built server as its own process, over its
 * protocol, on files of 1, 10 and 50 claims. Each edit is one character that makes a claim wrong or right again. Wall time:
 * it grows with whatever else the machine does.
 */
const warmUp = 20;
const rounds = Number(process.env['ROUNDS'] ?? 150);

/** A file with so many claims: pendulums, each with a function of its own. */
function source(claims: number): string {
  return Array.from(
    { length: claims },
    (_, k) => `/**
 * @visviva swing-${k}
 * coordinates th [rad]
 * parameters  m, l, g > 0, c >= 0
 * point bob: mass m at (l*sin(th), -l*cos(th))
 * gravity (0, -g)
 * D = 1/2*c*th'^2
 * checks return = th''
 */
export function swing${k}(th: number, thd: number, m: number, l: number, g: number, c: number): number {
  const pull = g * Math.sin(th) / l;
  return -pull - c * thd / (m * l * l);
}
`,
  ).join('\n');
}

async function measure(claims: number): Promise<Row> {
  const text = source(claims);
  const uri = `file:///yard/swings-${claims}.ts`;
  const started = performance.now();
  const server = spawn(process.execPath, [join(process.cwd(), 'dist/server.mjs'), '--stdio'], { stdio: ['pipe', 'pipe', 'inherit'] });
  const connection = createMessageConnection(new StreamMessageReader(server.stdout), new StreamMessageWriter(server.stdin));
  let arrived: (params: PublishDiagnosticsParams) => void = () => undefined;
  connection.onNotification('textDocument/publishDiagnostics', (params: PublishDiagnosticsParams) => arrived(params));
  connection.listen();
  const diagnosticsOf = (version: number, send: () => void): Promise<PublishDiagnosticsParams> =>
    new Promise((resolve, reject) => {
      const timer = setTimeout(() => reject(new Error(`No diagnostics of version ${version}.`)), 60_000);
      arrived = (params) => {
        if (params.version !== version) return;
        clearTimeout(timer);
        resolve(params);
      };
      send();
    });
  await connection.sendRequest('initialize', {
    processId: process.pid,
    rootUri: null,
    // What is measured is the time, on a busy machine too.
    initializationOptions: { timeLimit: 60_000 },
    capabilities: { textDocument: { publishDiagnostics: { versionSupport: true } } },
  });
  await connection.sendNotification('initialized', {});
  const textDocument = { uri, languageId: 'typescript', version: 1, text };
  const first = await diagnosticsOf(1, () => void connection.sendNotification('textDocument/didOpen', { textDocument }));
  const cold = performance.now() - started;
  if (first.diagnostics.length > 0) throw new Error(`The file is right, but has findings: ${JSON.stringify(first.diagnostics, undefined, 2)}`);

  const place = 'return -';
  const times: number[] = [];
  for (let round = 0; round < warmUp + rounds; round++) {
    const wrong = round % 2 === 0;
    let at = -1;
    for (let k = 0; k <= Math.floor(round / 2) % claims; k++) at = text.indexOf(place, at + 1);
    at += place.length - 1;
    const line = text.slice(0, at).split('\n').length - 1;
    const character = at - (text.lastIndexOf('\n', at) + 1);
    const range = { start: { line, character }, end: { line, character: character + 1 } };
    const before = performance.now();
    const { diagnostics } = await diagnosticsOf(round + 2, () => {
      void connection.sendNotification('textDocument/didChange', {
        textDocument: { uri, version: round + 2 },
        contentChanges: [{ range, text: wrong ? '+' : '-' }],
      });
    });
    if (round >= warmUp) times.push(performance.now() - before);
    if (diagnostics.length > 0 !== wrong) throw new Error(`Edit ${round} should be ${wrong ? 'wrong' : 'right'}: ${JSON.stringify(diagnostics)}`);
  }
  const memory = memoryOf(server.pid!);
  await connection.sendRequest('shutdown');
  await connection.sendNotification('exit');
  connection.dispose();
  return [String(claims), ...[0.5, 0.95, 0.99].map((q) => quantile(times, q).toFixed(1)), cold.toFixed(0), memory];
}

/** The most memory a process has had; only Linux tells. */
function memoryOf(pid: number): string {
  try {
    const [, kilobytes] = /VmHWM:\s+(\d+)/.exec(readFileSync(`/proc/${pid}/status`, 'utf8'))!;
    return megabytes(Number(kilobytes) * 1024);
  } catch {
    return '-';
  }
}

const rows: Row[] = [];
for (const claims of [1, 10, 50]) rows.push(await measure(claims));
report('keystroke', 'From a keystroke to its diagnostics', ['claims', 'p50 ms', 'p95 ms', 'p99 ms', 'start to first diagnostics ms', 'peak memory'], rows, [
  'Through the protocol, wall time.',
]);
