/**
 * Tests in a real editor: a suite inside its extension host, and a person's way through the user interface with the
 * packed extension. `npm run test:editor [suite|screen]`.
 */
import { buildAll } from '../../scripts/build.mjs';
import { installEditorHost } from './host/install.mjs';
import { runInEditor } from './in-editor.mjs';
import { runOnScreen } from './on-screen.mjs';
import { Results } from './results.mjs';

const wanted = process.argv[2];
const results = new Results();
try {
  installEditorHost();
  if (wanted !== 'screen') {
    await buildAll();
    await runInEditor(results);
  }
  if (wanted !== 'suite') await runOnScreen(results);
} catch (error) {
  results.fail('the editor', error instanceof Error ? (error.stack ?? error.message) : String(error));
}
results.finish();
