/** Prints "PASSED FAILED" from a suite's result file and exit status, for `.ci/run`. */
import { existsSync, readFileSync } from 'node:fs';

const [file, status] = process.argv.slice(2);
const found = existsSync(file) ? JSON.parse(readFileSync(file, 'utf8')) : {};
const passed = found.numPassedTests ?? 0;
const failed = found.numFailedTests ?? 0;
// A suite that crashed, stopped early or ran nothing counts as one failure, whatever its file says.
const silent = failed === 0 && (Number(status) !== 0 || passed === 0) ? 1 : 0;
console.log(`${passed} ${failed + silent}`);
