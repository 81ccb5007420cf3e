// The start: dragged along the line.
#include <cmath>

#include "web/view/bench.h"
#include "web/view/course_whole.h"

namespace lw::view {

void work_start(Bench& bench) {
  if (!panel::has_drive(bench.desk)) return grip_floor(bench);
  Held& held = bench.floor.held;
  const Pointer& hand = bench.pointer;
  std::optional<double> place;
  if (bench.idle() && hand.over && bench.in_step()) place = line_under(bench, hand.at);
  if (hand.pressed && bench.idle()) {
    if (place) {
      take(bench, Grip::start).s = *place;
    } else {
      grip_floor(bench);
    }
  }
  if (held.grip == Grip::start && (hand.held || hand.released)) {
    const Centreline& line = held.ground->line;
    held.s = followed(line, held.s, to_floor(bench.floor.view, hand.at));
    // A press without movement puts the start there as well.
    const double snap = std::min(6.0 / bench.floor.view.scale, 20.0);
    if (hand.held) attempt(bench, with_start_at(held.base, line, 1e3 * held.s, snap));
  }
  if (place && hand.reach < 15) {
    const Pixel at = screen_of(bench, point_at(bench.line(), *place));
    bench.draw.AddCircle(vec(at), 9.0f * bench.unit, bench.theme.accent, 0, 2.5f);
    ImGui::SetMouseCursor(ImGuiMouseCursor_Hand);
  }
}

}  // namespace lw::view
