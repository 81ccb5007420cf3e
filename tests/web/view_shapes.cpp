// What is drawn of line and path, against circles and straights whose shapes are known.
#include <algorithm>
#include <cmath>
#include <numbers>

#include "tests/catch.h"
#include "web/view/course_pieces.h"
#include "web/view/line_shape.h"
#include "web/view/path_shape.h"

using namespace lw;
using namespace lw::view;

namespace {

Centreline laid(std::vector<Piece> pieces, bool closed, std::vector<Stretch> gaps = {}) {
  Course course;
  course.closed = closed;
  course.pieces = std::move(pieces);
  course.gaps_mm = std::move(gaps);
  Result<Centreline> line = make_centreline(course, 0.1);
  if (!line) FAIL(text_of(line.error()));
  return *line;
}

double chord_length(const Strip& strip) {
  double length = 0;
  for (std::size_t i = 1; i < strip.size(); ++i)
    length += std::hypot(strip[i].x - strip[i - 1].x, strip[i].y - strip[i - 1].y);
  return length;
}

/// Largest distance of a chord's middle from the circle of radius r around (0, r).
double sagitta(const Strip& strip, double r) {
  double most = 0;
  for (std::size_t i = 1; i < strip.size(); ++i) {
    const double x = 0.5 * (strip[i].x + strip[i - 1].x), y = 0.5 * (strip[i].y + strip[i - 1].y);
    most = std::max(most, r - std::hypot(x, y - r));
  }
  return most;
}

}  // namespace

TEST_CASE("a circle is drawn with as few points as the tolerance allows") {
  const Centreline circle = laid({bend_of(400, 360)}, true);
  const double tolerance = 0.5e-3;
  const LineShape shape = shape_of(circle, tolerance);
  REQUIRE(shape.strips.size() == 1);
  CHECK(shape.corners.empty());
  CHECK(sagitta(shape.strips[0], 0.4) < 1.05 * tolerance);
  // A chord of length c has the sagitta c^2 / (8 r) (closed form, small angles).
  const double chords = 2 * std::numbers::pi * 0.4 / std::sqrt(8 * 0.4 * tolerance);
  CHECK(shape.strips[0].size() < 1.2 * chords + 2);
  CHECK(chord_length(shape.strips[0]) == Approx(2 * std::numbers::pi * 0.4).epsilon(1e-3));
}

TEST_CASE("gaps part the tape, and a straight needs its two ends alone") {
  const Centreline line = laid({straight_of(1000)}, false, {{0, 100}, {400, 450}});
  const LineShape shape = shape_of(line, 1e-4);
  REQUIRE(shape.strips.size() == 2);
  for (const Strip& strip : shape.strips) CHECK(strip.size() == 2);
  CHECK(shape.strips[0].front().x == Approx(0.1));
  CHECK(shape.strips[0].back().x == Approx(0.4));
  CHECK(shape.strips[1].front().x == Approx(0.45));
  CHECK(shape.strips[1].back().x == Approx(1.0));
}

TEST_CASE("a corner ends one strip and begins another in the new direction, with a round between") {
  const Centreline line = laid({straight_of(300), bend_of(0, 90), straight_of(200)}, false);
  const LineShape shape = shape_of(line, 1e-4);
  REQUIRE(shape.strips.size() == 2);
  REQUIRE(shape.corners.size() == 1);
  CHECK(shape.corners[0].x == Approx(0.3).margin(1e-3));
  CHECK(shape.strips[0].back().tangent_x == Approx(1).margin(1e-3));
  CHECK(shape.strips[1].front().tangent_y == Approx(1).margin(1e-3));
  const Centreline bare = laid({straight_of(300), bend_of(0, 90), straight_of(200)}, false, {{280, 320}});
  CHECK(shape_of(bare, 1e-4).corners.empty());
  const Strip part = strip_between(line, 0.2, 0.4, 1e-4);
  CHECK(chord_length(part) == Approx(0.2).margin(2e-3));
}

