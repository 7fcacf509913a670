/**
 * Tests in a real editor: a suite inside its extension host, and a person's way through the user interface with the
 * packed extension. `npm run test:editor [suite|screen|panel]`.
 */
import { buildAll } from '../../scripts/build.mjs';
import { installEditorHost } from './host/install.mjs';
import { runInEditor } from './in-editor.mjs';
import { runOnScreen } from './on-screen.mjs';
import { runPanelPage } from './panel-page.mjs';
import { Results } from './results.mjs';

const wanted = process.argv[2];
const results = new Results();
try {
  await buildAll();
  if (wanted === undefined || wanted === 'panel') await runPanelPage(results);
  if (wanted !== 'panel') installEditorHost();
  if (wanted === undefined || wanted === 'suite') await runInEditor(results);
  if (wanted === undefined || wanted === 'screen') await runOnScreen(results);
} catch (error) {
  results.fail('the editor', error instanceof Error ? (error.stack ?? error.message) : String(error));
}
results.finish();
