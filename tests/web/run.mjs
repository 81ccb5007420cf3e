// Runs the tests of the page, every *.test.mjs beside this file: node tests/web/run.mjs [PART OF A NAME]
// LINEWRIGHT_WASM is the build folder of the wasm kind, LINEWRIGHT_TOOLS where playwright-core is installed.
import { readdirSync } from 'node:fs';
import { run } from './harness.mjs';

const files = readdirSync(new URL('.', import.meta.url)).filter((name) => name.endsWith('.test.mjs'));
for (const name of files.sort()) {
  await import(`./${name}`);
}
const { passed, failed } = await run(process.argv[2]);
console.log(`page: ${passed} passed, ${failed} failed`);
process.exit(failed || !passed ? 1 : 0);
