#!/usr/bin/env node
import { readFileSync } from 'node:fs';
import pc from 'picocolors';
import { run } from './command';
import { harmless } from './report/width';

// A reader that has seen enough, as in `visviva check | head`, is no failure of ours.
process.stdout.on('error', (error: NodeJS.ErrnoException) => {
  if (error.code !== 'EPIPE') throw error;
  process.exit();
});

const status = await run(process.argv.slice(2), {
  out: (text) => process.stdout.write(text),
  log: (text) => process.stderr.write(`${text}\n`),
  status: (line) => void process.stderr.write(`\r\u001b[K${harmless(line)}`),
  input: () => readFileSync(0, 'utf8'),
  folder: process.cwd(),
  isWatched: process.stderr.isTTY === true && !process.env['CI'],
  environment: process.env,
  colour: pc.isColorSupported && process.stdout.isTTY === true,
});
if (status !== undefined) process.exitCode = status;
