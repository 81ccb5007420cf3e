// The controls that the panel is made of: what a hand grips, drawn for this page.
//
// A number is a spot on a line: the line is the span that is useful around the value, a notch marks the
// default, the spot is dragged or the number beside it is typed. Choices are pieces of tape side by side.
// Every control reports what the hand did as a value; none of them changes a scenario by itself.
#pragma once

#include <imgui.h>

#include <optional>
#include <span>
#include <string>
#include <string_view>

#include "engine/scenario/fields.h"
#include "web/panel/desk.h"
#include "web/panel/panel_state.h"
#include "web/panel/theme.h"

namespace lw::panel {

/// What the panel's functions are handed.
struct Ui {
  Desk& desk;
  PanelState& state;
  const Theme& colours() const { return theme(desk.dark); }
  float px(float length) const { return length * desk.scale; }
  float row_height() const { return px(desk.layout.touch ? 42.0f : 32.0f); }
};

// ---- text ------------------------------------------------------------------------------------------------
enum class Type { text, small, strong, headline };
ImFont* font_of(Type type);
float line_height(const Ui& ui, Type type);
ImVec2 measure(const Ui& ui, Type type, std::string_view text, float wrap = 0.0f);
/// Draws text without an item; returns its width.
float put_text(const Ui& ui, Type type, ImVec2 at, ImU32 colour, std::string_view text, float wrap = 0.0f);
/// Cut to `width` with an ellipsis.
std::string fitted(const Ui& ui, Type type, std::string_view text, float width);

/// A number for the screen: as many decimals as `grain` has, more when the value has more.
std::string shown_number(double value, double grain);
/// A number with exactly `decimals`, and a true minus sign.
std::string fixed(double value, int decimals);
/// The number a hand typed: point or comma, a unit behind it is let go. Nothing when there is none.
std::optional<double> typed_number(std::string_view text);

// ---- numbers ---------------------------------------------------------------------------------------------
struct NumberGrip {
  std::string_view path;  // names the items: "controller.kp", and "controller.kp line" for the line
  std::string_view unit;
  Range range;
  double grain = 1.0;
  double usual = 0.0;      // the default
  bool whole = false;      // takes whole numbers only
  bool one_sided = false;  // the line spans from 0 up although the range goes below
};

/// The part of a range that a line of hand's length should span, around default and value.
struct Span {
  double low = 0.0, high = 1.0;
};
Span useful_span(const NumberGrip& grip, double value);
/// The nearest multiple of `grain` within the range.
double snapped(const Range& range, double grain, double value);

/// What the hand did with a number this frame.
struct Moved {
  std::optional<double> value;  // the new value, within the range; begin_edit() has been called
  bool done = false;            // lifted or entered: call end_edit() after taking the value
};

/// The line with its spot, `width` wide at the cursor of Dear ImGui.
Moved line_grip(const Ui& ui, const NumberGrip& grip, double value, float width);
/// The number to type, with its unit behind it. What cannot be taken becomes ui.state.refusal.
Moved entry_grip(const Ui& ui, const NumberGrip& grip, double value, float width);

// ---- the rest --------------------------------------------------------------------------------------------
enum class Weight { quiet, plain, strong };
/// A button as wide as its text, or `width` > 0. `label` is also what tests find it by.
bool button(const Ui& ui, const char* label, Weight weight = Weight::plain, float width = 0.0f,
            bool enabled = true);

enum class Icon {
  undo,
  redo,
  play,
  pause,
  back,
  forward,
  start,
  plus,
  minus,
  cross,
  sun,
  moon,
  fold,
  unfold
};
bool icon_button(const Ui& ui, const char* label, Icon icon, bool enabled = true, float width = 0.0f);

/// Pieces of tape side by side, one of them chosen. Returns the index newly chosen, or -1.
int choice(const Ui& ui, std::string_view path, std::span<const std::string_view> names, int chosen,
           float width);

/// One line of text to edit; the new text once it was entered or left.
std::optional<std::string> text_entry(const Ui& ui, const char* label, const std::string& value, float width,
                                      std::size_t most, const char* hint = "");

void tip(const Ui& ui, std::string_view text);  // for the item before it, after a moment
void title(const Ui& ui, const char* text);     // of a group of rows
void paragraph(const Ui& ui, std::string_view text, ImU32 colour, Type type = Type::small);

}  // namespace lw::panel
