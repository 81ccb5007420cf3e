// Courses and the strip formula against SciPy, run live (course_check.py beside this file).
#ifndef __EMSCRIPTEN__  // a test inside node cannot start other programs

#include <cmath>
#include <cstdlib>
#include <fstream>
#include <sstream>
#include <string>

#include "engine/course/floor.h"
#include "engine/numeric/functions.h"
#include "engine/numeric/random.h"
#include "tests/catch.h"

namespace lw {
namespace {

/// Debian's own Python is the one that has Debian's SciPy.
std::string python_with_scipy() {
  for (const std::string python : {"/usr/bin/python3", "python3"})
    if (std::system((python + " -c 'import scipy' 2>/dev/null").c_str()) == 0) return python;
  return "";
}

/// A stroke that wanders on with uneven steps of 20 to 100 mm, or round once when closed.
Course wandering(std::uint64_t seed, bool closed) {
  Course course;
  course.closed = closed;
  constexpr int count = 14;
  double x = 0.0, heading = 0.0;
  for (int i = 0; i < count; ++i) {
    const auto words = draw<double>(seed, 0, static_cast<std::uint64_t>(i), 0);
    const double a = unit_from<double>(words.word[0]), b = unit_from<double>(words.word[1]);
    if (closed) {
      heading = 2.0 * pi * (i + 0.6 * a) / count;
      const double radius = 300.0 + 40.0 * b;
      course.points_mm.push_back({radius * std::cos(heading), radius * std::sin(heading)});
    } else {
      x += 20.0 + 80.0 * a;
      course.points_mm.push_back({x, 60.0 * b});
    }
  }
  return course;
}

void write_spline(std::ostream& out, const Course& course, double length_error) {
  const Result<Centreline> line = make_centreline(course, 0.25);
  INFO((line ? "" : text_of(line.error())));
  REQUIRE(line);
  const char* comma = "";
  out << "{\"closed\": " << (course.closed ? "true" : "false")
      << ", \"length\": " << line->length + length_error << ", \"points\": [";
  for (const Point& p : course.points_mm) {
    out << comma << '[' << p.x_mm * 1e-3 << ", " << p.y_mm * 1e-3 << ']';
    comma = ", ";
  }
  out << "], \"nodes\": [";
  comma = "";
  for (const Node& n : line->nodes) {
    out << comma << '[' << n.x << ", " << n.y << ", " << n.tangent_x << ", " << n.tangent_y << ']';
    comma = ", ";
  }
  out << "]}";
}

double ellipse_length() {
  Course course;
  for (int i = 0; i < 96; ++i)
    course.points_mm.push_back({500 * std::cos(2 * pi * i / 96), 300 * std::sin(2 * pi * i / 96)});
  const Result<Centreline> line = make_centreline(course, 0.25);
  REQUIRE(line);
  return line->length;
}

/// All numbers as JSON; a length error is there to see that the check can fail.
std::string numbers(double length_error) {
  std::ostringstream out;
  out.precision(17);
  out << "{\"splines\": [";
  for (std::uint64_t seed = 1; seed <= 6; ++seed) {
    if (seed > 1) out << ", ";
    write_spline(out, wandering(seed, seed % 2 == 0), length_error);
  }
  out << "], \"strips\": [";
  const char* comma = "";
  for (const double distance : {-13.0, -9.0, 0.0, 0.5, 3.3, 7.0, 11.0, 20.0})
    for (const double half_width : {0.5, 4.0, 10.0}) {
      out << comma << '[' << distance << ", " << half_width << ", 4, "
          << strip_share_of_disc(distance, half_width, 4.0) << ']';
      comma = ", ";
    }
  out << "], \"ellipse\": [0.5, 0.3, " << ellipse_length() << "]}\n";
  return out.str();
}

bool agrees(const std::string& python, const std::string& text) {
  const std::string name = LINEWRIGHT_BINARY_DIR "/course_check.json";
  std::ofstream file(name, std::ios::binary);
  file << text;
  REQUIRE(file.flush());
  const std::string script = LINEWRIGHT_SOURCE_DIR "/tests/outside/course_check.py";
  return std::system((python + " '" + script + "' '" + name + "'").c_str()) == 0;
}

TEST_CASE("drawn lines, strips and an ellipse agree with SciPy", "[outside]") {
  const std::string python = python_with_scipy();
  if (python.empty()) {
    WARN("SciPy is missing: courses were not held against it");
    return;
  }
  CHECK(agrees(python, numbers(0.0)));
  CHECK_FALSE(agrees(python, numbers(1e-7)));  // the check can fail
}

}  // namespace
}  // namespace lw

#endif
