#include "web/panel/panel.h"

#include <imgui_internal.h>

#include <algorithm>
#include <cmath>

#include "web/host.h"
#include "web/panel/field_rows.h"
#include "web/panel/hand_over.h"
#include "web/panel/layout.h"
#include "web/panel/play.h"
#include "web/panel/quick.h"

namespace lw::panel {
namespace {

constexpr float pad = 14.0f;
constexpr float scales[] = {0.85f, 1.0f, 1.2f, 1.4f, 1.6f};

void next_scale(Ui& ui) {
  const ImVec2 window = ImGui::GetIO().DisplaySize;
  const float most = largest_scale(window.x, window.y);
  const auto* larger = std::find_if(std::begin(scales), std::end(scales),
                                    [&](float s) { return s > ui.desk.scale + 0.01f && s <= most; });
  ui.state.wanted_scale = larger == std::end(scales) ? scales[0] : *larger;
}

void actions(Ui& ui) {
  Desk& desk = ui.desk;
  const float gap = ui.px(5), wide = ui.px(12);
  // Both words get the same margin: the usual one, or what a narrow panel leaves.
  const char* scenarios = ui.state.library_open ? "Back" : "Scenarios";
  const float first = measure(ui, Type::text, scenarios).x, second = measure(ui, Type::text, "Copy link").x;
  const float icons = 4 * ui.row_height() + ui.px(8) + 3 * gap + 2 * wide;
  const float spare = (ImGui::GetContentRegionAvail().x - icons - first - second) / 2;
  const float margin = std::clamp(spare, ui.px(4), ui.px(22));
  if (icon_button(ui, "Undo", Icon::undo, can_undo(desk))) undo(desk);
  ImGui::SameLine(0, gap);
  if (icon_button(ui, "Redo", Icon::redo, can_redo(desk))) redo(desk);
  ImGui::SameLine(0, wide);
  if (button(ui, scenarios, ui.state.library_open ? Weight::strong : Weight::plain, first + margin)) {
    ui.state.library_open = !ui.state.library_open;
  }
  ImGui::SameLine(0, gap);
  if (button(ui, "Copy link", Weight::plain, second + margin)) copy_link(desk);
  tip(ui, "A link to this page that holds the whole scenario");
  ImGui::SameLine(0, wide);
  if (icon_button(ui, desk.dark ? "Light colours" : "Dark colours", desk.dark ? Icon::sun : Icon::moon)) {
    desk.dark = !desk.dark;
  }
  ImGui::SameLine(0, gap);
  if (button(ui, "Aa", Weight::plain, ui.row_height() + ui.px(8))) next_scale(ui);
  tip(ui, "Size of everything: " + fixed(desk.scale * 100.0, 0) + " %");
}

/// The steps as stops along one line.
void stops(Ui& ui) {
  const Theme& t = ui.colours();
  ImDrawList& draw = *ImGui::GetWindowDrawList();
  const ImVec2 at = ImGui::GetCursorScreenPos();
  const float width = ImGui::GetContentRegionAvail().x;
  const float height = ui.px(ui.desk.layout.touch ? 50.0f : 46.0f), y = std::round(at.y + ui.px(13));
  float letters = 0;
  for (const char* name : step_names) letters += measure(ui, Type::small, name).x;
  const float space = (width - letters) / static_cast<float>(std::size(step_names));
  float x = at.x;
  std::vector<float> middles;
  for (std::size_t i = 0; i < std::size(step_names); ++i) {
    const float room = measure(ui, Type::small, step_names[i]).x + space;
    middles.push_back(std::round(x + room / 2));
    x += room;
  }
  draw.AddLine({middles.front(), y}, {middles.back(), y}, t.rule, ui.px(4));
  x = at.x;
  for (std::size_t i = 0; i < std::size(step_names); ++i) {
    const float letter_width = measure(ui, Type::small, step_names[i]).x, room = letter_width + space;
    ImGui::SetCursorScreenPos({x, at.y});
    if (ImGui::InvisibleButton(step_names[i], {room, height})) {
      ui.state.step = static_cast<Step>(i);
      ui.state.library_open = false;
    }
    const bool on = ui.state.step == static_cast<Step>(i) && !ui.state.library_open;
    const bool hot = ImGui::IsItemHovered();
    draw.AddCircleFilled({middles[i], y}, ui.px(on ? 8.0f : 6.5f), on ? t.accent : hot ? t.text : t.rule);
    draw.AddCircleFilled({middles[i], y}, ui.px(on ? 3.0f : 4.0f), t.surface);
    put_text(ui, Type::small, {middles[i] - letter_width / 2, at.y + ui.px(25)},
             on    ? t.accent
             : hot ? t.text
                   : t.faint,
             step_names[i]);
    x += room;
  }
  ImGui::SetCursorScreenPos({at.x, at.y + height});
  ImGui::Dummy({width, ui.px(2)});
}

void group(Ui& ui, const char* name, std::string_view section) {
  title(ui, name);
  Rows rows = begin_rows(ui);
  section_rows(rows, section);
  end_rows(rows);
}

void derived_speed(Ui& ui) {
  if (!has_drive(ui.desk)) return;
  const Vehicle& v = ui.desk.scenario.vehicle;
  constexpr double pi = 3.14159265358979;
  const double top =
      v.top_speed_rpm / 60.0 * pi * (v.wheel_left_mm + v.wheel_right_mm) / 2 * v.supply_pct / 100;
  const double base = top * ui.desk.scenario.controller.base_pct / 100;
  paragraph(
      ui,
      "Top speed " + fixed(top, 0) + " mm/s; base speed " + fixed(base, 0) + " mm/s before the dead band.",
      ui.colours().faint);
}

void step_content(Ui& ui) {
  switch (ui.state.step) {
    case Step::vehicle:
      group(ui, "Wheels and motors", "vehicle");
      return derived_speed(ui);
    case Step::sensors:
      return group(ui, "Sensors", "sensors");
    case Step::course:
      group(ui, "Line", "course");
      group(ui, "Floor", "floor");
      return group(ui, "Drive", "drive");
    case Step::controller:
      group(ui, "Control law", "controller");
      group(ui, "Loop", "loop");
      return;
    case Step::stress:
      group(ui, "Tolerances", "stress");
      paragraph(
          ui,
          "Each stressed drive draws every tolerance anew. They are part of the scenario: file, link and the "
          "command line read them.",
          ui.colours().faint);
      return;
    case Step::hand_over:
      return hand_over(ui);
  }
}

void library_content(Ui& ui, const std::vector<LibraryEntry>& library) {
  Desk& desk = ui.desk;
  const Theme& t = ui.colours();
  ImGui::Dummy({0, ui.px(4)});
  if (button(ui, "Open a file", Weight::strong)) host::choose_file(".toml,.txt");
  ImGui::SameLine(0, ui.px(6));
  if (button(ui, "Save as file")) save_scenario(desk);
  const float width = ImGui::GetContentRegionAvail().x;
  if (auto text =
          text_entry(ui, "##link", ui.state.link_entry, width, 1u << 19, "Paste a link or a scenario here")) {
    if (!text->empty() && take_text(desk, *text, "pasted text")) ui.state.library_open = false;
  }
  title(ui, "Ready made");
  for (const LibraryEntry& entry : library) {
    const ImVec2 at = ImGui::GetCursorScreenPos();
    const std::string& name = entry.scenario.title.empty() ? entry.name : entry.scenario.title;
    const float inner = width - ui.px(16);
    const float note =
        entry.scenario.note.empty() ? 0.0f : measure(ui, Type::small, entry.scenario.note, inner).y;
    const float height = std::max(ui.row_height(), line_height(ui, Type::text) + note + ui.px(12));
    if (ImGui::InvisibleButton(entry.name.c_str(), {width, height})) {
      replace(desk, Scenario(entry.scenario));
      ui.state.library_open = false;
    }
    ImDrawList& draw = *ImGui::GetWindowDrawList();
    if (ImGui::IsItemHovered()) draw.AddRectFilled(at, {at.x + width, at.y + height}, t.raised, ui.px(3));
    put_text(ui, Type::text, {at.x + ui.px(8), at.y + ui.px(5)}, t.text, fitted(ui, Type::text, name, inner));
    put_text(ui, Type::small, {at.x + ui.px(8), at.y + ui.px(5) + line_height(ui, Type::text)}, t.faint,
             entry.scenario.note, inner);
  }
}

/// A finger that goes up or down over the panel pushes it, unless it has moved a spot sideways first.
void push_scroll(Ui& ui) {
  if (!ui.desk.layout.touch || !ImGui::IsWindowHovered(ImGuiHoveredFlags_AllowWhenBlockedByActiveItem))
    return;
  const ImGuiIO& io = ImGui::GetIO();
  if (!io.MouseDown[0]) return;
  const ImVec2 gone{io.MousePos.x - io.MouseClickedPos[0].x, io.MousePos.y - io.MouseClickedPos[0].y};
  const float start = ui.px(8);
  if (!ui.state.pushing && std::abs(gone.y) > start && std::abs(gone.y) > 1.5f * std::abs(gone.x)) {
    ui.state.pushing = true;
    cancel_edit(ui.desk);
    ImGui::ClearActiveID();
  }
  if (ui.state.pushing) ImGui::SetScrollY(ImGui::GetScrollY() - io.MouseDelta.y);
}

}  // namespace

void draw_panel(Ui& ui, const Box& box, const std::vector<LibraryEntry>& library) {
  if (!ImGui::GetIO().MouseDown[0]) ui.state.pushing = false;
  const float side = ui.px(pad);
  const float inner = box.width - 2 * side;
  ImGui::SetCursorScreenPos({box.x + side, box.y + ui.px(10)});
  ImGui::BeginChild("panel", {inner, box.height - ui.px(10)}, ImGuiChildFlags_None,
                    ImGuiWindowFlags_NoScrollbar | ImGuiWindowFlags_NoScrollWithMouse);
  actions(ui);
  ImGui::Dummy({0, ui.px(2)});
  quick_rows(ui);
  ImGui::Dummy({0, ui.px(4)});
  stops(ui);
  ImGui::BeginChild("step", {inner + side - ui.px(2), 0}, ImGuiChildFlags_None, ImGuiWindowFlags_NoNav);
  ImGui::BeginChild("fields", {inner - ui.px(2), 0}, ImGuiChildFlags_AutoResizeY,
                    ImGuiWindowFlags_NoScrollWithMouse);
  if (ui.state.library_open) {
    library_content(ui, library);
  } else {
    step_content(ui);
  }
  ImGui::Dummy({0, ui.px(24)});
  ImGui::EndChild();
  push_scroll(ui);
  ImGui::EndChild();
  ImGui::EndChild();
}

void draw_notice(Ui& ui, const Box& floor) {
  Notice& notice = ui.desk.notice;
  if (notice.text.empty()) return;
  if (!notice.bad && ui.desk.now > notice.until) {
    notice = {};
    return;
  }
  const Theme& t = ui.colours();
  const float side = ui.px(14), close = notice.bad ? ui.row_height() : 0.0f;
  const float wrap = std::min(floor.width - 2 * side - close, ui.px(620)) - 2 * side;
  const ImVec2 letters = measure(ui, Type::text, notice.text, wrap);
  const float height = std::max(letters.y + ui.px(16), close), width = letters.x + 2 * side + close;
  const ImVec2 at{floor.x + (floor.width - width) / 2, floor.bottom() - height - ui.px(46)};
  const ImU32 edge = notice.bad ? t.bad : t.rule;
  // A child of its own: it lies over the floor, and takes the hand before it.
  ImGui::SetCursorScreenPos(at);
  ImGui::BeginChild("notice", {width, height}, ImGuiChildFlags_None, ImGuiWindowFlags_NoScrollbar);
  ImDrawList& draw = *ImGui::GetWindowDrawList();
  draw.AddRectFilled(at, {at.x + width, at.y + height}, t.surface, ui.px(4));
  draw.AddRectFilled(at, {at.x + ui.px(5), at.y + height}, notice.bad ? t.bad : t.good, ui.px(4));
  put_text(ui, Type::text, {at.x + side, at.y + (height - letters.y) / 2}, t.text, notice.text, wrap);
  if (notice.bad) {
    ImGui::SetCursorScreenPos({at.x + width - close, at.y + (height - close) / 2});
    if (icon_button(ui, "Close message", Icon::cross)) notice = {};
  }
  draw.AddRect(at, {at.x + width, at.y + height}, edge, ui.px(4));
  ImGui::EndChild();
}

void take_keys(Ui& ui) {
  const ImGuiIO& io = ImGui::GetIO();
  if (io.WantTextInput) return;
  Desk& desk = ui.desk;
  const bool command = io.ConfigMacOSXBehaviors ? io.KeySuper : io.KeyCtrl;
  const auto pressed = [](ImGuiKey key) { return ImGui::IsKeyPressed(key, true); };
  if (command && pressed(ImGuiKey_Z)) io.KeyShift ? redo(desk) : undo(desk);
  if (command && pressed(ImGuiKey_Y)) redo(desk);
  if (command && ImGui::IsKeyPressed(ImGuiKey_S, false)) save_scenario(desk);
  if (command && ImGui::IsKeyPressed(ImGuiKey_O, false)) host::choose_file(".toml,.txt");
  if (command || ImGui::IsAnyItemActive()) return;
  if (ImGui::IsKeyPressed(ImGuiKey_Space, false) && ImGui::GetCurrentContext()->NavId == 0) toggle_play(desk);
  if (pressed(ImGuiKey_Comma)) step_loops(desk, -1);
  if (pressed(ImGuiKey_Period)) step_loops(desk, 1);
}

}  // namespace lw::panel
