// Opens the page in Chromium and lets a test work it as a person would: by what is written on the widgets.
//
//   import { test, openPage, expect } from './harness.mjs';
//   test('the button counts', async () => {
//     const page = await openPage();  // { single: true }: the one file from disk with the network off
//     await page.click('Press');
//     ...
//   });
//
// Every page opened this way fails its test when the console shows an error, the content policy is broken, or
// anything but the page's own files is asked for. Nothing sleeps: what is waited for is polled.
import { spawn } from 'node:child_process';
import { mkdirSync } from 'node:fs';
import { createRequire } from 'node:module';
import { join, resolve } from 'node:path';
import { fileURLToPath, pathToFileURL } from 'node:url';

const root = fileURLToPath(new URL('../..', import.meta.url));
export const build = resolve(process.env.LINEWRIGHT_WASM ?? join(root, 'build/wasm'));
const tools = resolve(process.env.LINEWRIGHT_TOOLS ?? join(root, 'build/tools'));
const screens = join(root, 'build/screens');
const { chromium } = createRequire(join(tools, 'package.json'))('playwright-core');

export const sizes = {
  laptop: { viewport: { width: 1280, height: 800 } },
  projector: { viewport: { width: 1920, height: 1080 } },
  tablet: { viewport: { width: 820, height: 1180 }, hasTouch: true, isMobile: true, deviceScaleFactor: 1 },
};

const tests = [];
export const test = (name, body) => tests.push({ name, body });

export function expect(holds, words) {
  if (!holds) throw new Error(words);
}

// Asks until the answer is truthy; the words say what was waited for.
export async function until(ask, words, limit = 15000) {
  const end = Date.now() + limit;
  for (;;) {
    const answer = await ask();
    if (answer) return answer;
    if (Date.now() > end) {
      throw new Error(`waited in vain for: ${typeof words === 'function' ? words() : words}`);
    }
    await new Promise((done) => setTimeout(done, 20));
  }
}

let server = null, address = null, browser = null;
const open = [];

async function serve() {
  if (address) return address;
  server = spawn(process.execPath, [join(root, 'web/build/server.mjs'), join(build, 'page')]);
  address = await new Promise((done, fail) => {
    server.stdout.once('data', (line) => done(String(line).trim()));
    server.once('exit', (code) => fail(new Error(`the server ended with ${code}`)));
  });
  return address;
}

async function launch() {
  browser ??= await chromium.launch({
    executablePath: process.env.LINEWRIGHT_CHROMIUM ?? '/usr/bin/chromium',
    args: ['--no-sandbox', '--disable-quic', '--no-first-run', '--disable-background-networking',
           '--disable-component-update', '--disable-sync', '--use-gl=angle', '--use-angle=swiftshader',
           '--enable-unsafe-swiftshader'],
  });
  return browser;
}

const shownPart = (label) => label.split('##')[0];
const matches = (item, label) => shownPart(item.label) === label || item.label === label;

class Page {
  constructor(context, page, own) {
    this.context = context;
    this.page = page;
    this.own = own;
    this.faults = [];
    this.requests = [];
  }

  async still() {
    await until(() => this.page.evaluate(() => linewright.still()), 'the page at rest');
  }

  // Every widget on the page now.
  async items() {
    await this.still();
    return this.page.evaluate(() => linewright.items());
  }

  // The widget with this label; `window` narrows to windows whose name contains it, `nth` picks among equals.
  async find(label, { window = '', nth = 0 } = {}) {
    let seen = [];
    return until(async () => {
      seen = (await this.items()).filter((item) => item.window.includes(window));
      return seen.filter((item) => matches(item, label))[nth];
    }, () => `widget "${label}"; there are: ${seen.map((item) => item.label).filter(Boolean).join(' | ')}`,
    5000);
  }

  async has(label, options = {}) {
    const inWindow = (item) => item.window.includes(options.window ?? '');
    return (await this.items()).some((item) => matches(item, label) && inWindow(item));
  }

  async middle(label, options) {
    const { x, y, width, height } = await this.find(label, options);
    return [x + width / 2, y + height / 2];
  }

  async click(label, options = {}) {
    await this.page.mouse.click(...await this.middle(label, options), { button: options.button ?? 'left' });
    await this.still();
  }

  async doubleClick(label, options = {}) {
    await this.page.mouse.dblclick(...await this.middle(label, options));
    await this.still();
  }

  async tap(label, options = {}) {
    await this.page.touchscreen.tap(...await this.middle(label, options));
    await this.still();
  }

  // Presses the mouse on a widget, or at [x, y], goes through the given offsets from there, and lets go.
  async drag(from, offsets, options = {}) {
    const [x, y] = Array.isArray(from) ? from : await this.middle(from, options);
    await this.page.mouse.move(x, y);
    await this.page.mouse.down();
    for (const [dx, dy] of offsets) {
      await this.page.mouse.move(x + dx, y + dy);
      await this.frame();
    }
    await this.page.mouse.up();
    await this.still();
  }

