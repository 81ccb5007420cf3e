// The page's shell: it starts, from a server and from disk, and says so in words where it cannot.
import { expect, openPage, sizes, test, until } from './harness.mjs';

for (const single of [false, true]) {
  const place = single ? 'one file on disk with the network off' : 'a static server';
  test(`starts from ${place}`, async () => {
    const page = await openPage({ single });
    const gone = await page.page.evaluate(() => document.getElementById('notice').hidden);
    expect(gone, 'the loading words are still there');
    expect((await page.items()).length > 0, 'there is no widget on the page');
    const build = await page.page.evaluate(() => linewright.build());
    expect(build.includes('-ffp-contract=off'), `the build is ${build}`);
  });
}

test('fills the window at every size', async () => {
  for (const [name, size] of Object.entries(sizes)) {
    const page = await openPage({ size });
    const { width, height } = size.viewport;
    const drawn = await page.page.evaluate(() => [canvas.width, canvas.height]);
    expect(drawn[0] === width && drawn[1] === height, `${name}: the canvas has ${drawn}`);
    await page.screenshot(`start-${name}`);
  }
});

test('draws sharply on a screen of two pixels to one', async () => {
  const page = await openPage({ size: { ...sizes.laptop, deviceScaleFactor: 2 } });
  const drawn = await page.page.evaluate(() => [canvas.width, canvas.height]);
  expect(drawn[0] === 2560 && drawn[1] === 1600, `the canvas has ${drawn}`);
});

test('follows the window when its size changes', async () => {
  const page = await openPage();
  await page.page.setViewportSize({ width: 1000, height: 700 });
  await until(() => page.page.evaluate(() => canvas.width === 1000 && canvas.height === 700), 'the new size');
});

test('says in words that WebGL 2 is missing', async () => {
  const page = await openPage({
    started: false,
    init: () => { HTMLCanvasElement.prototype.getContext = () => null; },
  });
  const words = () => page.page.evaluate(() => document.getElementById('words')?.textContent ?? '');
  await until(async () => (await words()).includes('WebGL 2'), 'words about WebGL 2');
});

test('draws nothing while nothing happens', async () => {
  const page = await openPage();
  const frames = () => page.page.evaluate(() => linewright.measured.frames);
  await page.page.mouse.move(640, 400);
  // After the last event come a few frames and two looks for tooltips; 60 refreshes later it must have
  // stopped.
  const refreshes = (n) => page.page.evaluate((count) => new Promise((done) => {
    const next = (left) => (left ? requestAnimationFrame(() => next(left - 1)) : done());
    next(count);
  }), n);
  await refreshes(60);
  const before = await frames();
  await refreshes(30);
  expect(await frames() === before, `${await frames() - before} frames in half a second of rest`);
});

test('leaves the browser its shortcuts', async () => {
  const page = await openPage();
  const prevented = (code, key, modifiers) => page.page.evaluate((given) => {
    const event = new KeyboardEvent('keydown', { cancelable: true, bubbles: true, ...given });
    document.getElementById('keys').dispatchEvent(event);
    return event.defaultPrevented;
  }, { code, key, ...modifiers });
  const theirs = [
    ['F5', 'F5', {}], ['KeyR', 'r', { ctrlKey: true }], ['KeyT', 't', { ctrlKey: true }],
    ['KeyL', 'l', { metaKey: true }], ['ArrowLeft', 'ArrowLeft', { altKey: true }],
  ];
  for (const [code, key, modifiers] of theirs) {
    const kept = await prevented(code, key, modifiers);
    expect(!kept, `${key} with ${JSON.stringify(modifiers)} does not reach the browser`);
  }
  expect(await prevented('KeyS', 's', { ctrlKey: true }), 'Ctrl+S opens the browser\'s own dialog as well');
});
