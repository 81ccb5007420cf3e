// Rows of the panel: a label, what is set, and a message below when something is wrong with it.
//
// Rows flow into as many columns as the width has room for. A label answers too: pointing at it tells what
// the field means, its default and its range; two quick clicks put the default back. A dot before the label
// marks a value that is not the default; pressing the dot does the same.
#pragma once

#include <string>
#include <string_view>

#include "web/panel/grips.h"

namespace lw::panel {

struct Rows {
  Ui& ui;
  float left = 0, width = 0;  // of the whole area, CSS pixels
  int columns = 1, column = 0;
  float top = 0, bottom = 0;  // of the line of rows being filled
};

Rows begin_rows(Ui& ui);
void end_rows(Rows& rows);  // the cursor of Dear ImGui goes below the last row
void new_line(Rows& rows);  // the next row begins at the left

struct RowPlace {
  float x, y, width;
  float label;    // width of the label's part
  float control;  // x where the control begins
  float room;     // width left for it
};

/// What a row says about its field.
struct RowLabel {
  std::string_view path;
  std::string_view label;
  std::string_view meaning;
  std::string usual;  // "60 mm"; empty when there is no default to go back to
  std::string range;  // "between 1 and 5000 mm"
  bool changed = false;
};

/// Draws the label; returns true when the default is to be put back. The cursor is at the control afterwards.
bool begin_row(Rows& rows, const RowLabel& label, RowPlace& place);
/// Puts messages that belong to `path` below the row.
void end_row(Rows& rows, const RowPlace& place, std::string_view path, std::string_view meaning = "");

/// A whole row for a number. `set` is called with the new value.
struct NumberRow {
  std::string_view path, label, unit, meaning;
  Range range;
  double grain = 1.0, usual = 0.0;
  bool whole = false, one_sided = false;
  bool no_default = false;  // `usual` only tells how far the line spans
};
template <class Set>
void number_row(Rows& rows, const NumberRow& row, double value, Set&& set);

/// Takes what a grip reports into the scenario.
template <class Set>
void take(Ui& ui, const Moved& moved, Set&& set) {
  if (moved.value) {
    set(*moved.value);
    touch(ui.desk);
  }
  if (moved.done) end_edit(ui.desk);
}

inline std::string with_unit(const std::string& number, std::string_view unit) {
  return unit.empty() ? number : number + " " + std::string(unit);
}

std::string range_words(const Range& range, std::string_view unit);

template <class Set>
void number_row(Rows& rows, const NumberRow& row, double value, Set&& set) {
  Ui& ui = rows.ui;
  RowPlace place;
  const RowLabel label{
      row.path,
      row.label,
      row.meaning,
      row.no_default ? std::string() : with_unit(shown_number(row.usual, row.grain), row.unit),
      range_words(row.range, row.unit),
      value != row.usual};
  if (begin_row(rows, label, place)) {
    begin_edit(ui.desk);
    take(ui, {row.usual, true}, set);
  }
  const float entry = ui.px(row.unit.size() > 2 ? 98.0f : 90.0f);
  const NumberGrip grip{row.path, row.unit, row.range, row.grain, row.usual, row.whole, row.one_sided};
  take(ui, line_grip(ui, grip, value, place.room - entry - ui.px(6)), set);
  ImGui::SetCursorScreenPos({place.x + place.width - entry, place.y});
  take(ui, entry_grip(ui, grip, value, entry), set);
  end_row(rows, place, row.path, row.meaning);
}

}  // namespace lw::panel
