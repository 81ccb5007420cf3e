// Every widget of the last frame by the text on it, so that tests click what a person would read.
//
// Uses the hooks that Dear ImGui calls for each item when IMGUI_ENABLE_TEST_ENGINE is defined. Off until
// asked for.
#pragma once

#include <string>
#include <vector>

namespace lw::page {

struct Item {
  unsigned id = 0;     // Dear ImGui's, unique within a frame
  std::string window;  // name of the window or child it lies in
  std::string label;   // whole label, with what stands behind ## too; empty for items without one
  float x = 0, y = 0;  // CSS pixels, corner of the part of it that can be seen
  float width = 0, height = 0;
};

/// Begins (or ends) listing items. Begins with the next frame.
void list_items(bool on);

/// To be called before each ImGui::NewFrame(): the list starts anew.
void clear_items();

/// Items of the frame so far, in the order of their submission; hidden and clipped ones left out.
const std::vector<Item>& items();

/// The same as JSON: [{"id":1,"window":"","label":"","x":0,"y":0,"width":0,"height":0},...]
std::string items_json();

}  // namespace lw::page
