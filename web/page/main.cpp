// The page's side of WebAssembly: window, Dear ImGui, one frame at a time. web/page/page.js calls the
// functions under extern "C"; the application behind them is web/page_app.h.
//
// Nothing runs by itself: page.js calls page_frame() after an event, and again as long as it returns `again`.
#include <SDL.h>
#include <emscripten.h>
#include <imgui.h>
#include <imgui_impl_sdl2.h>

#include <algorithm>
#include <cmath>
#include <string>
#include <string_view>

#include "build_info.h"
#include "web/host.h"
#include "web/page/fingers.h"
#include "web/page/items.h"
#include "web/page/painter.h"
#include "web/page/typeface.h"
#include "web/page_app.h"

namespace {

struct Page {
  SDL_Window* window = nullptr;
  SDL_GLContext context = nullptr;
  float ratio = 0, text_scale = 0;  // what the typeface was rasterised for
  std::string clipboard;            // what Dear ImGui pastes
  lw::page::Fingers fingers;
} page;

enum Wants { again = 1, text = 2 };  // bits of what page_frame() returns

void set_clipboard(void*, const char* text) {
  page.clipboard = text;
  lw::host::copy_text(text);
}
const char* get_clipboard(void*) { return page.clipboard.c_str(); }

bool open_window() {
  SDL_SetMainReady();
  if (SDL_Init(SDL_INIT_VIDEO) != 0) return false;
  SDL_GL_SetAttribute(SDL_GL_CONTEXT_PROFILE_MASK, SDL_GL_CONTEXT_PROFILE_ES);
  SDL_GL_SetAttribute(SDL_GL_CONTEXT_MAJOR_VERSION, 3);
  SDL_GL_SetAttribute(SDL_GL_CONTEXT_MINOR_VERSION, 0);
  SDL_GL_SetAttribute(SDL_GL_DEPTH_SIZE, 0);
  SDL_GL_SetAttribute(SDL_GL_STENCIL_SIZE, 0);
  const Uint32 flags = SDL_WINDOW_OPENGL | SDL_WINDOW_RESIZABLE | SDL_WINDOW_ALLOW_HIGHDPI;
  page.window = SDL_CreateWindow("Linewright", 0, 0, 640, 480, flags);
  if (!page.window) return false;
  page.context = SDL_GL_CreateContext(page.window);
  return page.context != nullptr;
}

void set_up_imgui() {
  ImGui::CreateContext();
  ImGuiIO& io = ImGui::GetIO();
  io.IniFilename = nullptr;
  io.ConfigFlags |= ImGuiConfigFlags_NavEnableKeyboard;
  ImGui_ImplSDL2_InitForOpenGL(page.window, page.context);
  io.SetClipboardTextFn = set_clipboard;
  io.GetClipboardTextFn = get_clipboard;
}

void set_type(float ratio, float text_scale) {
  if (ratio == page.ratio && text_scale == page.text_scale) return;
  page.ratio = ratio;
  page.text_scale = text_scale;
  lw::page::load_typeface(ratio, text_scale);
  lw::page::painter_take_typeface();
}

/// Two fingers are a gesture of their own: the mouse that SDL makes of the first one must not draw meanwhile.
void take_events() {
  SDL_Event event;
  int width = 0, height = 0;
  SDL_GetWindowSize(page.window, &width, &height);
  while (SDL_PollEvent(&event)) {
    const bool was_pinching = page.fingers.pinching();
    if (const auto pinch = page.fingers.take(event, static_cast<float>(width), static_cast<float>(height))) {
      if (!was_pinching) ImGui::GetIO().AddMouseButtonEvent(0, false);
      lw::app::pinch(*pinch);
    }
    if (!page.fingers.hides(event)) ImGui_ImplSDL2_ProcessEvent(&event);
  }
}

void push_key(SDL_Scancode code, Uint16 modifiers, bool down) {
  SDL_Event event = {};
  event.type = down ? SDL_KEYDOWN : SDL_KEYUP;
  event.key.state = down ? SDL_PRESSED : SDL_RELEASED;
  event.key.keysym.scancode = code;
  event.key.keysym.sym = SDL_GetKeyFromScancode(code);
  event.key.keysym.mod = modifiers;
  SDL_PushEvent(&event);
}

}  // namespace

