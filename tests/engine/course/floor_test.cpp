#include "engine/course/floor.h"

#include <cmath>
#include <functional>
#include <string>

#include "engine/numeric/functions.h"
#include "engine/numeric/hash.h"
#include "tests/catch.h"
#include "tests/engine/course/courses.h"

namespace lw {
namespace {

using namespace test;

constexpr double spot = 0.004;  // m, radius
constexpr double half = 0.010;  // m, of the line
constexpr FloorNeed need{spot, 0.08};

Floor floor_of(const Course& course, const FloorLook& look = {}, FloorNeed n = need) {
  const Result<Centreline> line = make_centreline(course, 0.25);
  REQUIRE(line.ok());
  const Result<Floor> floor = make_floor(*line, course, look, n);
  REQUIRE(floor.ok());
  return *floor;
}

/// Brightness by summing the disc over 20,000 places on a sunflower spiral (Vogel 1979): good to 1e-3.
double summed(const std::function<bool(double, double)>& is_dark, double x, double y) {
  constexpr int count = 20000;
  int dark = 0;
  for (int i = 0; i < count; ++i) {
    const double r = spot * std::sqrt((i + 0.5) / count), angle = 2.399963229728653 * i;
    dark += is_dark(x + r * std::cos(angle), y + r * std::sin(angle)) ? 1 : 0;
  }
  return 1.0 - static_cast<double>(dark) / count;
}

struct Misfit {
  double most = 0.0, squares = 0.0;
  int count = 0;
  void add(double error) {
    most = std::max(most, std::fabs(error));
    squares += error * error;
    ++count;
  }
  double rms() const { return std::sqrt(squares / count); }
};

/// Compares the floor with the sum at places on a lattice around (x, y), 17 mm to every side.
Misfit misfit_around(const Floor& floor, const std::function<bool(double, double)>& is_dark, double x,
                     double y) {
  Misfit misfit;
  for (int i = 0; i < 12; ++i)
    for (int j = 0; j < 12; ++j) {
      const double px = x + 0.0029 * (i - 5.7), py = y + 0.0029 * (j - 5.3);
      misfit.add(brightness(floor, px, py) - summed(is_dark, px, py));
    }
  return misfit;
}

// A bilinear cell of a quarter of the spot's radius departs from the true surface by up to 0.013 where the
// spot just touches the line (there the surface goes with the power 3/2), by up to 0.017 inside bends as
// tight as the spot, and by 0.0013 (0.0023) rms over the rim; as measured here.
constexpr double cell_most = 0.018, cell_rms = 0.0025;

TEST_CASE("The share of a disc under a strip is the area of circular segments") {
  // Segment: r^2 (t - sin t) / 2 for the central angle t. By hand, for r = 1: a chord at 1/2 has t = 2 pi
  // / 3.
  const double beyond_half = (2.0 * pi / 3.0 - std::sqrt(3.0) / 2.0) / 2.0 / pi;
  CHECK(strip_share_of_disc(0.0, 0.5, 1.0) == Approx(1.0 - 2.0 * beyond_half).epsilon(1e-14));
  CHECK(strip_share_of_disc(1.5, 1.0, 1.0) == Approx(beyond_half).epsilon(1e-14));
  CHECK(strip_share_of_disc(-1.5, 1.0, 1.0) == Approx(beyond_half).epsilon(1e-14));
  CHECK(strip_share_of_disc(10.0, 10.0, 4.0) == Approx(0.5));
  CHECK(strip_share_of_disc(0.0, 5.0, 4.0) == 1.0);
  CHECK(strip_share_of_disc(14.0, 10.0, 4.0) == 0.0);
}

TEST_CASE("Over a straight the floor is the strip formula, whatever its slope") {
  for (const double heading : {0.0, 10.0, 30.0, 45.0, 77.0, 135.0, 270.0}) {
    const Course course = course_of({straight(1000)}, false, heading);
    const Result<Centreline> line = make_centreline(course, 0.25);
    const Floor floor = floor_of(course);
    Misfit misfit;
    double rise = 0.0, true_rise = 0.0;
    for (int i = 0; i < 20000; ++i) {
      const double s = 0.1 + 0.8 * std::fmod(i * 0.6180339887, 1.0);
      const double d = 0.0155 * (2.0 * std::fmod(i * 0.7548776662, 1.0) - 1.0);
      const CoursePoint p = point_at(*line, s);
      const auto at = [&](double off) {
        return brightness(floor, p.x - off * p.tangent_y, p.y + off * p.tangent_x);
      };
      misfit.add(at(d) - 1.0 + strip_share_of_disc(d, half, spot));
      rise += at(half + 5e-4) - at(half - 5e-4);
      true_rise +=
          strip_share_of_disc(half - 5e-4, half, spot) - strip_share_of_disc(half + 5e-4, half, spot);
    }
    INFO("heading " << heading << ", most " << misfit.most << ", rms " << misfit.rms());
    CHECK(misfit.most < cell_most);
    CHECK(misfit.rms() < cell_rms);
    CHECK(rise / true_rise == Approx(1.0).epsilon(heading == std::round(heading / 90) * 90 ? 0.003 : 0.001));
  }
}

/// Common area of two discs of radii r and q, their middles d apart (the lens of two circular segments).
double lens(double r, double q, double d) {
  if (d >= r + q) return 0.0;
  if (d <= std::fabs(q - r)) return pi * std::min(r, q) * std::min(r, q);
  const double a = std::acos((d * d + r * r - q * q) / (2 * d * r));
  const double b = std::acos((d * d + q * q - r * r) / (2 * d * q));
  return r * r * (a - std::sin(2 * a) / 2) + q * q * (b - std::sin(2 * b) / 2);
}

TEST_CASE("In a bend the floor is the common area of the spot and a ring") {
  for (const double radius : {0.3, 0.1, 0.05, 0.03, 0.0235, 0.02, 0.014, 0.012}) {
    const Course course = course_of({bend(1e3 * radius, 360)});
    const Result<Centreline> line = make_centreline(course, 0.25);
    const Floor floor = floor_of(course);
    Misfit misfit;
    double mean = 0.0;
    for (int i = 0; i < 20000; ++i) {
      const double s = line->length * std::fmod(i * 0.6180339887, 1.0);
      const double from = std::max(-0.0155, radius - 0.0155), to = radius + 0.0155;
      const double q = std::fabs(from + (to - from) * std::fmod(i * 0.7548776662, 1.0));
      const CoursePoint p = point_at(*line, s);
      const double dark = (lens(spot, radius + half, q) - lens(spot, radius - half, q)) / (pi * spot * spot);
      const double d = radius - q;
      const double error = brightness(floor, p.x - d * p.tangent_y, p.y + d * p.tangent_x) - (1.0 - dark);
      misfit.add(error);
      mean += error / 20000;
    }
    INFO("radius " << radius << ", most " << misfit.most << ", rms " << misfit.rms() << ", mean " << mean);
    CHECK(misfit.most < cell_most);
    CHECK(misfit.rms() < cell_rms);
    CHECK(std::fabs(mean) < 5e-4);
  }
}

TEST_CASE("Where lines cross the dark is the union of both") {
  for (const double turn : {90.0, 140.0}) {
    // A straight along x through (0.3, 0), then round and back across it.
    const double back = 180.0 + turn;
    const Course course = course_of({straight(600), bend(200, back), straight(700)}, false);
    const Result<Centreline> line = make_centreline(course, 0.25);
    REQUIRE(line.ok());
    const CoursePoint end = point_at(*line, line->length);
    const double along = -end.y / end.tangent_y;  // from the end to the crossing
    const double cross_x = end.x + along * end.tangent_x;
    REQUIRE(along < -0.05);
    const auto is_dark = [&](double x, double y) {
      const double off = (y - end.y) * end.tangent_x - (x - end.x) * end.tangent_y;
      return std::fabs(y) <= half || std::fabs(off) <= half;
    };
    const Misfit misfit = misfit_around(floor_of(course), is_dark, cross_x, 0.0);
    INFO("most " << misfit.most << ", rms " << misfit.rms());
    CHECK(misfit.most < cell_most);
    CHECK(misfit.rms() < 0.003);
  }
}

TEST_CASE("Gaps and open ends are cut square, corners are round outside") {
  Course course = course_of({straight(300), bend(0, 90), straight(300)}, false, 20.0);
  course.gaps_mm = {{100, 130}, {200, 205}};
  const Floor floor = floor_of(course);
  const double c = std::cos(20 * pi / 180), s = std::sin(20 * pi / 180);
  const auto is_dark = [&](double x, double y) {
    const double u = c * x + s * y, w = c * y - s * x;  // along and left of the first leg
    const bool in_gap = (u > 0.1 && u < 0.13) || (u > 0.2 && u < 0.205);
    const bool first = u >= 0.0 && u <= 0.3 && std::fabs(w) <= half && !in_gap;
    const bool second = w >= 0.0 && w <= 0.3 && std::fabs(u - 0.3) <= half;
    return first || second || std::hypot(u - 0.3, w) <= half;
  };
  for (const double at : {0.0, 0.1, 0.13, 0.2025, 0.3}) {
    const Misfit misfit = misfit_around(floor, is_dark, c * at, s * at);
    INFO("at " << at << ", most " << misfit.most << ", rms " << misfit.rms());
    CHECK(misfit.most < cell_most);
    CHECK(misfit.rms() < 0.003);
  }
}

TEST_CASE("Every place within the margin has a cell, beyond the open ends too") {
  const Course course = course_of({straight(200), bend(70, 200), straight(150)}, false, 33.0);
  const Result<Centreline> line = make_centreline(course, 0.25);
  const Floor floor = floor_of(course);
  CHECK(floor.pitch <= spot / 4.0);
  const double w = tile_cells * floor.pitch;
  for (const Node& node : line->nodes)
    for (int k = 0; k < 16; ++k) {
      const double i = std::floor((node.x + need.margin * std::cos(k * pi / 8) - floor.x0) / w);
      const double j = std::floor((node.y + need.margin * std::sin(k * pi / 8) - floor.y0) / w);
      CHECK((i >= 0 && i < floor.tiles_x && j >= 0 && j < floor.tiles_y));
    }
  REQUIRE(floor.tile_start.size() == static_cast<std::size_t>(floor.tiles_x) * floor.tiles_y);
  for (const std::int32_t start : floor.tile_start)
    CHECK((start >= 0 && static_cast<std::size_t>(start) + tile_cells * tile_cells <= floor.cells.size()));
  CHECK(brightness(floor, 50.0, 50.0) == 1.0);
}

TEST_CASE("A floor too large to hold is an error that says what would do") {
  const Course course = course_of({straight(1e5)}, false, 45.0);
  const Result<Centreline> line = make_centreline(course, 0.25);
  const Result<Floor> floor = make_floor(*line, course, {}, {0.0005, 0.1});
  REQUIRE_FALSE(floor.ok());
  CHECK(holds(text_of(floor.error()), "sensors.spot_mm: 1: so fine a spot needs a floor of "));
  CHECK(holds(text_of(floor.error()), " mm would do"));
}

TEST_CASE("The texture has its standard deviation and its correlation length") {
  // Seed 5, a margin wide enough for some thousand patches: the deviation of the estimates is below 2 %.
  FloorLook look;
  look.texture_pct = 6.0;
  look.texture_mm = 20.0;
  look.seed = 5;
  const Course course = course_of({straight(1500)}, false);
  const Floor with = floor_of(course, look, {spot, 0.5}), without = floor_of(course, {}, {spot, 0.5});
  const auto texture = [&](double x, double y) { return brightness(with, x, y) - brightness(without, x, y); };
  double sum = 0.0, squares = 0.0, across = 0.0, up = 0.0, slanted = 0.0, doubled = 0.0;
  int count = 0;
  for (double x = 0.0; x < 1.5; x += 0.0037)
    for (double y = -0.45; y < 0.45; y += 0.0041) {
      const double here = texture(x, y), l = 0.020, d = l / std::sqrt(2.0);
      sum += here;
      squares += here * here;
      across += here * texture(x + l, y);
      up += here * texture(x, y + l);
      slanted += here * texture(x + d, y - d);
      doubled += here * texture(x + 2 * l, y);
      ++count;
    }
  CHECK(std::sqrt(squares / count) == Approx(0.06).epsilon(0.03));
  CHECK(std::fabs(sum / count) < 0.004);
  CHECK(across / squares == Approx(std::exp(-1.0)).margin(0.04));
  CHECK(up / squares == Approx(std::exp(-1.0)).margin(0.04));
  CHECK(slanted / squares == Approx(std::exp(-1.0)).margin(0.04));
  CHECK(doubled / squares < 0.06);

  look.seed = 6;
  CHECK(std::fabs(brightness(floor_of(course, look), 0.5, 0.03) - brightness(with, 0.5, 0.03)) > 1e-4);
}

std::uint64_t hash_of(const Floor& floor) {
  std::uint64_t hash = fnv_start;
  for (const std::int32_t start : floor.tile_start) hash = fnv_word(hash, static_cast<std::uint64_t>(start));
  for (const Cell& cell : floor.cells)
    for (const std::int16_t c : {cell.c0, cell.c1, cell.c2, cell.c3})
      hash = fnv_word(hash, static_cast<std::uint16_t>(c));
  return hash;
}

TEST_CASE("Floors have the same bits on every compiler and target") {
  const Course crossing =
      course_of({straight(300), bend(120, 270), straight(300), bend(0, -70), straight(90)}, false, 12.5);
  CHECK(hash_of(floor_of(crossing)) == 0x24f03179719d543u);
  Course drawn;
  drawn.points_mm = {{0, 0}, {180, -40}, {390, 10}, {420, 160}, {260, 210}, {120, 150}, {-60, 170}};
  drawn.corners = {4};
  drawn.gaps_mm = {{100, 140}};
  FloorLook look;
  look.texture_pct = 4.0;
  CHECK(hash_of(floor_of(drawn, look)) == 0xc222fc26d53fb3fu);
}

}  // namespace
}  // namespace lw