  // Waits until one more frame has been drawn.
  async frame() {
    const before = await this.page.evaluate(() => { linewright.wake(); return linewright.measured.frames; });
    await until(() => this.page.evaluate((n) => linewright.measured.frames > n, before), 'a frame');
  }

  // Puts text into a field in place of what is there; sliders and drags take it after Ctrl and a click.
  async type(label, text, { control = false, ...options } = {}) {
    if (control) await this.page.keyboard.down('Control');
    await this.click(label, options);
    if (control) await this.page.keyboard.up('Control');
    await this.press('Control+A');
    for (const letter of text) {
      await this.page.keyboard.type(letter);
      await this.frame();
    }
    await this.press('Enter');
  }

  async press(key) {
    await this.page.keyboard.press(key);
    await this.still();
  }

  // Two fingers around (x, y), from one distance to another: a pinch.
  async pinch(x, y, from, to, steps = 6) {
    const session = await this.context.newCDPSession(this.page);
    const points = (distance) => [{ x: x - distance / 2, y, id: 1 }, { x: x + distance / 2, y, id: 2 }];
    const send = (type, touchPoints) => session.send('Input.dispatchTouchEvent', { type, touchPoints });
    await send('touchStart', points(from).slice(0, 1));
    await send('touchStart', points(from));
    for (let i = 1; i <= steps; ++i) {
      await send('touchMove', points(from + (to - from) * i / steps));
      await this.frame();
    }
    await send('touchEnd', []);
    await this.still();
  }

  async screenshot(name) {
    mkdirSync(screens, { recursive: true });
    await this.still();
    await this.page.screenshot({ path: join(screens, `${name}.png`) });
  }

  // Longest frame in ms while `act` goes on.
  async longestFrame(act) {
    await this.page.evaluate(() => { linewright.measured.longest = 0; });
    await act();
    return this.page.evaluate(() => linewright.measured.longest);
  }

  check() {
    expect(this.faults.length === 0, `the page reported: ${this.faults.join('\n')}`);
    const outside = this.requests.filter((url) => !url.startsWith(this.own) && !/^(blob|data):/.test(url));
    expect(outside.length === 0, `the page asked for ${outside.join(', ')}`);
  }
}

// Options: single (the one file, from disk, offline), size (one of `sizes`), fragment, init (a function that
// runs in the page before its scripts), expectFaults (leave the console alone), and Playwright's for a
// context.
export async function openPage({ single = false, size = sizes.laptop, fragment = '', init, started = true,
                                 context: given, ...more } = {}) {
  const base = single ? pathToFileURL(join(build, 'page-single/linewright.html')).href : await serve();
  const context = given ?? await (await launch()).newContext({ ...size, ...more });
  if (single) await context.setOffline(true);
  const inner = await context.newPage();
  const page = new Page(context, inner, base);
  open.push(page);
  inner.on('console', (message) => {
    if (message.type() === 'error' || message.type() === 'warning') page.faults.push(message.text());
  });
  inner.on('pageerror', (error) => page.faults.push(String(error)));
  inner.on('request', (request) => page.requests.push(request.url()));
  await inner.route(/^(?!file:|blob:|data:|http:\/\/127\.0\.0\.1)/, (route) => route.abort());
  await inner.addInitScript(() => {
    document.addEventListener('securitypolicyviolation', (event) => {
      console.error(`content policy: ${event.violatedDirective} ${event.blockedURI}`);
    });
  });
  if (init) await inner.addInitScript(init);
  await inner.goto(base + (fragment ? `#${fragment}` : ''));
  if (started) {
    await until(() => inner.evaluate(() => window.linewright?.ready()), 'the page to start', 30000);
    await inner.evaluate(() => linewright.listItems(true));
    await page.still();
  }
  return page;
}

// Runs what test() has gathered; returns how many passed and failed.
export async function run(only = '') {
  let passed = 0, failed = 0;
  for (const { name, body } of tests.filter((one) => one.name.includes(only))) {
    const began = Date.now();
    try {
      await body();
      open.forEach((page) => page.check());
      ++passed;
      console.log(`  ok   ${name} (${Date.now() - began} ms)`);
    } catch (fault) {
      ++failed;
      console.log(`  FAIL ${name}\n       ${fault.stack}`);
      const path = join(screens, 'failed.png');
      await open.at(-1)?.page.screenshot({ path }).catch(() => {});
    }
    const contexts = new Set(open.map((page) => page.context));
    for (const context of contexts) await context.close().catch(() => {});
    open.length = 0;
  }
  if (browser) await browser.close();
  if (server) server.kill();
  return { passed, failed };
}
