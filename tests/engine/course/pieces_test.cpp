#include <cmath>
#include <string>

#include "engine/course/centreline.h"
#include "engine/numeric/functions.h"
#include "tests/catch.h"
#include "tests/engine/course/courses.h"

namespace lw {
namespace {

using namespace test;

constexpr double window = 0.25;
std::string error_of(const Course& course) {
  const Result<Centreline> line = make_centreline(course, window);
  return line ? "none" : text_of(line.error());
}

/// The largest step in place between the end of one sample's arc and the next sample.
double largest_jump(const Centreline& line) {
  double most = 0.0;
  for (std::size_t i = 0; i + 1 < line.nodes.size() + (line.closed ? 1 : 0); ++i) {
    const CoursePoint end = point_at(line, (static_cast<double>(i) + 1.0 - 1e-9) * line.pitch);
    const Node& next = line.nodes[(i + 1) % line.nodes.size()];
    most = std::max(most, std::hypot(end.x - next.x, end.y - next.y));
  }
  return most;
}

TEST_CASE("An oval of pieces has the length and the places of plane geometry") {
  const Result<Centreline> line =
      make_centreline(course_of({straight(800), bend(350, 180), straight(800), bend(350, 180)}), window);
  REQUIRE(line.ok());
  CHECK(line->length == Approx(1.6 + 2.0 * pi * 0.35).epsilon(1e-14));
  CHECK(line->pitch * static_cast<double>(line->nodes.size()) == Approx(line->length).epsilon(1e-14));
  for (const Node& node : line->nodes) {
    const double beyond = std::max({0.0, node.x - 0.8, -node.x});
    CHECK(std::hypot(beyond, node.y - 0.35) == Approx(beyond > 0.0 ? 0.35 : std::fabs(node.y - 0.35)));
    CHECK(std::hypot(node.tangent_x, node.tangent_y) == Approx(1.0).epsilon(1e-14));
  }
  // What the header promises where a straight and a bend meet within a sample: pitch^2 curvature / 8.
  CHECK(largest_jump(*line) < line->pitch * line->pitch / 0.35 / 8.0 * 1.01);
}

TEST_CASE("Courses heading by quarters close to the last bits") {
  for (const double heading : {0.0, 90.0, -180.0, 270.0, 720.0}) {
    const Result<Centreline> line =
        make_centreline(course_of({straight(500), bend(0, 90), straight(500), bend(0, 90), straight(500),
                                   bend(0, 90), straight(500), bend(0, 90)},
                                  true, heading),
                        window);
    REQUIRE(line.ok());
    CHECK(line->corners == std::vector<double>{0.5, 1.0, 1.5, 2.0});
    const Node& last = line->nodes.back();
    CHECK(std::hypot(last.x, last.y) == Approx(line->pitch).epsilon(1e-10));
  }
}

TEST_CASE("A corner on a sample turns there, though rounding puts the sample a hair before it") {
  const Result<Centreline> line = make_centreline(
      course_of({straight(300), bend(0, 35), straight(300), bend(0, -50), straight(300)}, false), window);
  REQUIRE(line.ok());
  REQUIRE(line->corners.size() == 2);
  REQUIRE(line->nodes.size() == 901);
  CHECK(300.0 * line->pitch < line->corners[0]);  // the hair: 300 times 0.9 / 900
  const auto heading_deg = [&](std::size_t i) {
    return std::atan2(line->nodes[i].tangent_y, line->nodes[i].tangent_x) * 180.0 / pi;
  };
  CHECK(heading_deg(299) == Approx(0.0).margin(1e-9));
  CHECK(heading_deg(300) == Approx(35.0));
  CHECK(heading_deg(599) == Approx(35.0));
  CHECK(heading_deg(600) == Approx(-15.0));
}

TEST_CASE("A figure-eight turns by nothing in all and closes") {
  const Result<Centreline> line = make_centreline(course_of({bend(200, 360), bend(200, -360)}), window);
  REQUIRE(line.ok());
  CHECK(line->length == Approx(0.8 * pi));
  CHECK(line->nodes[100].curvature == Approx(5.0));
  CHECK(line->nodes[line->nodes.size() - 100].curvature == Approx(-5.0));
}

TEST_CASE("Pieces that miss their start by a little are bent to meet it, by more are an error that says so") {
  const Course near = course_of({straight(800), bend(350, 180.03), straight(800.3), bend(350, 180)});
  const Result<Centreline> line = make_centreline(near, window);
  REQUIRE(line.ok());
  CHECK(largest_jump(*line) < 2e-6);
  const Node& last = line->nodes.back();
  CHECK(std::hypot(last.x, last.y) == Approx(line->pitch).epsilon(2e-3));
  CHECK(last.tangent_y == Approx(-line->pitch / 0.35).epsilon(0.02));

  const std::string text =
      error_of(course_of({straight(800), bend(350, 180), straight(810), bend(350, 180)}));
  CHECK(text ==
        "course.pieces: ends 10 mm from its start (-10 mm in x, 0 mm in y) and 0 degrees off its heading, "
        "after "
        "3809.11 mm in 4 pieces: a closed course must end where it starts, within 0.5 mm and 0.1 degrees");
  CHECK(holds(error_of(course_of({bend(350, 359)})), "-1 degrees off its heading"));
}

TEST_CASE("Bad pieces are errors that name the piece, its values and the rule") {
  CHECK(error_of(Course{}) == "course: neither pieces nor points_mm: a course needs one of them");
  Course both = course_of({straight(100)});
  both.points_mm = {{0, 0}, {1, 1}};
  CHECK(error_of(both) == "course: both pieces and points_mm: a course is made of one of them");
  const auto with = [](Piece piece) {
    return error_of(course_of({straight(500), piece, straight(5)}, false));
  };
  Piece radius_alone, turn_alone, both_kinds = straight(9);
  radius_alone.radius_mm = turn_alone.turn_deg = both_kinds.turn_deg = 5.0;
  CHECK(with(straight(0)) == "course.pieces[1]: straight_mm = 0: a straight must be longer than 0");
  CHECK(with(bend(-5, 90)) ==
        "course.pieces[1]: radius_mm = -5, turn_deg = 90: a radius must be 0 (a sharp corner) or at least 1 "
        "mm");
  CHECK(holds(with(bend(0, 180)), "a corner must turn by less than 180 degrees"));
  CHECK(holds(with(bend(100, 0)), "a bend must turn by more than 0 degrees"));
  CHECK(holds(with(bend(100, 4000)), "3600 degrees at most"));
  CHECK(holds(with({}), "needs straight_mm, or radius_mm and turn_deg"));
  CHECK(holds(with(radius_alone), "needs turn_deg too"));
  CHECK(holds(with(turn_alone), "needs radius_mm too"));
  CHECK(holds(with(both_kinds), "a straight or a bend, not both"));
  CHECK(holds(with(straight(NAN)), "finite"));
  CHECK(holds(error_of(course_of({bend(0, 90), straight(100)}, false)),
              "a corner needs a piece before and after it"));
  CHECK(holds(error_of(course_of({straight(100), bend(0, 90), bend(0, 80), straight(100)}, false)),
              "two corners in a row"));
  CHECK(holds(error_of(course_of({straight(5)}, false)), "at least 10 mm"));
  CHECK(holds(error_of(course_of({straight(2e6)}, false)), "at most 1 km"));
}

TEST_CASE("Gaps must lie on the course, one beside the other") {
  Course course = course_of({straight(500)}, false);
  course.gaps_mm = {{400, 450}, {100, 200}};
  const Result<Centreline> line = make_centreline(course, window);
  REQUIRE(line.ok());
  CHECK(line->gaps_mm.front().from_mm == 100.0);
  course.gaps_mm = {{100, 200}, {150, 300}};
  CHECK(error_of(course) ==
        "course.gaps_mm[1]: [150, 300]: overlaps the gap before it in the list, gaps_mm[0]");
  course.gaps_mm = {{300, 200}};
  CHECK(error_of(course) == "course.gaps_mm[0]: [300, 200]: a gap must end after it begins");
  course.gaps_mm = {{450, 501}};
  CHECK(holds(error_of(course), "a gap must lie on the course, from 0 to 500 mm"));
}

TEST_CASE("The reach of a circle is its radius, of a hairpin half the way across, and nothing at a corner") {
  // Federer 1959, Curvature measures: the reach of a circle is its radius.
  for (const double radius : {0.03, 0.2, 1.0}) {
    const Result<Centreline> line = make_centreline(course_of({bend(1e3 * radius, 360)}), 10.0);
    REQUIRE(line.ok());
    for (const Node& node : line->nodes) {
      CHECK(node.reach <= radius);
      CHECK(node.reach > 0.93 * radius);
    }
  }
  const Course hairpin = course_of({straight(300), bend(60, 180), straight(300)}, false);
  const Result<Centreline> line = make_centreline(hairpin, 1.0);
  REQUIRE(line.ok());
  CHECK(line->nodes[150].reach <= 0.06);
  CHECK(line->nodes[150].reach > 0.055);
  const Result<Centreline> short_sighted = make_centreline(hairpin, 0.1);
  CHECK(short_sighted->nodes[150].reach > 10.0);  // the way back lies outside the window

  const Result<Centreline> corner =
      make_centreline(course_of({straight(300), bend(0, 90), straight(300)}, false), 1.0);
  CHECK(corner->nodes[300].reach == 0.0);
  CHECK(corner->nodes[299].reach == 0.0);
  CHECK(corner->nodes[200].reach == Approx(0.1).epsilon(0.2));  // the largest disc that touches one leg only
  CHECK(corner->nodes[200].reach < 0.1);
}

TEST_CASE("The foot of a place within reach is where it was put, and the nearest sample agrees") {
  const Course course =
      course_of({straight(400), bend(150, 180), straight(100), bend(150, -90), straight(300)}, false, 25.0);
  const Result<Centreline> line = make_centreline(course, 1.0);
  REQUIRE(line.ok());
  int checked = 0;
  for (int i = 0; i < 2000; ++i) {
    const double s = line->length * (i + 0.5) / 2000.0;
    const CoursePoint p = point_at(*line, s);
    const double reach = line->nodes[static_cast<std::size_t>(s / line->pitch)].reach;
    const double d = 0.9 * std::min(reach, 0.2) * (i % 2 == 0 ? 1.0 : -1.0);
    const Foot foot = nearest_foot(*line, p.x - d * p.tangent_y, p.y + d * p.tangent_x);
    CHECK(foot.deviation == Approx(d).margin(1e-5));
    CHECK(foot.s == Approx(s).margin(2e-5 + 1e-3 * line->pitch / (1.0 - 0.9)));
    ++checked;
  }
  CHECK(checked == 2000);
  const Foot beyond = nearest_foot(*line, -0.2 * std::cos(25 * pi / 180), -0.2 * std::sin(25 * pi / 180));
  CHECK(beyond.s == Approx(-0.2));  // open ends run on straight
  CHECK(beyond.deviation == Approx(0.0).margin(1e-12));
}

TEST_CASE("Sections join like pieces and cover the course") {
  const Result<Centreline> line =
      make_centreline(course_of({straight(100), straight(200), bend(100, 45), bend(100, 45), bend(150, 30),
                                 bend(0, -60), straight(100)},
                                false),
                      window);
  REQUIRE(line.ok());
  const std::vector<CourseSection>& sections = line->sections;
  REQUIRE(sections.size() == 5);
  CHECK(sections[0].to == Approx(0.3));
  CHECK(std::isinf(sections[0].radius));
  CHECK(sections[1].radius == Approx(0.1));
  CHECK(sections[1].turn == Approx(pi / 2));
  CHECK(sections[2].radius == Approx(0.15));
  CHECK(sections[3].radius == 0.0);
  CHECK(sections[3].turn == Approx(-pi / 3));
  CHECK(sections[4].to == Approx(line->length));
  for (std::size_t i = 1; i < sections.size(); ++i) CHECK(sections[i].from == sections[i - 1].to);
}

TEST_CASE("Very long courses are sampled more coarsely, never by more than 200,001 places") {
  const Result<Centreline> line = make_centreline(course_of({straight(9e5)}, false), window);
  REQUIRE(line.ok());
  CHECK(line->nodes.size() <= 200001);
  CHECK(line->pitch == Approx(4.5e-3).epsilon(0.001));
}

}  // namespace
}  // namespace lw
