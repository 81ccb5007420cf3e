#include "web/panel/hand_over.h"

#include <cinttypes>
#include <cstdio>

#include "web/host.h"
#include "web/panel/field_rows.h"
#include "web/panel/files.h"
#include "web/panel/quick.h"

namespace lw::panel {
namespace {

struct GainLine {
  const char* name;
  std::string per_loop, per_second;
};

std::string gain_text(double value) { return shown_number(value, 0.0); }

/// The numbers that go into the vehicle's own loop.
void gain_sheet(Ui& ui) {
  const Scenario& s = ui.desk.scenario;
  const Theme& t = ui.colours();
  const BothUnits ki = ki_of(s), kd = kd_of(s);
  const GainLine lines[] = {{"Kp", gain_text(s.controller.kp), gain_text(s.controller.kp)},
                            {"Ki", gain_text(ki.per_loop), gain_text(ki.per_second)},
                            {"Kd", gain_text(kd.per_loop), gain_text(kd.per_second)}};
  const ImVec2 at = ImGui::GetCursorScreenPos();
  const float first = ui.px(112), second = ui.px(226), line = line_height(ui, Type::text) + ui.px(3);
  put_text(ui, Type::small, {at.x + first, at.y}, t.faint,
           "per loop of " + shown_number(s.loop.period_ms, 0.1) + " ms");
  put_text(ui, Type::small, {at.x + second + ui.px(20), at.y}, t.faint, "per second");
  float y = at.y + line_height(ui, Type::small) + ui.px(2);
  for (const GainLine& gain : lines) {
    put_text(ui, Type::text, {at.x + ui.px(11), y}, t.faint, gain.name);
    put_text(ui, Type::strong, {at.x + first, y}, t.text, gain.per_loop);
    put_text(ui, Type::strong, {at.x + second + ui.px(20), y}, t.text, gain.per_second);
    y += line;
  }
  ImGui::Dummy({ui.px(300), y - at.y});
}

/// One figure that is copied when it, or the button beside it, is pressed. Its item carries the value as its
/// label.
void copy_line(Ui& ui, const char* name, const std::string& value) {
  const ImVec2 at = ImGui::GetCursorScreenPos();
  const float left = ui.px(112), width = measure(ui, Type::text, value).x;
  const float y = at.y + (ui.row_height() - line_height(ui, Type::text)) / 2;
  put_text(ui, Type::text, {at.x + ui.px(11), y}, ui.colours().faint, name);
  put_text(ui, Type::text, {at.x + left, y}, ui.colours().text, value);
  ImGui::SetCursorScreenPos({at.x + left, at.y});
  bool copy = ImGui::InvisibleButton((value + "##" + name).c_str(), {width, ui.row_height()});
  ImGui::SameLine(0, ui.px(12));
  copy = button(ui, (std::string("Copy##") + name).c_str()) || copy;
  if (!copy) return;
  host::copy_text(value);
  say(ui.desk, std::string(name) + " copied.");
}

}  // namespace

std::string hash_text(std::uint64_t hash) {
  char text[24];
  std::snprintf(text, sizeof text, "%016" PRIx64, hash);
  return text;
}

void hand_over(Ui& ui) {
  Desk& desk = ui.desk;
  title(ui, "Scenario");
  Rows rows = begin_rows(ui);
  section_rows(rows, "");
  end_rows(rows);
  ImGui::Dummy({0, ui.px(4)});
  if (button(ui, "Copy link##hand over", Weight::strong)) copy_link(desk);
  ImGui::SameLine(0, ui.px(6));
  if (button(ui, "Save scenario")) save_scenario(desk);
  ImGui::SameLine(0, ui.px(6));
  if (button(ui, "Save trace", Weight::plain, 0, has_drive(desk))) save_trace(desk);
  tip(ui, "Every loop of this drive as CSV");

  title(ui, "Gains for the vehicle");
  gain_sheet(ui);

  title(ui, "Expectations");
  paragraph(ui, "What `linewright check` asserts for this scenario.", ui.colours().faint);
  Rows expectations = begin_rows(ui);
  section_rows(expectations, "expect");
  end_rows(expectations);

  if (!has_drive(desk)) return;
  title(ui, "Same bits everywhere");
  copy_line(ui, "Trace hash", hash_text(desk.good.hash));
  copy_line(ui, "Steps", std::to_string(desk.good.summary.steps));
  paragraph(ui, "The command line gives this hash for the same scenario.", ui.colours().faint);
}

}  // namespace lw::panel