TEST_CASE("a round step is 1, 2 or 5 times a power of ten, and not below what was asked") {
  CHECK(round_step(1) == Approx(1));
  CHECK(round_step(1.01) == Approx(2));
  CHECK(round_step(37) == Approx(50));
  CHECK(round_step(51) == Approx(100));
  CHECK(round_step(0.13) == Approx(0.2));
  CHECK(length_text(50) == "50 mm");
  CHECK(length_text(200) == "20 cm");
  CHECK(length_text(5000) == "5 m");
  CHECK(length_text(2e6) == "2 km");
}

TEST_CASE("the path is that of the guide point, thinned by what can be seen") {
  Trace trace;
  for (int i = 0; i <= 1000; ++i) {
    TraceRow row;
    row.t = 0.01 * i, row.x = 0.001 * i, row.heading = std::numbers::pi / 2, row.deviation = -0.003;
    trace.rows.push_back(row);
  }
  const Path path = path_of(trace, 70);
  CHECK(path.x[500] == Approx(500));
  CHECK(path.y[500] == Approx(70));
  CHECK(path.deviation[500] == Approx(3));
  View view;
  view.scale = 0.5;  // 500 px long
  const std::vector<std::size_t> rows = thinned(path, view, 5);
  CHECK(rows.front() == 0);
  CHECK(rows.back() == 1000);
  CHECK(rows.size() == 101);
  CHECK(thinned(path, view, 0.1f, 50).size() <= 52);
  CHECK(thinned({}, view, 5).empty());
}

TEST_CASE("places that a trail leaves out lie by the stretches it keeps, in place and colour") {
  // A straight, then a circle of radius r: a chord of length c leaves it by c^2 / (8 r) (sagitta, handbooks).
  const float r = 60, off = 0.12f;
  std::vector<Pixel> points;
  for (int i = 0; i < 50; ++i) points.push_back({2.0f * static_cast<float>(i - 50), 0});
  for (int i = 0; i < 150; ++i) {
    const double angle = 2.0 * i / r;
    points.push_back({r * static_cast<float>(std::sin(angle)), r * static_cast<float>(1 - std::cos(angle))});
  }
  const std::vector<ImU32> even(points.size(), IM_COL32(90, 80, 70, 255));
  const std::vector<std::size_t> chosen = sufficing(points, even, off, 10);
  CHECK(chosen.front() == 0);
  CHECK(chosen.back() == points.size() - 1);
  const double chord = std::sqrt(8.0 * r * off);
  std::size_t on_bend = 0;
  for (std::size_t k = 1; k < chosen.size(); ++k) {
    const Pixel a = points[chosen[k - 1]], b = points[chosen[k]];
    if (chosen[k - 1] < 50) continue;
    CHECK(std::hypot(b.x - a.x, b.y - a.y) <= 1.01 * chord);
    ++on_bend;
  }
  CHECK(static_cast<double>(on_bend) <= 1.5 * 300 / chord);
  CHECK(chosen.size() - on_bend <= 6);

  std::vector<ImU32> spotted = even;
  spotted[20] = IM_COL32(90, 80, 81, 255);  // 11 apart: is kept; 9 apart would not be
  spotted[35] = IM_COL32(90, 80, 79, 255);
  const std::vector<std::size_t> seen = sufficing(points, spotted, off, 10);
  CHECK(std::count(seen.begin(), seen.end(), 20u) == 1);
  CHECK(std::count(seen.begin(), seen.end(), 35u) == 0);

  CHECK(sufficing({}, {}, off, 10).empty());
  CHECK(sufficing(std::span(points).first(1), even, off, 10).size() == 1);
  CHECK(sufficing(std::span(points).first(2), even, off, 10).size() == 2);
}

TEST_CASE("the cursor stays in its pass of a crossing") {
  // Down the same straight three times.
  Trace trace;
  for (int i = 0; i < 300; ++i) {
    TraceRow row;
    row.x = 0.01 * (i % 100), row.y = 0.0001 * (i / 100);
    trace.rows.push_back(row);
  }
  const Path path = path_of(trace, 0);
  View view;
  const Pixel at = to_screen(view, 500, 0);
  for (const std::size_t pass : {0u, 1u, 2u}) {
    const NearRow near = nearest_row(path, view, at, 100 * pass + 40, 12);
    CHECK(near.row == 100 * pass + 50);
    CHECK(near.distance < 1);
  }
}
