#include "web/panel/rows.h"

#include <algorithm>
#include <cmath>

namespace lw::panel {
namespace {

constexpr float least_column = 330.0f;  // CSS pixels at scale 1 below which a row gets cramped
constexpr float gap = 22.0f;
constexpr float label_width = 137.0f;

/// Whether a message about `about` ("sensors.gain[1]") belongs to the row of `path` ("sensors.gain").
bool concerns(std::string_view about, std::string_view path) {
  return about.substr(0, path.size()) == path && (about.size() == path.size() || about[path.size()] == '[');
}

void message(const Ui& ui, const RowPlace& place, std::string_view text, ImU32 colour) {
  const ImVec2 at{place.x + ui.px(10), ImGui::GetCursorScreenPos().y};
  const float wrap = place.width - ui.px(10);
  put_text(ui, Type::small, at, colour, text, wrap);
  ImGui::SetCursorScreenPos(at);
  ImGui::Dummy({wrap, measure(ui, Type::small, text, wrap).y + ui.px(4)});
}

std::string help_text(const RowLabel& label) {
  std::string text(label.meaning);
  if (!label.usual.empty()) text += "\nDefault " + label.usual + ".";
  if (!label.range.empty()) text += (label.usual.empty() ? "\n" : " ") + ("Takes " + label.range + ".");
  return text;
}

}  // namespace

Rows begin_rows(Ui& ui) {
  const ImVec2 at = ImGui::GetCursorScreenPos();
  const float width = ImGui::GetContentRegionAvail().x;
  const int columns = std::max(1, static_cast<int>((width + ui.px(gap)) / ui.px(least_column + gap)));
  return {ui, at.x, width, columns, 0, at.y, at.y};
}

void new_line(Rows& rows) {
  rows.column = 0;
  rows.top = rows.bottom;
  ImGui::SetCursorScreenPos({rows.left, rows.top});
}

void end_rows(Rows& rows) {
  new_line(rows);
  ImGui::Dummy({0, 0});
}

std::string range_words(const Range& range, std::string_view unit) {
  FieldInfo info;
  info.range = range;
  info.unit = unit;
  return range_text(info);
}

bool begin_row(Rows& rows, const RowLabel& label, RowPlace& place) {
  Ui& ui = rows.ui;
  const Theme& t = ui.colours();
  if (rows.column >= rows.columns) new_line(rows);
  const float count = static_cast<float>(rows.columns);
  place.width = std::floor((rows.width - (count - 1) * ui.px(gap)) / count);
  place.x = rows.left + static_cast<float>(rows.column) * (place.width + ui.px(gap));
  place.y = rows.top;
  place.label = ui.px(label_width);
  place.control = place.x + place.label;
  place.room = place.width - place.label;

  const std::string id = std::string(label.path) + " label";
  ImGui::SetCursorScreenPos({place.x, place.y});
  const bool pressed = ImGui::InvisibleButton(id.c_str(), {place.label, ui.row_height()});
  const bool twice = ImGui::IsItemHovered() && ImGui::IsMouseDoubleClicked(ImGuiMouseButton_Left);
  const bool on_dot = pressed && ImGui::GetIO().MousePos.x < place.x + ui.px(12);
  if (pressed && ui.desk.layout.touch) {
    ui.state.help = ui.state.help == label.path ? std::string() : std::string(label.path);
  }
  const float middle = place.y + ui.row_height() / 2;
  const bool marked = label.changed && !label.usual.empty();
  if (marked) ImGui::GetWindowDrawList()->AddCircleFilled({place.x + ui.px(3), middle}, ui.px(3), t.accent);
  put_text(ui, Type::text, {place.x + ui.px(11), middle - line_height(ui, Type::text) / 2},
           ImGui::IsItemHovered() ? t.text
           : marked               ? t.text
                                  : t.faint,
           fitted(ui, Type::text, label.label, place.label - ui.px(13)));
  tip(ui, help_text(label));
  ImGui::SetCursorScreenPos({place.control, place.y});
  return marked && (twice || on_dot);
}

void end_row(Rows& rows, const RowPlace& place, std::string_view path, std::string_view meaning) {
  Ui& ui = rows.ui;
  ImGui::SetCursorScreenPos({place.x, place.y + ui.row_height()});
  const Theme& t = ui.colours();
  const PanelState& state = ui.state;
  if (concerns(state.refusal.path, path)) message(ui, place, state.refusal.why, t.bad);
  if (state.fault && concerns(state.fault->path, path)) {
    message(ui, place, state.fault->path + " = " + state.fault->value + ": " + state.fault->rule, t.bad);
  }
  if (!meaning.empty() && state.help == path) message(ui, place, meaning, t.faint);
  rows.bottom = std::max(rows.bottom, ImGui::GetCursorScreenPos().y);
  ++rows.column;
}

}  // namespace lw::panel
