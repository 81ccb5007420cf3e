// Puts the page together: node assemble.mjs SOURCES BUILD PARTS
//   BUILD/page/                        a folder for any static host
//   BUILD/page-single/linewright.html  one file with everything inside, for opening from disk
// SOURCES is web/page, BUILD holds the two modules that em++ made, PARTS what web/build/parts fetched.
import { createHash } from 'node:crypto';
import { existsSync, mkdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { gzipSync } from 'node:zlib';

const [sources, build, parts] = process.argv.slice(2);
const text = (folder, name) => readFileSync(join(folder, name), 'utf8');
const index = text(sources, 'index.html');
const style = text(sources, 'page.css');
const glue = text(sources, 'page.js');
const files = {
  'page_module.js': text(build, 'page.js'),
  'page_module.wasm': readFileSync(join(build, 'page.wasm')),
  'worker_module.js': text(build, 'worker.js'),
  'worker_module.wasm': readFileSync(join(build, 'worker.wasm')),
  'worker.js': text(sources, 'worker.js'),
};

// Functions as replacements, since "$&" and the like occur in scripts.
const fill = (values) => index.replace(/\{\{(\w+)\}\}/g, (all, name) => values[name]);
const policy = (script, styles, connect) =>
  `default-src 'none'; script-src ${script} 'wasm-unsafe-eval'; style-src ${styles}; img-src data:; ` +
  `connect-src ${connect}; worker-src blob:; base-uri 'none'; form-action 'none'`;

// Of the header-only libraries and Emscripten's own, Debian keeps the words beside every package.
const fromDebian = [['toml++', 'libtomlplusplus-dev'], ['JSON for Modern C++', 'nlohmann-json3-dev'],
                    ['Eigen', 'libeigen3-dev'], ['Emscripten and its libraries', 'emscripten']]
  .map(([name, debian]) => [name, `/usr/share/doc/${debian}/copyright`])
  .map(([name, file]) => [name, existsSync(file) ? readFileSync(file, 'utf8') : `see ${file}`]);
const licences = [
  ['Dear ImGui', text(parts, 'imgui/LICENSE.txt')],
  ['SDL', text(parts, 'sdl/LICENSE.txt')],
  ['zlib', text(parts, 'zlib/README').split('Copyright notice:')[1] ?? text(parts, 'zlib/README')],
  ['Inter (typeface)', text(parts, 'typeface/LICENCE')],
  ...fromDebian,
].map(([name, words]) => `${name}\n${'='.repeat(name.length)}\n\n${words.trim()}\n`).join('\n\n');

function fresh(name) {
  const folder = join(build, name);
  rmSync(folder, { recursive: true, force: true });
  mkdirSync(folder, { recursive: true });
  return folder;
}

const folder = fresh('page');
for (const [name, content] of Object.entries(files)) writeFileSync(join(folder, name), content);
writeFileSync(join(folder, 'page.css'), style);
writeFileSync(join(folder, 'page.js'), glue);
writeFileSync(join(folder, 'licences.txt'), licences);
writeFileSync(join(folder, 'index.html'), fill({
  policy: policy("'self'", "'self'", "'self'"),
  style: '<link rel="stylesheet" href="page.css">',
  scripts: '<script src="page_module.js"></script>\n<script src="page.js"></script>',
}));

const hash = (content) => `'sha256-${createHash('sha256').update(content).digest('base64')}'`;
// Inside a page a script must not hold what ends it. In scripts both can only stand in strings and comments.
const inline = (script) => script.replace(/<\/script/gi, '<\\/script').replace(/<!--/g, '<\\!--');
const scripts = [inline(files['page_module.js']), inline(glue)];
const packed = Object.entries(files).filter(([name]) => name !== 'page_module.js').map(([name, content]) =>
  `<script type="text/plain" id="${name}">${gzipSync(content, { level: 9 }).toString('base64')}</script>`);
const single = fresh('page-single');
writeFileSync(join(single, 'linewright.html'), fill({
  policy: policy(scripts.map(hash).join(' '), hash(style), "'none'"),
  style: `<style>${style}</style>`,
  scripts: [...packed, ...scripts.map((script) => `<script>${script}</script>`)].join('\n'),
}));
writeFileSync(join(single, 'licences.txt'), licences);
