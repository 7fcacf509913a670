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
installEditorHost();
const results = new Results();
if (wanted !== 'screen') {
  await buildAll();
  await runInEditor(results);
}
if (wanted !== 'suite') await runOnScreen(results);
results.finish();
