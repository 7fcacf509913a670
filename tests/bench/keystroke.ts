import { spawn } from 'node:child_process';
import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import {
  createMessageConnection,
  StreamMessageReader,
  StreamMessageWriter,
  type PublishDiagnosticsParams,
} from 'vscode-languageserver-protocol/node';

/**
 * The time from a keystroke to its diagnostics, as an editor sees it: the built server as its own process, over its
 * protocol. A file of 200 lines with three systems; each edit is one character that makes a claim wrong or right again.
 */
const root = process.cwd();
const text = readFileSync(join(root, 'tests/fixtures/bench/three-systems.ts'), 'utf8');
const uri = 'file:///yard/three-systems.ts';
const places = ['const drive = F -', 'const f2 = l1 * da * da * s -', 'out[2] = r * dth * dth -'];
const warmUp = 30;
const rounds = 200;

const started = performance.now();
const server = spawn(process.execPath, [join(root, 'dist/server.mjs'), '--stdio'], { stdio: ['pipe', 'pipe', 'inherit'] });
const connection = createMessageConnection(
  new StreamMessageReader(server.stdout),
  new StreamMessageWriter(server.stdin),
);
let arrived: (params: PublishDiagnosticsParams) => void = () => undefined;
connection.onNotification('textDocument/publishDiagnostics', (params: PublishDiagnosticsParams) => arrived(params));
connection.listen();

/** Sends something and waits for the diagnostics of a version. */
function diagnosticsOf(version: number, send: () => void): Promise<PublishDiagnosticsParams> {
  return new Promise((resolve, reject) => {
    const timer = setTimeout(() => reject(new Error(`No diagnostics of version ${version}.`)), 10_000);
    arrived = (params) => {
      if (params.version !== version) return;
      clearTimeout(timer);
      resolve(params);
    };
    send();
  });
}

await connection.sendRequest('initialize', {
  processId: process.pid,
  rootUri: null,
  capabilities: { textDocument: { publishDiagnostics: { versionSupport: true } } },
});
await connection.sendNotification('initialized', {});
const textDocument = { uri, languageId: 'typescript', version: 1, text };
const first = await diagnosticsOf(1, () => void connection.sendNotification('textDocument/didOpen', { textDocument }));
const cold = performance.now() - started;
if (first.diagnostics.length > 0) {
  throw new Error(`The file is right, but has findings: ${JSON.stringify(first.diagnostics, undefined, 2)}`);
}

const times: number[] = [];
for (let round = 0; round < warmUp + rounds; round++) {
  const wrong = round % 2 === 0;
  const place = places[Math.floor(round / 2) % places.length]!;
  const at = text.indexOf(place) + place.length - 1;
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
  if (diagnostics.length > 0 !== wrong) {
    throw new Error(`Edit ${round} at "${place}" should be ${wrong ? 'wrong' : 'right'}: ${JSON.stringify(diagnostics)}`);
  }
}
times.sort((a, b) => a - b);
const quantile = (q: number): string => times[Math.min(times.length - 1, Math.floor(q * times.length))]!.toFixed(1);
console.log(
  `keystroke to diagnostics, ${text.split('\n').length - 1} lines, 3 systems, ${rounds} edits: ` +
    `p50 ${quantile(0.5)} ms, p95 ${quantile(0.95)} ms; start of the server to first diagnostics ${cold.toFixed(0)} ms`,
);

await connection.sendRequest('shutdown');
await connection.sendNotification('exit');
connection.dispose();
