// Exact pieces laid end to end: straights, bends, sharp corners.
#include <algorithm>
#include <cmath>
#include <limits>

#include "engine/course/sampling.h"

namespace lw {
namespace {

constexpr double mm = 1e-3;
constexpr double gap_most = 0.5 * mm;     // m, end to start, that counts as closed
constexpr double twist_most_deg = 0.1;    // degrees, likewise
constexpr double turn_most_deg = 3600.0;  // a spiral staircase of ten turns is nobody's course
constexpr double closing_stretch = 0.3;   // m before the end over which a residual heading is made good

/// A straight or bend as laid: from `start` along `tangent` with constant curvature.
struct Span {
  Vector start, tangent;
  double curvature = 0.0;  // 1/m
  double from = 0.0;       // m of arc length of the course
  double length = 0.0;     // m
};

struct Laid {
  std::vector<Span> spans;
  std::vector<double> corners;     // m of arc length
  std::vector<double> corner_deg;  // turn of each
  double length = 0.0;             // m
  Vector end;
  double turned_deg = 0.0;
};

std::string piece_error(const Piece& piece, bool first_or_last_of_open) {
  const auto bad = [](const std::optional<double>& v) { return v && !std::isfinite(*v); };
  if (bad(piece.straight_mm) || bad(piece.radius_mm) || bad(piece.turn_deg)) return "must be a finite number";
  if (piece.straight_mm) {
    if (piece.radius_mm || piece.turn_deg) return "is a straight or a bend, not both";
    return *piece.straight_mm > 0.0 ? "" : "a straight must be longer than 0";
  }
  if (!piece.radius_mm && !piece.turn_deg) return "needs straight_mm, or radius_mm and turn_deg";
  if (!piece.radius_mm) return "a bend needs radius_mm too (0 is a sharp corner)";
  if (!piece.turn_deg) return "a bend needs turn_deg too (positive turns left)";
  if (*piece.turn_deg == 0.0) return "a bend must turn by more than 0 degrees";
  if (*piece.radius_mm == 0.0) {
    if (first_or_last_of_open) return "a corner needs a piece before and after it";
    return std::fabs(*piece.turn_deg) < 180.0 ? "" : "a corner must turn by less than 180 degrees";
  }
  if (*piece.radius_mm < radius_least / mm) return "a radius must be 0 (a sharp corner) or at least 1 mm";
  return std::fabs(*piece.turn_deg) <= turn_most_deg ? "" : "a bend must turn by 3600 degrees at most";
}

std::string piece_text(const Piece& piece) {
  std::string text;
  const auto add = [&text](const char* key, const std::optional<double>& value) {
    if (!value) return;
    if (!text.empty()) text += ", ";
    text += key + (" = " + rounded_text(*value));
  };
  add("straight_mm", piece.straight_mm);
  add("radius_mm", piece.radius_mm);
  add("turn_deg", piece.turn_deg);
  return text;
}

void lay_straight(Laid& laid, double length, double heading_deg) {
  const Vector tangent = direction_of(heading_deg);
  laid.spans.push_back({laid.end, tangent, 0.0, laid.length, length});
  laid.end = laid.end + length * tangent;
  laid.length += length;
}

void lay_bend(Laid& laid, double radius, double turn_deg, double heading_deg) {
  const double signed_radius = turn_deg > 0.0 ? radius : -radius;
  const Vector before = direction_of(heading_deg), after = direction_of(heading_deg + turn_deg);
  const double length = radius * std::fabs(turn_deg) * rad_per_deg;
  laid.spans.push_back({laid.end, before, 1.0 / signed_radius, laid.length, length});
  laid.end = laid.end + signed_radius * (left_of(before) - left_of(after));
  laid.length += length;
}

bool is_corner(const Piece& piece) { return piece.radius_mm && *piece.radius_mm == 0.0; }

Result<Laid> lay(const Course& course) {
  Laid laid;
  const Piece* before = course.closed ? &course.pieces.back() : nullptr;
  laid.end = {course.start_mm.x_mm * mm, course.start_mm.y_mm * mm};
  for (std::size_t i = 0; i < course.pieces.size(); ++i) {
    const Piece& piece = course.pieces[i];
    const bool at_end = !course.closed && (i == 0 || i + 1 == course.pieces.size());
    std::string why = piece_error(piece, at_end);
    if (why.empty() && before && is_corner(*before) && is_corner(piece))
      why = "two corners in a row are one corner: give it their sum";
    before = &piece;
    if (!why.empty()) return Error{place_text("course.pieces", i), piece_text(piece), why};
    const double heading = course.heading_deg + laid.turned_deg;
    if (piece.straight_mm) {
      lay_straight(laid, *piece.straight_mm * mm, heading);
      continue;
    }
    if (*piece.radius_mm > 0.0) {
      lay_bend(laid, *piece.radius_mm * mm, *piece.turn_deg, heading);
    } else {
      laid.corners.push_back(laid.length);
      laid.corner_deg.push_back(*piece.turn_deg);
    }
    laid.turned_deg += *piece.turn_deg;
  }
  return laid;
}

struct Place {
  Vector at, tangent;
};

/// Along an arc the chord of half the angle: no division by a small curvature, no cancellation.
Place place_on(const Span& span, double along) {
  if (span.curvature == 0.0) return {span.start + along * span.tangent, span.tangent};
  const Vector half = direction_at(0.5 * span.curvature * along);
  const double chord = 2.0 * half.y / span.curvature;
  const Vector towards = turned(span.tangent, half);
  return {span.start + chord * towards, turned(towards, half)};
}

/// Mean curvature over [from, to], which may reach across joints.
double mean_curvature(const std::vector<Span>& spans, std::size_t first, double from, double to) {
  if (spans[first].from + spans[first].length >= to) return spans[first].curvature;
  double turn = 0.0;
  for (std::size_t i = first; i < spans.size() && spans[i].from < to; ++i) {
    const double low = std::max(from, spans[i].from);
    const double high = std::min(to, spans[i].from + spans[i].length);
    if (high > low) turn += (high - low) * spans[i].curvature;
  }
  return turn / (to - from);
}

void sample(const Laid& laid, Centreline& line) {
  std::size_t k = 0;
  for (std::size_t i = 0; i < line.nodes.size(); ++i) {
    const double s = static_cast<double>(i) * line.pitch;
    while (k + 1 < laid.spans.size() && laid.spans[k + 1].from <= s + on_sample * line.pitch) ++k;
    const Place place = place_on(laid.spans[k], s - laid.spans[k].from);
    Node& node = line.nodes[i];
    node.x = place.at.x;
    node.y = place.at.y;
    node.tangent_x = place.tangent.x;
    node.tangent_y = place.tangent.y;
    node.curvature = mean_curvature(laid.spans, k, s, s + line.pitch);
  }
}

/// Makes good what a closed course of rounded figures misses: the gap by a cubic over the whole length, the
/// twist by one over the last stretch (Hermite's blending functions, so that place and heading join
/// smoothly).
void absorb_residual(Centreline& line, Vector gap, double twist) {
  if (length_of(gap) < 1e-9 && std::fabs(twist) < 1e-9) return;
  const double stretch = std::min(closing_stretch, line.length);
  const Node first = line.nodes.front();
  const Vector tangent_gap = twist * left_of({first.tangent_x, first.tangent_y});
  for (std::size_t i = 0; i < line.nodes.size(); ++i) {
    Node& node = line.nodes[i];
    const double s = static_cast<double>(i) * line.pitch;
    const double t = s / line.length;
    Vector shift = (-t * t * (3.0 - 2.0 * t)) * gap;
    Vector slope = (-6.0 * t * (1.0 - t) / line.length) * gap;
    Vector bend = (-6.0 * (1.0 - 2.0 * t) / (line.length * line.length)) * gap;
    const double w = 1.0 - (line.length - s) / stretch;
    if (w > 0.0) {
      shift = shift + (stretch * w * w * (1.0 - w)) * tangent_gap;
      slope = slope + (w * (2.0 - 3.0 * w)) * tangent_gap;
      bend = bend + ((2.0 - 6.0 * w) / stretch) * tangent_gap;
    }
    const Vector tangent{node.tangent_x, node.tangent_y};
    const Vector leaning = tangent + slope;
    node.curvature += dot(bend, left_of(tangent));
    node.x += shift.x;
    node.y += shift.y;
    node.tangent_x = leaning.x / length_of(leaning);
    node.tangent_y = leaning.y / length_of(leaning);
  }
}

Result<bool> check_closing(const Course& course, const Laid& laid, Vector gap, double twist_deg) {
  const double gap_mm = length_of(gap) / mm;
  if (gap_mm <= gap_most / mm && std::fabs(twist_deg) <= twist_most_deg) return true;
  const std::string what = "ends " + rounded_text(gap_mm) + " mm from its start (" +
                           rounded_text(gap.x / mm) + " mm in x, " + rounded_text(gap.y / mm) +
                           " mm in y) and " + rounded_text(twist_deg) + " degrees off its heading, after " +
                           rounded_text(laid.length / mm) + " mm in " + std::to_string(course.pieces.size()) +
                           " pieces";
  return Error{"course.pieces", what,
               "a closed course must end where it starts, within 0.5 mm and 0.1 degrees"};
}

std::vector<CourseSection> sections_of_pieces(const Laid& laid) {
  std::vector<CourseSection> sections;
  std::size_t corner = 0;
  const auto add_corners_before = [&](double s) {
    for (; corner < laid.corners.size() && laid.corners[corner] <= s; ++corner)
      sections.push_back(
          {laid.corners[corner], laid.corners[corner], 0.0, laid.corner_deg[corner] * rad_per_deg});
  };
  double curvature_before = std::numeric_limits<double>::quiet_NaN();
  for (const Span& span : laid.spans) {
    const std::size_t before = sections.size();
    add_corners_before(span.from);
    const double turn = span.curvature * span.length, to = span.from + span.length;
    if (sections.size() == before && span.curvature == curvature_before) {
      sections.back().to = to;
      sections.back().turn += turn;
    } else {
      const double radius =
          span.curvature == 0.0 ? std::numeric_limits<double>::infinity() : 1.0 / std::fabs(span.curvature);
      sections.push_back({span.from, to, radius, turn});
    }
    curvature_before = span.curvature;
  }
  add_corners_before(laid.length);
  return sections;
}

}  // namespace

Result<Centreline> lay_pieces(const Course& course) {
  for (const double v : {course.start_mm.x_mm, course.start_mm.y_mm, course.heading_deg})
    if (!std::isfinite(v)) return Error{"course.start_mm", rounded_text(v), "must be a finite number"};
  const Result<Laid> laid = lay(course);
  if (!laid) return laid.error();
  Result<Centreline> line = blank_centreline(laid->length, course.closed);
  if (!line) return line;
  line->corners = laid->corners;
  line->sections = sections_of_pieces(*laid);
  sample(*laid, *line);
  if (course.closed) {
    const Vector gap = laid->end - Vector{course.start_mm.x_mm * mm, course.start_mm.y_mm * mm};
    const double twist_deg = laid->turned_deg - 360.0 * std::rint(laid->turned_deg / 360.0);
    const Result<bool> closes = check_closing(course, *laid, gap, twist_deg);
    if (!closes) return closes.error();
    absorb_residual(*line, gap, twist_deg * rad_per_deg);
  }
  return line;
}

}  // namespace lw
