// web/host.h in the browser: everything is done by page.js, in Module.host.
#include <emscripten.h>

#include <cstdlib>

#include "web/host.h"

// clang-format off
/// Calls Module.host[what](first, second, third, number) with copies of the bytes; its answer is a number.
EM_JS(int, ask_page, (const char* what, int number, const char* a, int a_size, const char* b, int b_size,
                      const char* c, int c_size), {
  const bytes = (at, size) => HEAPU8.slice(at, at + size);
  const asked = Module['host'][UTF8ToString(what)];
  return Number(asked(bytes(a, a_size), bytes(b, b_size), bytes(c, c_size), number)) || 0;
})
/// Calls Module.host[what](first); its answer is a text, copied into memory that the caller frees.
EM_JS(char*, ask_text, (const char* what, const char* a, int a_size), {
  const text = String(Module['host'][UTF8ToString(what)](HEAPU8.slice(a, a + a_size)));
  const size = lengthBytesUTF8(text) + 1;
  const at = Module['_malloc'](size);
  stringToUTF8(text, at, size);
  return at;
})
// clang-format on

namespace lw::host {
namespace {

int size_of(std::string_view text) { return static_cast<int>(text.size()); }

int ask(const char* what, std::string_view a, std::string_view b = {}, std::string_view c = {},
        int number = 0) {
  return ask_page(what, number, a.data(), size_of(a), b.data(), size_of(b), c.data(), size_of(c));
}

std::string text_from(const char* what, std::string_view a) {
  char* answer = ask_text(what, a.data(), size_of(a));
  std::string text = answer;
  std::free(answer);
  return text;
}

}  // namespace

void save_file(std::string_view name, std::string_view bytes, std::string_view type) {
  ask("saveFile", name, bytes, type);
}
void choose_file(std::string_view accept) { ask("chooseFile", accept); }
void copy_text(std::string_view text) { ask("copyText", text); }
bool store(std::string_view key, std::string_view text) { return ask("store", key, text) != 0; }
std::string stored(std::string_view key) { return text_from("stored", key); }
std::string address() { return text_from("address", {}); }
void set_fragment(std::string_view fragment) { ask("setFragment", fragment); }
double seconds() { return emscripten_get_now() / 1000; }
void start_job(int job, std::string_view request) { ask("startJob", request, {}, {}, job); }
void cancel_job(int job) { ask("cancelJob", {}, {}, {}, job); }

}  // namespace lw::host
