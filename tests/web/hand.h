// A hand for panel tests without a window: draws with Dear ImGui into nothing, finds widgets by what is
// written on them, and presses, drags and types as the browser would pass it on.
//
//   lw::Hand hand;                        // the whole application (web/page_app.h), begun anew
//   lw::Hand hand([&] { panel(state); }); // or one panel alone, drawn in a window over the whole screen
//   hand.click("Close the course");
#pragma once

#include <functional>
#include <string>
#include <string_view>

#include "web/page/items.h"

namespace lw {

class Hand {
 public:
  Hand(float width = 1280, float height = 800);
  explicit Hand(std::function<void()> draw, float width = 1280, float height = 800);
  ~Hand();
  Hand(const Hand&) = delete;
  Hand& operator=(const Hand&) = delete;

  /// Draws `count` frames, a 60th of a second each. Returns what app::frame() returned last.
  bool frame(int count = 1);

  /// The widget with this label (the part before ##, or all of it) in a window whose name contains `window`.
  /// A test that asks for one that is not there fails with a list of those that are.
  page::Item find(std::string_view label, std::string_view window = {});
  bool has(std::string_view label, std::string_view window = {});

  void click(std::string_view label, std::string_view window = {});
  void drag(std::string_view label, float dx, float dy, std::string_view window = {});

  /// Puts `text` in place of what a field holds; on a slider or a drag with `control`, as Ctrl and a click
  /// does.
  void type(std::string_view label, std::string_view text, bool control = false,
            std::string_view window = {});

  /// Mouse at a place, in CSS pixels; button 0 left, 1 right.
  void move(float x, float y);
  void press(int button = 0);
  void release(int button = 0);
  void wheel(float lines);

  /// A key pressed and released, with Ctrl held or not. `key` is an ImGuiKey.
  void key(int key, bool control = false);

 private:
  void open(float width, float height);
  std::function<bool()> draw_;
};

}  // namespace lw
