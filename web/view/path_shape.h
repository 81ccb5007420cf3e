// The way of the guide point over the floor, drawn from a trace.
//
// The guide point is the middle of the sensors: it is what follows the line, and whose deviation colours the
// path. (The axle cuts bends on the inside.) The path is computed once a drive; thinned() picks what a screen
// can show.
#pragma once

#include <imgui.h>

#include <cstddef>
#include <span>
#include <vector>

#include "engine/drive/trace.h"
#include "web/view/transform.h"

namespace lw::view {

struct Path {
  std::vector<float> x, y;       // mm, one a row of the trace
  std::vector<float> deviation;  // mm, magnitude
};

/// `forward_mm`: of the guide point ahead of the axle.
Path path_of(const Trace& trace, double forward_mm);

/// Rows to be drawn: the first, the last, and others at least `apart_px` from the one before, more where the
/// path is longer than `most` of them.
std::vector<std::size_t> thinned(const Path& path, const View& view, float apart_px, std::size_t most = 6000);

/// Which of the places of a trail suffice to draw it: straight stretches of even colour between them pass
/// within `off_px` of those left out, and differ from their colours by `off_shade` of 255 at most. The first
/// and the last are among them.
std::vector<std::size_t> sufficing(std::span<const Pixel> points, std::span<const ImU32> colours,
                                   float off_px, int off_shade);

/// The row whose place is nearest to `p` on the screen and its distance in px; of places about as near
/// (within `slack_px`) the one nearest in order to `favoured`, so that a crossing does not make the cursor
/// jump.
struct NearRow {
  std::size_t row = 0;
  float distance = 1e30f;  // px
};
NearRow nearest_row(const Path& path, const View& view, Pixel p, std::size_t favoured, float slack_px);

/// Place on the scale of colours, 0 to 1: the square root of deviation over `far_mm`, because the first
/// millimetres off the line say more about a drive than the last before it is lost.
double share_of_scale(double deviation_mm, double far_mm);

}  // namespace lw::view
