// The browser's side of the page: starts the module, wakes it when something happened, and does for it what
// only a browser can (files, clipboard, storage, address, workers). The other side is web/page/main.cpp.
//
// The same text serves the folder (modules fetched beside it) and the single file (modules inside the page).
'use strict';

(() => {
  const canvas = document.getElementById('canvas');
  const keys = document.getElementById('keys');
  const file = document.getElementById('file');
  const largestFile = 16 << 20;  // bytes; a scenario has a few thousand, a log a few million
  const encode = (text) => new TextEncoder().encode(text);
  const decode = (bytes) => new TextDecoder().decode(bytes);
  let page = null;  // the module, once started

  // ---- what a person is told before the page can draw, or when it no longer can ---------------------------
  function stop(words) {
    document.getElementById('words').textContent = words;
    const notice = document.getElementById('notice');
    notice.classList.add('stopped');
    notice.hidden = false;
    page = null;
  }

  function hasGraphics() {
    try {
      return Boolean(document.createElement('canvas').getContext('webgl2'));
    } catch {
      return false;
    }
  }

  // ---- parts: beside the page, or inside it ---------------------------------------------------------------
  async function bytesOf(name) {
    const inside = document.getElementById(name);
    if (!inside) {
      const answer = await fetch(name);
      if (!answer.ok) throw new Error(`${name} is not there (${answer.status})`);
      return new Uint8Array(await answer.arrayBuffer());
    }
    const packed = Uint8Array.from(atob(inside.textContent.trim()), (letter) => letter.charCodeAt(0));
    const stream = new Blob([packed]).stream().pipeThrough(new DecompressionStream('gzip'));
    return new Uint8Array(await new Response(stream).arrayBuffer());
  }

  // Copies bytes into the module for one call: call('_name', number, bytes, bytes).
  function call(name, ...values) {
    if (!page) return undefined;
    const held = [];
    const given = values.flatMap((value) => {
      if (!(value instanceof Uint8Array)) return [value];
      const at = page._malloc(value.length || 1);
      page.HEAPU8.set(value, at);
      held.push(at);
      return [at, value.length];
    });
    try {
      return page[name](...given);
    } finally {
      if (page) held.forEach((at) => page._free(at));
    }
  }

  function textAt(at) {
    let end = at;
    while (page.HEAPU8[end]) ++end;
    return decode(page.HEAPU8.slice(at, end));
  }

  // ---- frames: only after something happened --------------------------------------------------------------
  const again = 1, wantsText = 2;
  const framesAfterEvent = 3;  // Dear ImGui settles what is hovered and how large it is within three
  let framesLeft = 0, scheduled = false, timers = [], wantedText = false;
  let shown = { width: 0, height: 0, ratio: 0 };
  const measured = { frames: 0, last: 0, longest: 0 };  // ms, for the tests

  function wake() {
    framesLeft = framesAfterEvent;
    schedule();
    timers.forEach(clearTimeout);
    // Tooltips come some time after the last movement; two looks cover both of their delays.
    timers = [250, 700].map((delay) => setTimeout(look, delay));
  }

  function look() {
    framesLeft = Math.max(framesLeft, 2);
    schedule();
  }

  function schedule() {
    if (scheduled || !page) return;
    scheduled = true;
    requestAnimationFrame(() => { scheduled = false; draw(); });
  }

  function draw() {
    if (!page) return;
    const ratio = window.devicePixelRatio || 1;
    const now = { width: canvas.clientWidth, height: canvas.clientHeight, ratio };
    if (now.width !== shown.width || now.height !== shown.height || now.ratio !== shown.ratio) {
      shown = now;
      window.dispatchEvent(new Event('resize'));  // SDL listens to this one alone
    }
    const began = performance.now();
    let wants = 0;
    try {
      wants = page._page_frame(now.ratio);
    } catch (fault) {
      stop(`The page has stopped: ${fault.message || fault}\nWhat you had is kept; load the page again.`);
      throw fault;
    }
    measured.last = performance.now() - began;
    measured.longest = Math.max(measured.longest, measured.last);
    ++measured.frames;
    takeKeyboard(Boolean(wants & wantsText));
    --framesLeft;
    if (wants & again || framesLeft > 0) schedule();
    else if (wants & wantsText) timers.push(setTimeout(schedule, 400));  // the blinking cursor
  }

  const waking = ['pointerdown', 'pointermove', 'pointerup', 'pointercancel', 'mouseout', 'wheel', 'keydown',
                  'keyup', 'touchstart', 'touchmove', 'touchend', 'focus', 'blur', 'resize',
                  'visibilitychange'];
  for (const type of waking) {
    window.addEventListener(type, wake, { capture: true, passive: true });
  }
  new ResizeObserver(wake).observe(canvas);

  // ---- keyboard -------------------------------------------------------------------------------------------
  const filler = '..';  // so that a soft keyboard's backspace has something to delete
  const emptyKeys = () => { keys.value = filler; keys.setSelectionRange(filler.length, filler.length); };

  function takeKeyboard(wanted) {
    keys.inputMode = wanted ? 'text' : 'none';
    const touch = matchMedia('(pointer: coarse)').matches;
    if (wanted && !wantedText && touch) keys.blur();  // or the soft keyboard stays down
    wantedText = wanted;
    if (document.activeElement !== keys) {
      keys.focus({ preventScroll: true });
      emptyKeys();
    }
  }

  // A frame within the event: browsers raise the soft keyboard only right after a touch.
  canvas.addEventListener('touchend', () => { if (page) { draw(); } });

  keys.addEventListener('input', (event) => {
    if (event.isComposing) return;
    if (event.inputType.startsWith('delete')) call('_page_backspace');
    else if (event.inputType !== 'insertFromPaste') call('_page_text', encode(event.data ?? ''));
    emptyKeys();
    wake();
  });
  keys.addEventListener('compositionend', (event) => {
    call('_page_text', encode(event.data));
    emptyKeys();
    wake();
  });
  window.addEventListener('paste', (event) => {
    event.preventDefault();
    call('_page_paste', encode(event.clipboardData.getData('text/plain')));
    wake();
  });

  // SDL would swallow every key with Ctrl, Tab and the function keys. The page has a few of its own; all
  // others stay the browser's. Typed text comes through the text field above, so SDL need not see it a second
  // time.
  const ours = new Set(['KeyA', 'KeyC', 'KeyX', 'KeyY', 'KeyZ', 'KeyS', 'KeyO', 'Home', 'End', 'Enter',
                        'Delete', 'Backspace', 'ArrowLeft', 'ArrowRight', 'ArrowUp', 'ArrowDown',
                        'ControlLeft', 'ControlRight', 'MetaLeft', 'MetaRight']);
  const heldUnderMeta = new Set();
  window.addEventListener('keydown', (event) => {
    const command = event.ctrlKey || event.metaKey;
    const functionKey = /^F\d+$/.test(event.key);
    const others = functionKey || (event.altKey && !event.ctrlKey && event.code.startsWith('Arrow')) ||
                   (command && !ours.has(event.code)) || event.isComposing;
    if (others) {
      event.stopImmediatePropagation();
    } else if (event.metaKey && event.code.startsWith('Key')) {
      event.preventDefault();
      heldUnderMeta.add(event.code);
    }
  }, { capture: true });
  window.addEventListener('keyup', (event) => {
    // Under macOS no key comes up while Command is held.
    if (!event.key.startsWith('Meta')) return;
    for (const code of heldUnderMeta) {
      window.dispatchEvent(new KeyboardEvent('keyup', { code, key: code.slice(3) }));
    }
    heldUnderMeta.clear();
  }, { capture: true });
  window.addEventListener('keypress', (event) => event.stopImmediatePropagation(), { capture: true });
  canvas.addEventListener('contextmenu', (event) => event.preventDefault());

  // ---- files ----------------------------------------------------------------------------------------------
  async function take(one) {
    const name = encode(one.name);
    if (one.size > largestFile) {
      const size = Math.round(one.size / 1048576);
      call('_page_file_refused', name, encode(`it has ${size} MB; at most 16 can be taken.`));
    } else {
      try {
        call('_page_file', name, new Uint8Array(await one.arrayBuffer()));
      } catch (fault) {
        call('_page_file_refused', name, encode(`it cannot be read (${fault.message}).`));
      }
    }
    wake();
  }
  file.addEventListener('change', () => {
    if (file.files.length) take(file.files[0]);
    file.value = '';
  });
  window.addEventListener('dragover', (event) => event.preventDefault());
  window.addEventListener('drop', (event) => {
    event.preventDefault();
    if (event.dataTransfer.files.length) take(event.dataTransfer.files[0]);
    else if (event.dataTransfer.getData('text/plain')) {
      call('_page_paste', encode(event.dataTransfer.getData('text/plain')));
    }
    wake();
  });

  // ---- workers: one a job, so that cancelling is ending it ------------------------------------------------
  const jobs = new Map();
  let workerParts = null;  // promise of {address, module}

  async function prepareWorkers() {
    const sources = await Promise.all(['worker_module.js', 'worker.js'].map(bytesOf));
    const script = new Blob([sources[0], '\n', sources[1]], { type: 'text/javascript' });
    const address = URL.createObjectURL(script);
    return { address, module: await WebAssembly.compile(await bytesOf('worker_module.wasm')) };
  }

  async function startJob(job, request) {
    const entry = { worker: null };
    jobs.set(job, entry);
    const ended = (error) => {
      if (jobs.get(job) !== entry) return;
      jobs.delete(job);
      if (entry.worker) entry.worker.terminate();
      call('_page_job_ended', job, encode(error));
      wake();
    };
    try {
      workerParts ??= prepareWorkers();
      const { address, module } = await workerParts;
      if (jobs.get(job) !== entry) return;  // cancelled meanwhile
      entry.worker = new Worker(address);
      entry.worker.onmessage = ({ data }) => {
        if (jobs.get(job) !== entry) return;
        if (data.message) {
          call('_page_job_message', job, data.message);
          wake();
        } else {
          ended(data.ended);
        }
      };
      entry.worker.onerror = (fault) => {
        ended(`the worker cannot run: ${fault.message || 'blocked by the browser'}`);
      };
      entry.worker.postMessage({ module, request }, [request.buffer]);
    } catch (fault) {
      workerParts = null;
      ended(`the worker cannot start: ${fault.message}`);
    }
  }

  function cancelJob(job) {
    const entry = jobs.get(job);
    jobs.delete(job);
    if (entry && entry.worker) entry.worker.terminate();
  }

  // ---- what the application asks for (web/host.h) ---------------------------------------------------------
  function copyWithField(text) {  // where the clipboard's own interface is refused
    const field = document.createElement('textarea');
    field.value = text;
    document.body.append(field);
    field.select();
    document.execCommand('copy');
    field.remove();
    keys.focus({ preventScroll: true });
  }

  let ownFragment = null;  // what setFragment wrote, which is no news to the application

  const host = {
    saveFile: (name, bytes, type) => {
      const address = URL.createObjectURL(new Blob([bytes], { type: decode(type) }));
      const link = Object.assign(document.createElement('a'), { href: address, download: decode(name) });
      link.click();
      setTimeout(() => URL.revokeObjectURL(address), 60000);
    },
    chooseFile: (accept) => {
      file.accept = decode(accept);
      file.click();
    },
    copyText: (bytes) => {
      const text = decode(bytes);
      if (!navigator.clipboard) return copyWithField(text);
      navigator.clipboard.writeText(text).catch(() => copyWithField(text));
      return 1;
    },
    store: (key, text) => {
      try {
        localStorage.setItem(decode(key), decode(text));
        return 1;
      } catch {
        return 0;
      }
    },
    stored: (key) => {
      try {
        return localStorage.getItem(decode(key)) ?? '';
      } catch {
        return '';
      }
    },
    address: () => location.href.split('#')[0],
    setFragment: (fragment) => {
      ownFragment = decode(fragment);
      history.replaceState(null, '', ownFragment ? `#${ownFragment}` : location.pathname + location.search);
    },
    startJob: (request, b, c, job) => { startJob(job, request); },
    cancelJob: (a, b, c, job) => cancelJob(job),
  };

  function tellFragment() {
    const fragment = location.hash.slice(1);
    if (fragment === ownFragment) return;
    ownFragment = null;
    call('_page_fragment', encode(fragment));
    wake();
  }

  // ---- start ----------------------------------------------------------------------------------------------
  async function start() {
    if (typeof WebAssembly !== 'object' || typeof DecompressionStream !== 'function') {
      return stop('This browser is too old for Linewright. One of 2023 or later will do.');
    }
    if (!hasGraphics()) {
      return stop('Linewright draws with WebGL 2, which this browser does not offer here.\n' +
                  'Often it is switched off in the settings (hardware acceleration), or the browser is old.');
    }
    // What does not change is not drawn again (web/page/damage.h), so it has to stay from frame to frame.
    const getContext = canvas.getContext.bind(canvas);
    canvas.getContext = (kind, wishes) => getContext(kind, { ...wishes, preserveDrawingBuffer: true });
    const module = await WebAssembly.compile(await bytesOf('page_module.wasm'));
    page = await linewrightPage({
      canvas,
      host,
      print: (line) => console.log(line),
      printErr: (line) => console.warn(line),
      instantiateWasm: (imports, done) => {
        WebAssembly.instantiate(module, imports).then((instance) => done(instance, module));
        return {};
      },
    });
    if (!page._page_start(window.devicePixelRatio || 1)) {
      return stop('The browser gave no graphics to draw with.');
    }
    page._page_mac_keys(/^Mac|^iP/.test(navigator.platform));
    if (location.hash.length > 1) tellFragment();
    window.addEventListener('hashchange', tellFragment);
    canvas.addEventListener('webglcontextlost', () => {
      stop('The browser took the graphics away, often after a sleep.\n' +
           'What you had is kept; load the page again.');
    });
    wake();
    draw();
    document.getElementById('notice').hidden = true;
    return undefined;
  }

  // For tests (tests/web): what lies where, and how long frames take.
  window.linewright = {
    ready: () => Boolean(page) && measured.frames > 2 && framesLeft <= 0,
    still: () => framesLeft <= 0 && !scheduled,
    listItems: (on) => { page._page_list_items(on); wake(); },
    items: () => JSON.parse(textAt(page._page_items())),
    build: () => textAt(page._page_build()),
    wake,
    measured,
  };

  start().catch((fault) => stop(`Linewright cannot start: ${fault.message || fault}`));
})();
