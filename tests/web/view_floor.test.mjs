// The floor in a real browser, by mouse and by finger.
import { test, openPage, expect, sizes } from './harness.mjs';

// Places on the floor as shares of its free part, between the tool's settings above and the legend below.
async function onFloor(page) {
  const { x, y, width, height } = await page.find('surface');
  return (across, down) => [x + 40 + across * (width - 80), y + 20 + down * (height - 90)];
}

const ring = (turns) => Array.from({ length: 49 }, (_, i) => {
  const angle = turns * 2 * Math.PI * i / 48;
  return [0.5 - 0.42 * Math.cos(angle), 0.5 + 0.45 * Math.sin(angle)];
});

async function strokeByMouse(page, shares) {
  const at = await onFloor(page);
  const [x, y] = at(...shares[0]);
  await page.drag([x, y], shares.slice(1).map((share) => at(...share)).map(([px, py]) => [px - x, py - y]));
}

async function strokeByFinger(page, shares) {
  const at = await onFloor(page);
  const session = await page.context.newCDPSession(page.page);
  const send = (type, touchPoints) => session.send('Input.dispatchTouchEvent', { type, touchPoints });
  const finger = (share) => { const [x, y] = at(...share); return [{ x, y, id: 1 }]; };
  await send('touchStart', finger(shares[0]));
  for (const share of shares.slice(1)) {
    await send('touchMove', finger(share));
    await page.frame();
  }
  await send('touchEnd', []);
  await page.still();
}

const isDrawn = async (page) => {
  await page.click('Shape');
  return page.has('Begin with exact pieces');
};

test('a course drawn by mouse is driven, shaped, and undone', async () => {
  const page = await openPage();
  await page.screenshot('floor-look-laptop');
  await page.click('Draw');
  await strokeByMouse(page, ring(1));
  await page.screenshot('floor-drawn-laptop');
  expect(await isDrawn(page), 'the stroke has become a course of points');
  await page.screenshot('floor-shape-laptop');
  await page.press('Control+Z');
  expect(!await isDrawn(page), 'undo brings the course of pieces back');
});

test('a point dragged drives the course anew in every frame', async () => {
  const page = await openPage();
  await page.click('Draw');
  await strokeByMouse(page, ring(1));
  await page.click('Shape');
  const at = await onFloor(page);
  const from = at(0.5 - 0.42, 0.5);
  const longest = await page.longestFrame(() =>
    page.drag(from, Array.from({ length: 30 }, (_, i) => [2 * i, i])));
  console.log(`  longest frame while a point is dragged: ${longest.toFixed(1)} ms`);
  await page.screenshot('floor-dragged-laptop');
});

test('a finger draws, two fingers zoom, and what one finger had begun is dropped', async () => {
  const page = await openPage({ size: sizes.tablet });
  await page.tap('Draw');
  await strokeByFinger(page, ring(1));
  expect(await isDrawn(page), 'the finger has drawn a course');
  await page.screenshot('floor-shape-tablet');
  const at = await onFloor(page);
  await page.pinch(...at(0.5, 0.5), 80, 260);
  await page.screenshot('floor-pinched-tablet');
  await page.tap('Look');
  await page.tap('Fit');
  await page.screenshot('floor-look-tablet');
});

test('a projector shows the same floor, larger', async () => {
  const page = await openPage({ size: sizes.projector });
  await page.screenshot('floor-look-projector');
  await page.click('Gaps');
  await page.screenshot('floor-gaps-projector');
});
