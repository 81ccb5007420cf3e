#include "web/view/layers.h"

#include <algorithm>
#include <cmath>
#include <cstdio>

#include "web/page/typeface.h"

namespace lw::view {
namespace {

RibbonPoint section(const View& view, const CoursePoint& p, float half, ImU32 colour) {
  const Pixel at = to_screen(view, 1e3 * p.x, 1e3 * p.y);
  return {at, static_cast<float>(-p.tangent_y), static_cast<float>(-p.tangent_x), half, colour};
}

void add_strips(Mesh& mesh, const LineShape& shape, const View& view, float half, ImU32 colour) {
  std::vector<RibbonPoint> points;
  for (const Strip& strip : shape.strips) {
    points.clear();
    for (const CoursePoint& p : strip) points.push_back(section(view, p, half, colour));
    add_ribbon(mesh, points);
  }
  for (const CoursePoint& p : shape.corners)
    add_disc(mesh, to_screen(view, 1e3 * p.x, 1e3 * p.y), half, colour);
}

ImVec2 across(const View& view, const CoursePoint& p, double along_mm, double left_mm) {
  const double x = 1e3 * p.x + along_mm * p.tangent_x - left_mm * p.tangent_y;
  const double y = 1e3 * p.y + along_mm * p.tangent_y + left_mm * p.tangent_x;
  return vec(to_screen(view, x, y));
}

struct Trail {
  std::vector<Pixel> points;
  std::vector<ImU32> colours;
};

/// The same to the eye with fewer places: every one costs six triangles.
Trail reduced(const Trail& trail) {
  constexpr float off_px = 0.12f;
  constexpr int off_shade = 6;
  Trail fewer;
  for (const std::size_t i : sufficing(trail.points, trail.colours, off_px, off_shade)) {
    fewer.points.push_back(trail.points[i]);
    fewer.colours.push_back(trail.colours[i]);
  }
  return fewer;
}

/// Words by a mark, on a plate so that they can be read over anything.
void label(ImDrawList& draw, const Frame& frame, Pixel at, const char* text, ImU32 colour,
           const panel::Theme& theme, float unit) {
  ImFont* font = page::typeface().small;
  const float size = font->FontSize * ImGui::GetIO().FontGlobalScale;
  const ImVec2 extent = font->CalcTextSizeA(size, 1e9f, 0.0f, text);
  ImVec2 corner{at.x + 12 * unit, at.y - 0.5f * extent.y};
  if (corner.x + extent.x + 6 * unit > frame.x + frame.width) corner.x = at.x - 12 * unit - extent.x;
  draw.AddRectFilled({corner.x - 4 * unit, corner.y - 2 * unit},
                     {corner.x + extent.x + 4 * unit, corner.y + extent.y + 2 * unit},
                     panel::faded(theme.surface, 0.88f), 3 * unit);
  draw.AddText(font, size, corner, colour, text);
}

}  // namespace

double draw_grid(ImDrawList& draw, const View& view, const panel::Theme& theme, float least_px) {
  const double step = round_step(least_px / view.scale);
  const Frame& f = view.frame;
  const Point low = to_floor(view, {f.x, f.y + f.height}), high = to_floor(view, {f.x + f.width, f.y});
  for (double x = step * std::ceil(low.x_mm / step); x <= high.x_mm; x += step) {
    const float px = std::round(to_screen(view, x, 0).x);
    draw.AddRectFilled({px, f.y}, {px + 1, f.y + f.height}, theme.grid);
  }
  for (double y = step * std::ceil(low.y_mm / step); y <= high.y_mm; y += step) {
    const float py = std::round(to_screen(view, 0, y).y);
    draw.AddRectFilled({f.x, py}, {f.x + f.width, py + 1}, theme.grid);
  }
  return step;
}

void add_tape(Mesh& mesh, const LineShape& shape, const View& view, double width_mm,
              const panel::Theme& theme) {
  const auto half = std::max(static_cast<float>(0.5 * width_mm * view.scale), 0.75f);
  add_strips(mesh, shape, view, half + 1.25f, theme.tape_edge);
  add_strips(mesh, shape, view, half, theme.tape);
}

void add_arrows(Mesh& mesh, const Centreline& line, const View& view, double width_mm, ImU32 colour,
                float apart_px) {
  const double size = 4.0 / view.scale, aside = 0.5 * width_mm + 11.0 / view.scale;  // mm
  const double count = std::floor(1e3 * line.length * view.scale / apart_px);
  for (double i = 0; i < count; ++i) {
    const CoursePoint p = point_at(line, line.length * (i + 0.5) / count);
    const ImVec2 tip = across(view, p, size, aside), left = across(view, p, -0.5 * size, aside + size),
                 right = across(view, p, -0.5 * size, aside - size);
    const std::vector<Pixel> arrow{pixel(left), pixel(tip), pixel(right)};
    const auto direction = [](Pixel a, Pixel b) {
      const float d = std::max(distance(a, b), 1e-3f);
      return std::pair{(b.y - a.y) / d, -(b.x - a.x) / d};
    };
    for (int k = 0; k < 2; ++k) {
      const auto [x, y] =
          direction(arrow[static_cast<std::size_t>(k)], arrow[static_cast<std::size_t>(k) + 1]);
      const RibbonPoint ends[] = {{arrow[static_cast<std::size_t>(k)], x, y, 0.8f, colour},
                                  {arrow[static_cast<std::size_t>(k) + 1], x, y, 0.8f, colour}};
      add_ribbon(mesh, ends);
    }
  }
}

void draw_start(ImDrawList& draw, const Centreline& line, const View& view, double width_mm,
                const panel::Theme& theme, float unit) {
  if (line.nodes.empty()) return;
  // At least as wide as can be seen: a bar across the line, and an arrow head that says which way.
  const double half = std::max(0.5 * width_mm + 4.0 / view.scale, 11.0 * unit / view.scale);
  const double thick = 2.0 * unit / view.scale, head = 11.0 * unit / view.scale;
  const CoursePoint p = point_at(line, 0.0);
  draw.AddQuadFilled(across(view, p, -thick, half), across(view, p, thick, half),
                     across(view, p, thick, -half), across(view, p, -thick, -half), theme.good);
  draw.AddTriangleFilled(across(view, p, thick + head, 0), across(view, p, thick, -0.62 * head),
                         across(view, p, thick, 0.62 * head), theme.good);
  if (line.closed) return;
  const CoursePoint end = point_at(line, line.length);
  for (const double at : {-2.4 * thick, 0.0})
    draw.AddQuadFilled(across(view, end, at - 0.6 * thick, half), across(view, end, at + 0.6 * thick, half),
                       across(view, end, at + 0.6 * thick, -half), across(view, end, at - 0.6 * thick, -half),
                       theme.text);
}

void add_path(Mesh& mesh, const Path& path, const View& view, const Scenario& scenario, bool dark,
              float half) {
  const double far_mm = scenario.drive.lost_mm;
  Trail trail;
  for (const std::size_t row : thinned(path, view, 2.0f)) {
    trail.points.push_back(to_screen(view, path.x[row], path.y[row]));
    trail.colours.push_back(panel::deviation_colour(dark, share_of_scale(path.deviation[row], far_mm)));
  }
  trail = reduced(trail);
  const auto tape = static_cast<float>(0.5 * scenario.course.line_mm * view.scale);
  if (tape > half + 2.5f)
    add_trail(mesh, trail.points, std::vector<ImU32>{panel::theme(dark).bare}, half + 1.25f);
  add_trail(mesh, trail.points, trail.colours, half);
}

void add_ghost(Mesh& mesh, const Path& path, const View& view, ImU32 colour, float half) {
  Trail trail;
  for (const std::size_t row : thinned(path, view, 3.0f)) {
    trail.points.push_back(to_screen(view, path.x[row], path.y[row]));
    trail.colours.push_back(colour);
  }
  trail = reduced(trail);
  add_trail(mesh, trail.points, trail.colours, half);
}

void draw_marks(ImDrawList& draw, const panel::GoodDrive& good, const Path& path, const View& view,
                const panel::Theme& theme, float unit) {
  if (path.x.empty()) return;
  char text[96];
  const auto worst = std::max_element(path.deviation.begin(), path.deviation.end());
  const auto at = static_cast<std::size_t>(worst - path.deviation.begin());
  const Pixel far = to_screen(view, path.x[at], path.y[at]);
  const Pixel end = to_screen(view, path.x.back(), path.y.back());
  const bool failed = good.summary.outcome != Outcome::finished;
  if (!failed || distance(far, end) > 60 * unit) {
    std::snprintf(text, sizeof text, "%.1f mm off", static_cast<double>(*worst));
    draw.AddCircle(vec(far), 6 * unit, theme.text, 0, 1.5f * unit);
    label(draw, view.frame, far, text, theme.text, theme, unit);
  }
  if (!failed) return;
  const float r = 9 * unit;
  draw.AddCircleFilled(vec(end), r + 3 * unit, theme.surface);
  draw.AddCircle(vec(end), r + 2 * unit, theme.bad, 0, 2.5f * unit);
  const bool lost = good.summary.outcome == Outcome::line_lost;
  const float d = 0.5f * r;
  if (lost) {
    draw.AddLine({end.x - d, end.y - d}, {end.x + d, end.y + d}, theme.bad, 2.5f * unit);
    draw.AddLine({end.x - d, end.y + d}, {end.x + d, end.y - d}, theme.bad, 2.5f * unit);
  } else {
    draw.AddLine(vec(end), {end.x, end.y - 0.75f * r}, theme.bad, 2 * unit);
    draw.AddLine(vec(end), {end.x + 0.6f * r, end.y}, theme.bad, 2 * unit);
  }
  std::snprintf(text, sizeof text, lost ? "line lost, %.2f m" : "out of time, %.2f m", good.summary.progress);
  label(draw, view.frame, {end.x + 4 * unit, end.y}, text, theme.bad, theme, unit);
}

}  // namespace lw::view
