// A freehand stroke made into a few points that a course can be drawn through.
//
// A pointer gives hundreds of places, unevenly spaced and with a tremor. In order:
//   1. places nearer together than half a step are dropped; the rest is resampled at even steps of length;
//   2. the stroke is closed if a place near its end comes close to one near its start; what overshoots is cut
//   off;
//   3. corners: where the directions to the places an arm's length before and after make a large angle that
//   does not
//      shrink with the arm (the k-cosine of Rosenfeld and Johnston 1973, Angle detection on digital curves);
//   4. the tremor is smoothed between corners without shrinking bends (Taubin 1995, Curve and surface
//   fairing);
//   5. points are chosen as by Ramer (1972) and by Douglas and Peucker (1973), first against chords, then
//   against the
//      spline that will join them, until no place of the stroke is further than `tolerance_mm` from the line.
#pragma once

#include <vector>

#include "engine/numeric/result.h"
#include "engine/scenario/scenario.h"

namespace lw {

struct StrokeSettings {
  double tolerance_mm = 3.0;  // > 0; how far the line may leave the stroke
  double closing_mm = 40.0;   // ends nearer than this are one place
  double corner_deg = 50.0;   // a sharper turn is a corner
  double length_least_mm = 50.0;
};

/// What goes into a Course: points_mm, corners, closed.
struct Stroke {
  bool closed = false;
  std::vector<Point> points_mm;  // rounded to 0.1 mm
  std::vector<int> corners;
};

/// Errors: fewer than two places, a place that is not a finite number, a stroke shorter than length_least_mm.
Result<Stroke> simplify_stroke(const std::vector<Point>& places_mm, const StrokeSettings& settings);

}  // namespace lw
