import { createConnection, ProposedFeatures } from 'vscode-languageserver/node';
import { createService } from '../service/index';
import { describe } from './checker';
import { serve } from './server';

// The transport is chosen by the command line: --stdio, --node-ipc, --pipe=NAME or --socket=PORT.
const connection = createConnection(ProposedFeatures.all);

// A fault in one task must not take the editor's other files with it.
process.on('uncaughtException', (error) => connection.console.error(`Unexpected failure: ${describe(error)}`));
process.on('unhandledRejection', (error) => connection.console.error(`Unexpected failure: ${describe(error)}`));

serve(connection, createService);
