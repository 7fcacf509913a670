import { existsSync } from 'node:fs';
import { createConnection, ProposedFeatures } from 'vscode-languageserver/node';
import { createService } from '../service/index';
import { describe } from './checker';
import { serve } from './server';
import { inAnotherThread } from './working/service';

// The transport is chosen by the command line: --stdio, --node-ipc, --pipe=NAME or --socket=PORT.
const connection = createConnection(ProposedFeatures.all);

// A fault in one task must not take the editor's other files with it.
process.on('uncaughtException', (error) => connection.console.error(`Unexpected failure: ${describe(error)}`));
process.on('unhandledRejection', (error) => connection.console.error(`Unexpected failure: ${describe(error)}`));

// Beside the bundle, or one above the chunks; without it checks run in this thread.
const worker = ['./check-worker.mjs', '../check-worker.mjs'].map((path) => new URL(path, import.meta.url)).find((url) => existsSync(url));

serve(connection, (files, folders) => (worker ? inAnotherThread(createService(files), folders, worker) : createService(files)));
