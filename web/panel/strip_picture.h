// Curves of strip charts as pixels: what would be tens of thousands of triangles is one picture.
//
// A curve comes thinned out to one entry a pixel column: lowest, highest and last value. Where it only rises
// or falls within a column it is drawn as a straight stroke from the value the column begins with (the last
// one of the column before) to the value it ends with; where it turns (by more than can be seen), as an
// upright stroke from the lowest to the highest. Neighbouring columns so always join. A pixel's opacity is
// the share of its area that the stroke covers: exact for straight strokes, so that a slanted line is as
// thick as a level one; strokes of one curve do not add up where they overlap.
//
// Pixels are those of the screen; x right, y down, from the picture's upper left corner.
#pragma once

#include <cstdint>
#include <vector>

namespace lw::panel {

/// One curve as it is drawn, by pixel column; all three of the same length.
struct Decimated {
  std::vector<float> low, high;  // lowest and highest value; NaN where the drive is over
  std::vector<float> last;       // that the column ends with
};

/// Rows from the top, in each from the left; a pixel is a colour of Dear ImGui (IM_COL32: bytes red, green,
/// blue, opacity), its colour not multiplied by its opacity.
struct Pixels {
  int width = 0, height = 0;
  std::vector<std::uint32_t> colours;  // width x height
};

/// Makes the picture that large, with nothing on it.
void clear(Pixels& pixels, int width, int height);

/// Where a strip lies in the picture. Value v is at y = zero - v * per_unit.
struct StripPlace {
  int top = 0, bottom = 0;  // the rows that may be drawn on: top to bottom - 1, within the picture
  float zero = 0.0f;        // y of value 0, px from the top of the picture; anywhere
  float per_unit = 1.0f;    // px a unit of the curve
};

/// Draws a curve over what is there, from column 0 on; columns beyond the picture are left out. `thick` in
/// px, at least 1.
void draw_curve(Pixels& pixels, const StripPlace& place, const Decimated& curve, std::uint32_t colour,
                float thick);

}  // namespace lw::panel
