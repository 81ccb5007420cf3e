// Buttons and numbers that hover over the floor, laid side by side and on a further line where a line is
// full.
#pragma once

#include <initializer_list>
#include <optional>

#include "web/view/bench.h"

namespace lw::view {

/// Where the next control goes. Coordinates in px.
struct Flow {
  Bench& bench;
  float left, right, top;
  float x, y;

  Flow(Bench& b, float from, float to, float upper)
      : bench(b), left(from), right(to), top(upper), x(from), y(upper) {}
  float height() const;  // of one control
  float lower() const { return y + height(); }
  ImVec2 place(float width);  // takes the room for a control
  void space();               // a wider gap between groups
  void next_line();
};

float text_width(const Bench& bench, const char* text);
void write_middle(const Bench& bench, ImVec2 low, ImVec2 high, ImU32 colour, const char* text);

/// A button with a word on it. True when pressed.
bool word_button(Flow& flow, const char* word, bool enabled = true);

/// Words side by side of which one is chosen. The index newly chosen, or -1.
int word_choice(Flow& flow, const char* name, std::initializer_list<const char*> words, int chosen);

/// "Length [-] 400 mm [+]": a number to step or to type. The new value, held to its range, when there is one.
struct Measure {
  const char* name;
  const char* unit;
  double step, low, high;
};
std::optional<double> number_entry(Flow& flow, const Measure& measure, double value);

}  // namespace lw::view
