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

void kept_controls(Ui& ui, float right) {
  Desk& desk = ui.desk;
  const bool narrow = desk.layout.upright;
  const char* keep_label = narrow ? "Keep" : "Keep to compare";
  if (!desk.kept) {
    const float width = measure(ui, Type::text, keep_label).x + ui.px(22);
    ImGui::SetCursorScreenPos({right - width, ImGui::GetCursorScreenPos().y});
    if (button(ui, keep_label, Weight::plain, 0, has_drive(desk))) {
      keep(desk);
      say(desk, "Kept. What you change now is shown beside it.");
    }
    tip(ui,
        "Keeps this drive beside the ones to come: its path on the floor, its curves, and the difference in "
        "figures");
    return;
  }
  const char* labels[] = {"Keep this", desk.show_kept ? "Hide kept" : "Show kept", "Go back", "Drop"};
  float width = ui.px(5) * 3;
  for (const char* label : labels) width += measure(ui, Type::text, label).x + ui.px(22);
  ImGui::SetCursorScreenPos({right - width, ImGui::GetCursorScreenPos().y});
  const ImVec2 at = ImGui::GetCursorScreenPos();
  ImGui::GetWindowDrawList()->AddRectFilled({at.x - ui.px(12), at.y + ui.px(4)},
                                            {at.x - ui.px(7), at.y + ui.row_height() - ui.px(4)},
                                            ui.colours().kept);
  if (button(ui, labels[0])) keep(desk);
  tip(ui, "Compare with what is on screen now instead");
  ImGui::SameLine(0, ui.px(5));
  if (button(ui, labels[1])) desk.show_kept = !desk.show_kept;
  ImGui::SameLine(0, ui.px(5));
  if (button(ui, labels[2])) replace(desk, Scenario(desk.kept->scenario));
  tip(ui, "Puts the kept scenario back on screen");
  ImGui::SameLine(0, ui.px(5));
  if (button(ui, labels[3])) drop_kept(desk);
  tip(ui, "Forgets the kept drive");
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
  const float rates = ui.px(desk.layout.touch ? 264 : 228);
  const int picked = choice(ui, "speed", rate_names, chosen_rate(desk.playback), rates);
  if (picked >= 0) desk.playback.rate = play_rates[picked];
  ImGui::SameLine(0, ui.px(14));
  const double end = ready ? desk.good.trace.rows.back().t : 0.0;
  const ImVec2 at = ImGui::GetCursorScreenPos();
  const float text_y = y + (ui.row_height() - line_height(ui, Type::strong)) / 2;
  if (!desk.layout.upright || !desk.kept) {
    const float width =
        put_text(ui, Type::strong, {at.x, text_y}, t.text, fixed(desk.playback.cursor, 2) + " s");
    put_text(ui, Type::text, {at.x + width + ui.px(6), text_y}, t.faint, "of " + fixed(end, 2));
  }
  ImGui::SetCursorScreenPos({at.x, y});
  kept_controls(ui, box.right() - ui.px(10));
}

}  // namespace lw::panel
