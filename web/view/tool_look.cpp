// Looking: the floor is moved with the hand, the path and the vehicle are moved along in time.
#include <cmath>
#include <cstdio>

#include "web/page/typeface.h"
#include "web/view/bench.h"
#include "web/view/overlays.h"

namespace lw::view {
namespace {

std::size_t cursor_row(const Bench& bench) {
  return panel::row_at(bench.desk.good.trace, bench.desk.playback.cursor);
}

/// The row of the path under the hand, if any. The vehicle counts as well: its row is that of the cursor.
std::optional<std::size_t> row_under(const Bench& bench, float reach) {
  if (!panel::has_drive(bench.desk)) return {};
  const NearRow near =
      nearest_row(bench.floor.path, bench.floor.view, bench.pointer.at, cursor_row(bench), reach);
  if (near.distance > reach) return {};
  return near.row;
}

void say_what_is_here(const Bench& bench, std::size_t row) {
  const TraceRow& here = bench.desk.good.trace.rows[row];
  const double off = 1e3 * here.deviation;
  char text[96];
  std::snprintf(text, sizeof text, "%.2f s   %.2f m   %.1f mm %s", here.t, here.progress, std::fabs(off),
                off > 0   ? "left"
                : off < 0 ? "right"
                          : "");
  const Pixel at = to_screen(bench.floor.view, bench.floor.path.x[row], bench.floor.path.y[row]);
  bench.draw.AddCircleFilled(vec(at), 5.0f * bench.unit, bench.theme.text);
  draw_bubble(bench, at, text, bench.theme.text);
}

}  // namespace

void work_look(Bench& bench) {
  Held& held = bench.floor.held;
  if (held.grip == Grip::time && bench.pointer.held) {
    if (const auto row = row_under(bench, 1e6f)) {
      panel::set_cursor(bench.desk, bench.desk.good.trace.rows[*row].t);
      say_what_is_here(bench, *row);
    }
    return;
  }
  if (!bench.idle() || !bench.pointer.over) return;
  const auto row = row_under(bench, bench.pointer.reach);
  if (bench.pointer.twice) {
    fit_floor(bench.floor, bench.desk);
  } else if (bench.pointer.pressed && row) {
    take(bench, Grip::time);
    bench.desk.playback.playing = false;
    panel::set_cursor(bench.desk, bench.desk.good.trace.rows[*row].t);
  } else if (row && bench.pointer.reach < 15) {
    say_what_is_here(bench, *row);
    ImGui::SetMouseCursor(ImGuiMouseCursor_Hand);
  }
  grip_floor(bench);
}

}  // namespace lw::view
