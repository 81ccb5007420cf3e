#include "tests/web/hand.h"

#include <imgui.h>

#include <stdexcept>
#include <utility>

#include "web/page/host_null.h"
#include "web/page/typeface.h"
#include "web/page_app.h"

namespace lw {
namespace {

bool is(const page::Item& item, std::string_view label, std::string_view window) {
  const std::string_view whole = item.label;
  const bool named = whole == label || whole.substr(0, whole.find("##")) == label;
  return named && item.window.find(window) != std::string::npos;
}

}  // namespace

Hand::Hand(float width, float height) : draw_(app::frame) {
  open(width, height);
  host::asked().seconds = 0;
  app::start();
  frame(3);
}

Hand::Hand(std::function<void()> draw, float width, float height) {
  draw_ = [draw = std::move(draw)] {
    ImGui::SetNextWindowPos({0, 0});
    ImGui::SetNextWindowSize(ImGui::GetIO().DisplaySize);
    ImGui::Begin("panel under test", nullptr, ImGuiWindowFlags_NoDecoration);
    draw();
    ImGui::End();
    return false;
  };
  open(width, height);
  frame(3);
}

void Hand::open(float width, float height) {
  ImGui::CreateContext();
  ImGuiIO& io = ImGui::GetIO();
  io.IniFilename = nullptr;
  io.DisplaySize = {width, height};
  io.ConfigInputTrickleEventQueue = true;  // as in the page
  page::load_typeface(1);
  page::list_items(true);
}

Hand::~Hand() { ImGui::DestroyContext(); }

bool Hand::frame(int count) {
  bool more = false;
  for (int i = 0; i < count; ++i) {
    ImGui::GetIO().DeltaTime = 1 / 60.0f;
    host::asked().seconds += 1 / 60.0;
    page::clear_items();
    ImGui::NewFrame();
    more = draw_();
    ImGui::Render();
  }
  return more;
}

bool Hand::has(std::string_view label, std::string_view window) {
  for (const page::Item& item : page::items()) {
    if (is(item, label, window)) return true;
  }
  return false;
}

page::Item Hand::find(std::string_view label, std::string_view window) {
  std::string there;
  for (const page::Item& item : page::items()) {
    if (is(item, label, window)) return item;
    if (!item.label.empty()) there += "\n  " + item.label;
  }
  throw std::runtime_error("no widget \"" + std::string(label) + "\"; there are:" + there);
}

void Hand::move(float x, float y) {
  ImGui::GetIO().AddMousePosEvent(x, y);
  frame(2);
}
void Hand::press(int button) {
  ImGui::GetIO().AddMouseButtonEvent(button, true);
  frame(2);
}
void Hand::release(int button) {
  ImGui::GetIO().AddMouseButtonEvent(button, false);
  frame(3);
}
void Hand::wheel(float lines) {
  ImGui::GetIO().AddMouseWheelEvent(0, lines);
  frame(2);
}

void Hand::click(std::string_view label, std::string_view window) { drag(label, 0, 0, window); }

void Hand::drag(std::string_view label, float dx, float dy, std::string_view window) {
  const page::Item item = find(label, window);
  const float x = item.x + item.width / 2, y = item.y + item.height / 2;
  move(x, y);
  press();
  if (dx != 0 || dy != 0) {
    move(x + dx / 2, y + dy / 2);
    move(x + dx, y + dy);
  }
  release();
}

void Hand::key(int key, bool control) {
  ImGuiIO& io = ImGui::GetIO();
  if (control) io.AddKeyEvent(ImGuiMod_Ctrl, true);
  io.AddKeyEvent(static_cast<ImGuiKey>(key), true);
  frame(2);
  io.AddKeyEvent(static_cast<ImGuiKey>(key), false);
  if (control) io.AddKeyEvent(ImGuiMod_Ctrl, false);
  frame(2);
}

void Hand::type(std::string_view label, std::string_view text, bool control, std::string_view window) {
  ImGuiIO& io = ImGui::GetIO();
  if (control) io.AddKeyEvent(ImGuiMod_Ctrl, true);
  click(label, window);
  if (control) io.AddKeyEvent(ImGuiMod_Ctrl, false);
  frame();
  key(ImGuiKey_A, true);
  io.AddInputCharactersUTF8(std::string(text).c_str());
  frame(2);
  key(ImGuiKey_Enter);
}

}  // namespace lw
