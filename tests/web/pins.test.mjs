// Same bits in the page: every scenario gives the pinned trace in Chromium, and a link made here runs
// natively alike.
import { execFileSync } from 'node:child_process';
import { existsSync, mkdtempSync, readFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { expect, openPage, test, until } from './harness.mjs';

const root = fileURLToPath(new URL('../..', import.meta.url));
const native = process.env.LINEWRIGHT_COMMAND ?? join(root, 'build/native/linewright');
const pins = readFileSync(join(root, 'tests/pins.txt'), 'utf8').split('\n')
  .filter((line) => /^[a-z]/.test(line))
  .map((line) => line.split(/\s+/))
  .map(([name, outcome, steps, hash]) => ({ name, outcome, steps, hash }));

// Tall enough for the whole of the last step, where the figures stand.
const tall = { viewport: { width: 1800, height: 1700 } };

// What a user does: drops the file on the page.
async function drop(page, name, text) {
  await page.page.evaluate(([file, bytes]) => {
    const carried = new DataTransfer();
    carried.items.add(new File([bytes], file));
    for (const type of ['dragover', 'drop']) {
      window.dispatchEvent(new DragEvent(type, { dataTransfer: carried, bubbles: true, cancelable: true }));
    }
  }, [name, text]);
}

// The widget whose hidden name is this; what it shows stands before ##.
const shown = (items, hidden) =>
  items.find((item) => item.label.endsWith(`##${hidden}`))?.label.split('##')[0];

async function driven(page) {
  const items = await page.items();
  return { steps: shown(items, 'Steps'), hash: shown(items, 'Trace hash') };
}

// Where the page's trace first leaves the one of the command line: step, field and both values.
async function firstDifference(page, scenario) {
  if (!existsSync(native)) return `for step and field, build the native kind: ${native} is missing`;
  const file = join(mkdtempSync(join(tmpdir(), 'linewright-')), 'trace.csv');
  execFileSync(native, ['drive', join(root, `scenarios/${scenario}.toml`), '--trace', file]);
  const [saved] = await Promise.all([page.page.waitForEvent('download'), page.click('Save trace')]);
  const [ours, theirs] = [await saved.path(), file].map((path) => readFileSync(path, 'utf8').split('\n'));
  const step = ours.findIndex((row, i) => row !== theirs[i]);
  if (step < 0) return 'the traces agree with the command line here, so the pin is of another build';
  const [a, b] = [ours[step].split(','), (theirs[step] ?? '').split(',')];
  const field = a.findIndex((value, i) => value !== b[i]);
  return `step ${step - 1}, ${ours[0].split(',')[field]}: ${a[field]} in the page, ${b[field]} natively`;
}

for (const single of [false, true]) {
  test(`every scenario has its pinned trace in the page${single ? ' that is one file' : ''}`, async () => {
    expect(pins.length >= 14, `there are only ${pins.length} pins`);
    const page = await openPage({ single, size: tall });
    await page.click('Hand over');
    for (const { name, steps, hash } of pins) {
      await drop(page, `${name}.toml`, readFileSync(join(root, `scenarios/${name}.toml`), 'utf8'));
      let got;
      try {
        await until(async () => (got = await driven(page)).hash === hash && got.steps === steps, name, 5000);
      } catch {
        throw new Error(`${name}: pinned ${steps} steps, ${hash}; ` +
                        `the page drives ${got.steps}, ${got.hash}: ` +
                        await firstDifference(page, name));
      }
    }
  });
}

test('a link made in the page runs natively with the same bits', async () => {
  if (!existsSync(native)) throw new Error(`${native} is missing: build the native kind first`);
  const page = await openPage({ single: true, size: tall });
  await page.click('Hand over');
  const before = await driven(page);
  const line = await page.find('controller.kp line');
  await page.drag([line.x + 20, line.y + line.height / 2], [[5, 0], [9, 0]]);
  const fragment = await page.page.evaluate(() => location.hash);
  const here = await driven(page);
  expect(here.hash !== before.hash, 'the gain did not change the drive');
  const call = ['drive', '--json', `linewright.html${fragment}`];
  const there = JSON.parse(execFileSync(native, call, { encoding: 'utf8' }));
  expect(there.trace_hash === here.hash && String(there.steps) === here.steps,
         `the page drives ${here.hash} in ${here.steps} steps, ` +
         `the command line ${there.trace_hash} in ${there.steps}`);
});
