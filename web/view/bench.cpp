#include "web/view/bench.h"

#include <algorithm>
#include <cmath>

namespace lw::view {
namespace {

constexpr double follow_window = 0.25;  // m along the line, to either side

bool edits(Grip grip) { return grip != Grip::nothing && grip != Grip::floor && grip != Grip::time; }

std::string reason_of(const Error& error) {
  if (error.what.empty()) return error.why;
  return error.what + ": " + error.why;
}

}  // namespace

float distance(Pixel a, Pixel b) { return std::hypot(a.x - b.x, a.y - b.y); }

Pixel screen_of(const Bench& bench, Point mm) { return to_screen(bench.floor.view, mm.x_mm, mm.y_mm); }
Pixel screen_of(const Bench& bench, const CoursePoint& m) {
  return to_screen(bench.floor.view, 1e3 * m.x, 1e3 * m.y);
}

Held& take(Bench& bench, Grip grip, int index) {
  Held& held = bench.floor.held;
  held = {};
  held.grip = grip;
  held.index = index;
  held.begun = held.last = bench.pointer.at;
  held.revision = bench.desk.good.revision;
  held.ground = bench.desk.good.plan.ground;
  bench.floor.refusal.clear();
  if (edits(grip)) {
    panel::begin_edit(bench.desk);
    held.base = bench.desk.scenario;
  }
  return held;
}

bool moving(Bench& bench) {
  Held& held = bench.floor.held;
  const float tremble = bench.pointer.reach > 15 ? 8.0f : 3.0f;
  held.moved = held.moved || distance(bench.pointer.at, held.begun) > tremble;
  return held.moved;
}

void attempt(Bench& bench, const Result<Scenario>& scenario) {
  if (!scenario.ok()) {
    bench.floor.refusal = reason_of(scenario.error());
    return;
  }
  bench.floor.refusal.clear();
  bench.floor.own_edit = true;
  bench.desk.scenario = *scenario;
  panel::touch(bench.desk);
}

bool edit_at_once(Bench& bench, const Result<Scenario>& scenario) {
  if (!scenario.ok()) {
    panel::complain(bench.desk, reason_of(scenario.error()));
    return false;
  }
  bench.floor.own_edit = true;
  panel::edit(bench.desk, [&](Scenario& s) { s = *scenario; });
  return true;
}

void let_go(Bench& bench) {
  Held& held = bench.floor.held;
  if (edits(held.grip)) {
    if (bench.desk.error) {
      panel::complain(bench.desk, reason_of(*bench.desk.error));
      if (bench.desk.good.revision > held.revision) {
        bench.desk.scenario.course = bench.desk.good.scenario.course;
        panel::touch(bench.desk);
        panel::end_edit(bench.desk);
      } else {
        panel::cancel_edit(bench.desk);
      }
    } else {
      panel::end_edit(bench.desk);
    }
  }
  held = {};
  bench.floor.refusal.clear();
}

std::optional<double> line_under(const Bench& bench, Pixel p) {
  if (!panel::has_drive(bench.desk)) return {};
  const Point mm = to_floor(bench.floor.view, p);
  const Foot foot = nearest_foot(bench.line(), 1e-3 * mm.x_mm, 1e-3 * mm.y_mm);
  const CoursePoint at = point_at(bench.line(), std::clamp(foot.s, 0.0, bench.line().length));
  const double half = 0.5 * bench.desk.good.scenario.course.line_mm * bench.floor.view.scale;
  if (distance(p, screen_of(bench, at)) > std::max<double>(half, bench.pointer.reach)) return {};
  return std::clamp(foot.s, 0.0, bench.line().length);
}

double followed(const Centreline& line, double s, Point mm) {
  const double x = 1e-3 * mm.x_mm, y = 1e-3 * mm.y_mm;
  double best = s, least = 1e300;
  const int steps = 250;
  for (int i = -steps; i <= steps; ++i) {
    double at = s + follow_window * i / steps;
    if (!line.closed) at = std::clamp(at, 0.0, line.length);
    const CoursePoint p = point_at(line, at);
    const double d = std::hypot(p.x - x, p.y - y);
    if (d < least) least = d, best = at;
  }
  // Lost the hand by far: begin again wherever the line is nearest.
  const Foot foot = nearest_foot(line, x, y);
  if (std::fabs(foot.deviation) < 0.3 * least) best = foot.s;
  if (line.closed) return best - line.length * std::floor(best / line.length);
  return std::clamp(best, 0.0, line.length);
}

void grip_floor(Bench& bench) {
  if (bench.pointer.pressed && bench.idle()) take(bench, Grip::floor);
}

void draw_spot(const Bench& bench, Pixel at, bool chosen, bool near, bool square) {
  const float radius = bench.unit * (bench.pointer.reach > 15 ? 8.0f : 5.5f) + (near ? 1.5f : 0.0f);
  const ImU32 face = chosen ? bench.theme.accent : bench.theme.surface;
  const ImU32 edge = chosen || near ? bench.theme.accent : bench.theme.text;
  const ImVec2 c = vec(at);
  if (square) {
    const float r = 0.9f * radius;
    bench.draw.AddRectFilled({c.x - r - 2, c.y - r - 2}, {c.x + r + 2, c.y + r + 2}, edge);
    bench.draw.AddRectFilled({c.x - r, c.y - r}, {c.x + r, c.y + r}, face);
    return;
  }
  bench.draw.AddCircleFilled(c, radius + 2, edge);
  bench.draw.AddCircleFilled(c, radius, face);
}

void draw_along(const Bench& bench, double from, double to, ImU32 colour, float half) {
  const Strip strip = strip_between(bench.line(), from, to, 2e-4 / bench.floor.view.scale);
  std::vector<Pixel> points;
  for (const CoursePoint& p : strip) points.push_back(screen_of(bench, p));
  Mesh mesh;
  mesh.clip = bench.floor.view.frame;
  add_trail(mesh, points, std::vector<ImU32>{colour}, half);
  put(mesh, bench.draw);
}

}  // namespace lw::view
