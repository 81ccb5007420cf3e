// Serves a folder on 127.0.0.1 and prints the address: node server.mjs FOLDER [PORT [fixed]]
// PORT 0, or none: any free one. A port that is taken gives way to a free one, unless it is fixed.
import { createReadStream } from 'node:fs';
import { stat } from 'node:fs/promises';
import { createServer } from 'node:http';
import { extname, join, resolve, sep } from 'node:path';

const types = {
  '.html': 'text/html; charset=utf-8',
  '.css': 'text/css; charset=utf-8',
  '.js': 'text/javascript; charset=utf-8',
  '.wasm': 'application/wasm',
  '.txt': 'text/plain; charset=utf-8',
};
const folder = resolve(process.argv[2] ?? '.');
const port = Number(process.argv[3] ?? 0);
const fixed = process.argv[4] === 'fixed';

async function answer(request, response) {
  const refuse = (code, words) => response.writeHead(code, { 'content-type': 'text/plain' }).end(words);
  if (request.method !== 'GET' && request.method !== 'HEAD') return refuse(405, 'only GET and HEAD');
  let path;
  try {
    path = decodeURIComponent(new URL(request.url, 'http://127.0.0.1').pathname);
  } catch {
    return refuse(400, 'not an address');
  }
  const file = resolve(join(folder, path.endsWith('/') ? `${path}index.html` : path));
  const there = file.startsWith(folder + sep) && await stat(file).catch(() => null);
  if (!there || !there.isFile()) return refuse(404, 'not here');
  response.writeHead(200, {
    'content-type': types[extname(file)] ?? 'application/octet-stream', 'content-length': there.size,
    'cache-control': 'no-cache', 'x-content-type-options': 'nosniff',
  });
  if (request.method === 'HEAD') return response.end();
  return createReadStream(file).pipe(response);
}

const server = createServer((request, response) => {
  answer(request, response).catch((fault) => response.destroy(fault));
});
server.on('error', (fault) => {
  if (fault.code === 'EADDRINUSE' && !fixed) return server.listen(0, '127.0.0.1');
  console.error(`cannot serve on port ${port}: ${fault.message}`);
  return process.exit(1);
});
server.on('listening', () => console.log(`http://127.0.0.1:${server.address().port}/`));
server.listen(port, '127.0.0.1');
