// Gaps: drawn along the line, moved by their ends.
#include <cmath>

#include "web/view/bench.h"
#include "web/view/course_gaps.h"

namespace lw::view {
namespace {

struct GapEnd {
  int gap = -1;
  bool far_end = false;
};

GapEnd end_under(const Bench& bench) {
  GapEnd nearest;
  float least = 1.3f * bench.pointer.reach;
  const auto& gaps = bench.course().gaps_mm;
  for (std::size_t i = 0; i < gaps.size(); ++i) {
    for (const bool far_end : {false, true}) {
      const double s = 1e-3 * (far_end ? gaps[i].to_mm : gaps[i].from_mm);
      const float d = distance(bench.pointer.at, screen_of(bench, point_at(bench.line(), s)));
      if (d < least) least = d, nearest = {static_cast<int>(i), far_end};
    }
  }
  return nearest;
}

/// The hand's way along the line since it took hold, m; counts on over the start of a closed course.
void follow(Bench& bench) {
  Held& held = bench.floor.held;
  const Centreline& line = held.ground->line;
  const double before = held.s + held.travel;
  double step = followed(line, before, to_floor(bench.floor.view, bench.pointer.at)) - before;
  if (line.closed) step -= line.length * std::rint(step / line.length);
  held.travel += step;
}

void draw_gap(const Bench& bench, const Stretch& gap, bool chosen) {
  const ImU32 colour = chosen ? bench.theme.accent : bench.theme.warn;
  draw_along(bench, 1e-3 * gap.from_mm, 1e-3 * gap.to_mm, colour, 1.5f * bench.unit);
  for (const double s : {gap.from_mm, gap.to_mm})
    draw_spot(bench, screen_of(bench, point_at(bench.line(), 1e-3 * s)), chosen, false);
}

void press(Bench& bench, const GapEnd& end, const std::optional<double>& place) {
  panel::Selection& selection = bench.desk.selection;
  const int inside = place ? gap_at(bench.course(), 1e3 * *place, 0.0) : -1;
  const int gap = end.gap >= 0 ? end.gap : inside;
  if (bench.pointer.twice && gap >= 0) {
    edit_at_once(bench, with_gap_removed(bench.desk.scenario, static_cast<std::size_t>(gap)));
    selection = {};
    return;
  }
  selection = {};
  selection.gap = gap;
  if (end.gap >= 0) {
    Held& held = take(bench, Grip::gap_end, end.gap);
    held.far_end = end.far_end;
    const Stretch& held_gap = bench.course().gaps_mm[static_cast<std::size_t>(end.gap)];
    held.s = 1e-3 * (end.far_end ? held_gap.to_mm : held_gap.from_mm);
  } else if (place && inside < 0) {
    take(bench, Grip::new_gap).s = *place;
  } else {
    grip_floor(bench);
  }
}

}  // namespace

void work_gaps(Bench& bench) {
  if (!panel::has_drive(bench.desk)) return grip_floor(bench);
  Held& held = bench.floor.held;
  const Pointer& hand = bench.pointer;
  GapEnd end;
  std::optional<double> place;
  if (bench.idle() && hand.over && bench.in_step()) {
    end = end_under(bench);
    if (end.gap < 0) place = line_under(bench, hand.at);
  }
  if (hand.pressed && bench.idle()) press(bench, end, place);
  if ((held.grip == Grip::new_gap || held.grip == Grip::gap_end) && hand.held && moving(bench)) {
    follow(bench);
    const double length = 1e3 * held.ground->line.length, now = 1e3 * (held.s + held.travel);
    const auto wrapped = [&](double s) {
      return held.ground->line.closed ? s - length * std::floor(s / length) : s;
    };
    if (held.grip == Grip::gap_end) {
      attempt(bench,
              with_gap_end(held.base, static_cast<std::size_t>(held.index), held.far_end, now, length));
    } else {
      const double from = std::min(1e3 * held.s, now), to = std::max(1e3 * held.s, now);
      attempt(bench, with_gap(held.base, wrapped(from), wrapped(to), length));
    }
  }
  int& chosen = bench.desk.selection.gap;
  if (bench.idle() && hand.remove && chosen >= 0) {
    edit_at_once(bench, with_gap_removed(bench.desk.scenario, static_cast<std::size_t>(chosen)));
    chosen = -1;
  }
  if (place && hand.reach < 15) {
    const Pixel at = screen_of(bench, point_at(bench.line(), *place));
    bench.draw.AddCircle(vec(at), 7.0f * bench.unit, bench.theme.accent, 0, 2.0f);
  }
  if (bench.in_step()) {
    for (std::size_t i = 0; i < bench.course().gaps_mm.size(); ++i)
      draw_gap(bench, bench.course().gaps_mm[i], chosen == static_cast<int>(i));
  }
  if (end.gap >= 0 || place) ImGui::SetMouseCursor(ImGuiMouseCursor_Hand);
}

}  // namespace lw::view
