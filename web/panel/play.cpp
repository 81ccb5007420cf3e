#include "web/panel/play.h"

#include <algorithm>
#include <cmath>

namespace lw::panel {
namespace {

constexpr std::string_view rate_names[] = {"\u00BC", "\u00BD", "1", "2", "4", "8\u00D7"};

int chosen_rate(const Playback& playback) {
  for (int i = 0; i < static_cast<int>(std::size(play_rates)); ++i) {
    if (play_rates[i] == playback.rate) return i;
  }
  return -1;
}

float width_of(const Ui& ui, std::span<const char* const> labels) {
  float width = ui.px(5) * static_cast<float>(labels.size() - 1);
  for (const char* label : labels) width += measure(ui, Type::text, label).x + ui.px(22);
  return width;
}

void keep_button(Ui& ui, float left, float right) {
  Desk& desk = ui.desk;
  const char* labels[] = {"Keep to compare"};
  if (width_of(ui, labels) > right - left) labels[0] = "Keep";
  ImGui::SetCursorScreenPos({right - width_of(ui, labels), ImGui::GetCursorScreenPos().y});
  if (button(ui, labels[0], Weight::plain, 0, has_drive(desk))) {
    keep(desk);
    say(desk, "Kept. What you change now is shown beside it.");
  }
  tip(ui, "Keeps this drive beside the ones to come: path, curves, and the difference in figures");
}

/// What is done with the kept choice, right-aligned within [left, right]; returns where it begins.
float kept_controls(Ui& ui, float left, float right) {
  Desk& desk = ui.desk;
  const char* labels[] = {"Keep this", desk.show_kept ? "Hide kept" : "Show kept", "Go back", "Drop"};
  const char* brief[] = {"Keep", desk.show_kept ? "Hide" : "Show", "Back", "Drop"};
  if (width_of(ui, labels) + ui.px(14) > right - left) std::copy(std::begin(brief), std::end(brief), labels);
  const ImVec2 at{right - width_of(ui, labels), ImGui::GetCursorScreenPos().y};
  ImGui::SetCursorScreenPos(at);
  ImGui::GetWindowDrawList()->AddRectFilled({at.x - ui.px(10), at.y + ui.px(4)},
                                            {at.x - ui.px(5), at.y + ui.row_height() - ui.px(4)},
                                            ui.colours().kept);
  if (button(ui, labels[0])) keep(desk);
  tip(ui, "Compare with what is on screen now instead");
  ImGui::SameLine(0, ui.px(5));
  if (button(ui, labels[1])) desk.show_kept = !desk.show_kept;
  tip(ui, "The kept drive beside this one");
  ImGui::SameLine(0, ui.px(5));
  if (button(ui, labels[2])) replace(desk, Scenario(desk.kept->scenario));
  tip(ui, "Puts the kept scenario back on screen");
  ImGui::SameLine(0, ui.px(5));
  if (button(ui, labels[3])) drop_kept(desk);
  tip(ui, "Forgets the kept drive");
  return at.x - ui.px(10);
}

}  // namespace

void step_loops(Desk& desk, int loops) {
  if (!has_drive(desk)) return;
  const auto& rows = desk.good.trace.rows;
  const auto last = static_cast<std::int64_t>(rows.size()) - 1;
  const auto now = static_cast<std::int64_t>(row_at(desk.good.trace, desk.playback.cursor));
  const auto next = std::clamp<std::int64_t>(now + loops, 0, last);
  desk.playback.playing = false;
  set_cursor(desk, rows[static_cast<std::size_t>(next)].t);
}

void toggle_play(Desk& desk) {
  if (!has_drive(desk)) return;
  Playback& playback = desk.playback;
  playback.playing = !playback.playing;
  if (playback.playing && playback.cursor >= desk.good.trace.rows.back().t) playback.cursor = 0.0;
}

void draw_play(Ui& ui, const Box& box) {
  Desk& desk = ui.desk;
  const Theme& t = ui.colours();
  const float y = box.y + (box.height - ui.row_height()) / 2, gap = ui.px(5);
  const bool ready = has_drive(desk);
  ImGui::SetCursorScreenPos({box.x + ui.px(12), y});
  if (icon_button(ui, "To the start", Icon::start, ready)) {
    desk.playback.playing = false;
    set_cursor(desk, 0.0);
  }
  ImGui::SameLine(0, gap);
  if (icon_button(ui, "One loop back", Icon::back, ready)) step_loops(desk, -1);
  ImGui::SameLine(0, gap);
  const bool playing = desk.playback.playing;
  if (icon_button(ui, playing ? "Pause" : "Play", playing ? Icon::pause : Icon::play, ready, ui.px(48))) {
    toggle_play(desk);
  }
  ImGui::SameLine(0, gap);
  if (icon_button(ui, "One loop on", Icon::forward, ready)) step_loops(desk, 1);
  ImGui::SameLine(0, ui.px(12));
  const float rates = ui.px(desk.layout.touch ? 252 : 216);
  const int picked = choice(ui, "speed", rate_names, chosen_rate(desk.playback), rates);
  if (picked >= 0) desk.playback.rate = play_rates[picked];
  ImGui::SameLine(0, ui.px(14));
  const ImVec2 at = ImGui::GetCursorScreenPos();
  float right = box.right() - ui.px(10);
  if (desk.kept) {
    right = kept_controls(ui, at.x, right);
  } else {
    keep_button(ui, at.x + ui.px(150), right);
    right -= ui.px(70);
  }
  const double end = ready ? desk.good.trace.rows.back().t : 0.0;
  const std::string now = fixed(desk.playback.cursor, 2) + " s", whole = "of " + fixed(end, 2);
  const float first = measure(ui, Type::strong, now).x, second = measure(ui, Type::text, whole).x;
  const float text_y = y + (ui.row_height() - line_height(ui, Type::strong)) / 2;
  if (at.x + first < right) put_text(ui, Type::strong, {at.x, text_y}, t.text, now);
  if (at.x + first + ui.px(6) + second < right) {
    put_text(ui, Type::text, {at.x + first + ui.px(6), text_y}, t.faint, whole);
  }
}

}  // namespace lw::panel