extern "C" {

/// Opens everything; false when the browser gives no graphics.
EMSCRIPTEN_KEEPALIVE bool page_start(float ratio) {
  if (!open_window()) return false;
  set_up_imgui();
  if (!lw::page::painter_start()) return false;
  set_type(ratio, 1);
  lw::app::start();
  return true;
}

/// One frame; returns the sum of Wants. `ratio` is device pixels a CSS pixel.
EMSCRIPTEN_KEEPALIVE int page_frame(float ratio) {
  set_type(ratio, lw::app::text_scale());
  take_events();
  lw::page::clear_items();
  ImGui_ImplSDL2_NewFrame();
  // A page at rest draws nothing for minutes; what Dear ImGui times should not see that as one long frame.
  ImGui::GetIO().DeltaTime = std::min(ImGui::GetIO().DeltaTime, 0.1f);
  ImGui::NewFrame();
  const bool more = lw::app::frame();
  ImGui::Render();
  if (lw::page::painter_draw(*ImGui::GetDrawData())) SDL_GL_SwapWindow(page.window);
  return (more ? again : 0) + (ImGui::GetIO().WantTextInput ? text : 0);
}

/// Typed text. SDL's events hold 31 bytes each; through its queue, or the text would overtake keys and mouse.
EMSCRIPTEN_KEEPALIVE void page_text(const char* bytes, int size) {
  std::string_view rest(bytes, static_cast<size_t>(size));
  while (!rest.empty()) {
    size_t piece = std::min<size_t>(rest.size(), SDL_TEXTINPUTEVENT_TEXT_SIZE - 1);
    while (piece < rest.size() && (static_cast<unsigned char>(rest[piece]) & 0xC0) == 0x80) --piece;
    if (piece == 0) return;  // not UTF-8
    SDL_Event event = {};
    event.type = SDL_TEXTINPUT;
    std::copy_n(rest.data(), piece, event.text.text);
    SDL_PushEvent(&event);
    rest.remove_prefix(piece);
  }
}

/// A key of a soft keyboard, which sends none by itself: pressed and released.
EMSCRIPTEN_KEEPALIVE void page_backspace() {
  push_key(SDL_SCANCODE_BACKSPACE, KMOD_NONE, true);
  push_key(SDL_SCANCODE_BACKSPACE, KMOD_NONE, false);
}

EMSCRIPTEN_KEEPALIVE void page_paste(const char* bytes, int size) {
  const std::string_view text(bytes, static_cast<size_t>(size));
  if (!ImGui::GetIO().WantTextInput) {
    lw::app::text_pasted(text);
    return;
  }
  page.clipboard = text;
  const bool mac = ImGui::GetIO().ConfigMacOSXBehaviors;
  const Uint16 modifier = mac ? KMOD_LGUI : KMOD_LCTRL;
  push_key(mac ? SDL_SCANCODE_LGUI : SDL_SCANCODE_LCTRL, modifier, true);
  push_key(SDL_SCANCODE_V, modifier, true);
  push_key(SDL_SCANCODE_V, modifier, false);
  push_key(mac ? SDL_SCANCODE_LGUI : SDL_SCANCODE_LCTRL, KMOD_NONE, false);
}

EMSCRIPTEN_KEEPALIVE void page_mac_keys(bool mac) { ImGui::GetIO().ConfigMacOSXBehaviors = mac; }

EMSCRIPTEN_KEEPALIVE void page_fragment(const char* bytes, int size) {
  lw::app::fragment_changed({bytes, static_cast<size_t>(size)});
}

EMSCRIPTEN_KEEPALIVE void page_file(const char* name, int name_size, const char* bytes, int size) {
  lw::app::file_opened({name, static_cast<size_t>(name_size)}, {bytes, static_cast<size_t>(size)});
}

EMSCRIPTEN_KEEPALIVE void page_file_refused(const char* name, int name_size, const char* why, int why_size) {
  lw::app::file_refused({name, static_cast<size_t>(name_size)}, {why, static_cast<size_t>(why_size)});
}

EMSCRIPTEN_KEEPALIVE void page_job_message(int job, const char* bytes, int size) {
  lw::app::job_message(job, {bytes, static_cast<size_t>(size)});
}

EMSCRIPTEN_KEEPALIVE void page_job_ended(int job, const char* error, int size) {
  lw::app::job_ended(job, {error, static_cast<size_t>(size)});
}

/// For tests: lists what lies on the page, from the next frame on (web/page/items.h).
EMSCRIPTEN_KEEPALIVE void page_list_items(bool on) { lw::page::list_items(on); }

/// Valid until the next call.
EMSCRIPTEN_KEEPALIVE const char* page_items() {
  static std::string json;
  json = lw::page::items_json();
  return json.c_str();
}

EMSCRIPTEN_KEEPALIVE const char* page_build() { return lw::build_info; }

}  // extern "C"
