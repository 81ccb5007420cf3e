// One job beside the page. It follows the engine's module in the same Blob, so linewrightWorker is known
// here. Receives {module, request} once; sends {message} any number of times, then {ended}.
'use strict';

self.onmessage = async (event) => {
  const { module, request } = event.data;
  try {
    const engine = await linewrightWorker({
      // The page has compiled the module already; an instance of it is ready in milliseconds.
      instantiateWasm: (imports, done) => {
        WebAssembly.instantiate(module, imports).then((instance) => done(instance, module));
        return {};
      },
      send: (bytes) => self.postMessage({ message: bytes }, [bytes.buffer]),
    });
    const at = engine._malloc(request.length || 1);
    engine.HEAPU8.set(request, at);
    const error = text(engine, engine._worker_begin(at, request.length));
    engine._free(at);
    if (!error) {
      while (engine._worker_step());
    }
    self.postMessage({ ended: error });
  } catch (fault) {
    self.postMessage({ ended: `the worker broke off: ${fault.message || fault}` });
  }
};

function text(engine, at) {
  let end = at;
  while (engine.HEAPU8[end]) ++end;
  return new TextDecoder().decode(engine.HEAPU8.slice(at, end));
}
