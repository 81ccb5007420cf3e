// The worker's side of WebAssembly; web/page/worker.js calls these, worker_app.h does the work.
#include <emscripten.h>

#include <string>

#include "web/page/worker_app.h"

// clang-format off
EM_JS(void, send_message, (const char* bytes, int size), {
  Module['send'](HEAPU8.slice(bytes, bytes + size));
})
// clang-format on

extern "C" {

/// Takes the request; returns why it cannot be done, or an empty text. Valid until the next call.
EMSCRIPTEN_KEEPALIVE const char* worker_begin(const char* bytes, int size) {
  static std::string error;
  error = lw::worker::begin({bytes, static_cast<size_t>(size)});
  return error.c_str();
}

/// One slice; true when there is more to do.
EMSCRIPTEN_KEEPALIVE bool worker_step() {
  return lw::worker::step(
      [](std::string_view message) { send_message(message.data(), static_cast<int>(message.size())); });
}

}  // extern "C"
