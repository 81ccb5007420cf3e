#include "engine/course/stroke.h"

#include <algorithm>
#include <cmath>

#include "engine/course/sampling.h"
#include "engine/course/spline.h"

namespace lw {
namespace {

using Places = std::vector<Vector>;  // here in mm

/// A stroke at even steps. Indices of a closed one wrap.
struct Even {
  bool closed = false;
  double step = 0.0;  // mm
  Places at;
  std::vector<int> corners;

  int count() const { return static_cast<int>(at.size()); }
  int wrapped(int i) const { return (i % count() + count()) % count(); }
};

double length_of(const Places& places) {
  double sum = 0.0;
  for (std::size_t i = 1; i < places.size(); ++i) sum += length_of(places[i] - places[i - 1]);
  return sum;
}

/// Cuts a stroke whose ends meet where they come nearest; whether it does.
bool cut_where_ends_meet(Places& places, double closing) {
  const double length = length_of(places);
  if (length < 4.0 * closing) return false;
  const double most = 0.15 * length;  // as far in from either end as an overshoot may go
  std::size_t first = 0, last = places.size() - 1;
  double least = 1e300, from_start = 0.0;
  for (std::size_t i = 0; from_start < most; ++i) {
    double from_end = 0.0;
    for (std::size_t j = places.size() - 1; from_end < most; --j) {
      // An overshoot is cut only where that brings the ends clearly nearer.
      const double d = length_of(places[i] - places[j]) + 0.1 * (from_start + from_end);
      if (d < least) least = d, first = i, last = j;
      from_end += length_of(places[j] - places[j - 1]);
    }
    from_start += length_of(places[i + 1] - places[i]);
  }
  if (length_of(places[first] - places[last]) > closing) return false;
  places = Places(places.begin() + static_cast<std::ptrdiff_t>(first),
                  places.begin() + static_cast<std::ptrdiff_t>(last) + 1);
  return true;
}

Even evenly(Places places, bool closed, double step_aim) {
  if (closed) places.push_back(places.front());
  const double length = length_of(places);
  const int steps = std::max(8, static_cast<int>(std::rint(length / step_aim)));
  Even even;
  even.closed = closed;
  even.step = length / steps;
  double before = 0.0;
  std::size_t k = 0;
  for (int i = 0; i < steps + (closed ? 0 : 1); ++i) {
    const double s = i * even.step;
    double piece = length_of(places[k + 1] - places[k]);
    while (before + piece < s && k + 2 < places.size()) {
      before += piece;
      ++k;
      piece = length_of(places[k + 1] - places[k]);
    }
    const double share = piece > 0.0 ? std::min((s - before) / piece, 1.0) : 0.0;
    even.at.push_back(places[k] + share * (places[k + 1] - places[k]));
  }
  return even;
}

/// Turn at place i between arms of `arm` steps, in degrees; 0 where an arm would reach beyond an open end.
double turn_at(const Even& even, int i, int arm) {
  if (!even.closed && (i < arm || i + arm >= even.count())) return 0.0;
  const Vector back = even.at[i] - even.at[even.wrapped(i - arm)];
  const Vector on = even.at[even.wrapped(i + arm)] - even.at[i];
  return std::fabs(angle_between(back, on)) / rad_per_deg;
}

void find_corners(Even& even, double corner_deg, int arm) {
  std::vector<double> turn(even.at.size());
  for (int i = 0; i < even.count(); ++i) turn[i] = turn_at(even, i, arm);
  for (int i = 0; i < even.count(); ++i) {
    if (turn[i] < corner_deg || turn_at(even, i, arm / 2) < 0.75 * turn[i]) continue;
    bool greatest = true;
    for (int j = -arm; j <= arm && greatest; ++j) {
      if (!even.closed && (i + j < 0 || i + j >= even.count())) continue;
      const double other = turn[even.wrapped(i + j)];
      greatest = other < turn[i] || (other == turn[i] && j >= 0);
    }
    if (greatest) even.corners.push_back(i);
  }
}

/// Taubin's smoothing: a shrinking pass, then a slightly stronger swelling one. Corners and open ends stay.
void smooth(Even& even, int rounds) {
  std::vector<char> stays(even.at.size(), 0);
  for (const int c : even.corners) stays[c] = 1;
  if (!even.closed) stays.front() = stays.back() = 1;
  for (int round = 0; round < rounds; ++round)
    for (const double f : {0.5, -0.526}) {
      const Places before = even.at;
      for (int i = 0; i < even.count(); ++i) {
        if (stays[i]) continue;
        const Vector middle = 0.5 * (before[even.wrapped(i - 1)] + before[even.wrapped(i + 1)]);
        even.at[i] = before[i] + f * (middle - before[i]);
      }
    }
}

double distance_to_chord(Vector p, Vector a, Vector b) {
  const Vector chord = b - a;
  const double square = dot(chord, chord);
  const double share = square > 0.0 ? std::min(std::max(dot(p - a, chord) / square, 0.0), 1.0) : 0.0;
  return length_of(p - (a + share * chord));
}

/// The place between knots `from` and `to` that is furthest from the line, if further than the tolerance;
/// else -1.
template <class Distance>
int worst_between(const Even& even, int from, int to, double tolerance, Distance&& distance) {
  int worst = -1;
  for (int i = from + 1; i < to; ++i) {
    const double d = distance(even.at[even.wrapped(i)]);
    if (d > tolerance) tolerance = d, worst = i;
  }
  return worst;
}

/// Adds, to knots in order, the worst place of every stretch until none is beyond the tolerance. `worst(k)`
/// looks between knots k and k + 1. Returns whether any was added.
template <class Worst>
bool add_worst(std::vector<int>& knots, Worst&& worst) {
  std::vector<int> more;
  for (std::size_t k = 0; k + 1 < knots.size(); ++k) {
    more.push_back(knots[k]);
    const int w = worst(k);
    if (w >= 0) more.push_back(w);
  }
  more.push_back(knots.back());
  const bool added = more.size() > knots.size();
  knots = more;
  return added;
}

/// The spline parts through the knots, one cubic between neighbours, just as a course would join them.
std::vector<Cubic> line_through(const Even& even, const std::vector<int>& knots) {
  const auto is_corner = [&](int i) {
    return std::find(even.corners.begin(), even.corners.end(), even.wrapped(i)) != even.corners.end();
  };
  Places points;
  for (const int k : knots) points.push_back(even.at[even.wrapped(k)]);
  if (even.closed && even.corners.empty()) {
    points.pop_back();
    return spline_through(points, true);
  }
  std::vector<Cubic> line;
  Places part{points.front()};
  for (std::size_t k = 1; k < points.size(); ++k) {
    part.push_back(points[k]);
    if (k + 1 < points.size() && !is_corner(knots[k])) continue;
    const std::vector<Cubic> smooth_part = spline_through(part, false);
    line.insert(line.end(), smooth_part.begin(), smooth_part.end());
    part = {points[k]};
  }
  return line;
}

double distance_to_cubic(Vector p, const Cubic& cubic) {
  constexpr int parts = 24;
  double least = 1e300;
  for (int i = 0; i < parts; ++i) {
    const double t = cubic.span / parts;
    least = std::min(least, distance_to_chord(p, cubic.place(i * t), cubic.place((i + 1) * t)));
  }
  return least;
}

/// Knots as indices that go on past the seam; the first and the last are the same place of a closed stroke.
std::vector<int> choose_knots(const Even& even, double tolerance) {
  const int n = even.count();
  const int start = even.closed && !even.corners.empty() ? even.corners.front() : 0;
  std::vector<int> knots{start};
  for (const int c : even.corners)
    if (c > start) knots.push_back(c);
  const int end = even.closed ? start + n : n - 1;
  if (even.closed && knots.size() < 3) {
    for (const int third : {start + n / 3, start + 2 * n / 3}) knots.push_back(third);
    std::sort(knots.begin(), knots.end());
  }
  knots.push_back(end);
  const auto from_chord = [&](std::size_t k) {
    const Vector a = even.at[even.wrapped(knots[k])], b = even.at[even.wrapped(knots[k + 1])];
    return worst_between(even, knots[k], knots[k + 1], 3.0 * tolerance,
                         [&](Vector p) { return distance_to_chord(p, a, b); });
  };
  while (add_worst(knots, from_chord)) {
  }
  std::vector<Cubic> line = line_through(even, knots);
  const auto from_spline = [&](std::size_t k) {
    return worst_between(even, knots[k], knots[k + 1], tolerance,
                         [&](Vector p) { return distance_to_cubic(p, line[k]); });
  };
  while (add_worst(knots, from_spline)) line = line_through(even, knots);
  return knots;
}

Result<Places> checked_places(const std::vector<Point>& raw, double apart) {
  Places places;
  for (std::size_t i = 0; i < raw.size(); ++i) {
    const Vector p{raw[i].x_mm, raw[i].y_mm};
    if (!std::isfinite(p.x) || !std::isfinite(p.y))
      return Error{place_text("stroke", i), rounded_text(p.x) + ", " + rounded_text(p.y),
                   "must be finite numbers"};
    if (places.empty() || length_of(p - places.back()) >= apart) places.push_back(p);
  }
  return places;
}

/// A closed course starts at its first point, and a vehicle had better not stand on a corner: makes the first
/// knot one that is none, and drops the last, which repeats the first.
void start_off_corner(const Even& even, std::vector<int>& knots) {
  if (even.corners.empty()) {
    knots.pop_back();
    return;
  }
  const auto smooth_one = std::find_if(knots.begin(), knots.end(), [&](int k) {
    return std::find(even.corners.begin(), even.corners.end(), even.wrapped(k)) == even.corners.end();
  });
  auto first = smooth_one - knots.begin();
  if (smooth_one == knots.end()) {
    knots.insert(knots.begin() + 1, (knots[0] + knots[1]) / 2);
    first = 1;
  }
  knots.pop_back();
  std::rotate(knots.begin(), knots.begin() + first, knots.end());
}

Stroke stroke_through(const Even& even, const std::vector<int>& knots) {
  Stroke stroke;
  stroke.closed = even.closed;
  for (std::size_t k = 0; k < knots.size(); ++k) {
    const int i = even.wrapped(knots[k]);
    const Vector p = even.at[i];  // adding 0 makes a -0 a 0
    stroke.points_mm.push_back({std::rint(p.x * 10.0) / 10.0 + 0.0, std::rint(p.y * 10.0) / 10.0 + 0.0});
    if (std::find(even.corners.begin(), even.corners.end(), i) != even.corners.end())
      stroke.corners.push_back(static_cast<int>(k));
  }
  return stroke;
}

}  // namespace

Result<Stroke> simplify_stroke(const std::vector<Point>& places_mm, const StrokeSettings& settings) {
  if (places_mm.size() < 2)
    return Error{"stroke", std::to_string(places_mm.size()) + " places", "a line needs at least 2"};
  const double step = 2.0 * settings.tolerance_mm;
  Result<Places> places = checked_places(places_mm, 0.5 * step);
  if (!places) return places.error();
  const double length = length_of(*places);
  if (length < settings.length_least_mm)
    return Error{"stroke", rounded_text(length) + " mm long",
                 "a line must be at least " + rounded_text(settings.length_least_mm) + " mm long"};
  const bool closed = cut_where_ends_meet(*places, settings.closing_mm);
  Even even = evenly(*places, closed, step);
  find_corners(even, settings.corner_deg, 4);
  smooth(even, 8);
  std::vector<int> knots = choose_knots(even, settings.tolerance_mm);
  if (closed) start_off_corner(even, knots);
  return stroke_through(even, knots);
}

}  // namespace lw
