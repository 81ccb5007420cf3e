#include "web/panel/strip_picture.h"

#include <algorithm>
#include <cmath>
#include <cstddef>

namespace lw::panel {
namespace {

constexpr int opaque = 255;
constexpr float slack = 0.25f;      // px by which a curve may turn within a column that counts as straight
constexpr float level = 0.05f;      // px by which one may rise or fall that is drawn as level
constexpr float far_off = 4096.0f;  // px outside the strip beyond which a place makes no difference

/// How much of each pixel of a strip one curve covers, column by column, 0 to 255.
struct Cover {
  struct Rows {
    int first, end;
  };
  int columns, top, rows;
  std::vector<std::uint8_t> shares;
  std::vector<Rows> touched;  // by column, counted from the strip's top

  Cover(int width, const StripPlace& place)
      : columns(width),
        top(place.top),
        rows(place.bottom - place.top),
        shares(static_cast<std::size_t>(width) * static_cast<std::size_t>(rows)),
        touched(static_cast<std::size_t>(width), Rows{rows, 0}) {}

  std::uint8_t* column(int c) {
    return shares.data() + static_cast<std::size_t>(c) * static_cast<std::size_t>(rows);
  }

  /// The rows of the strip between two heights (y down), noted as touched. Empty when there are none.
  Rows touch(int c, float from, float to) {
    const auto row = [&](float y) { return std::clamp(static_cast<int>(y) - top, 0, rows); };
    const Rows range{row(from), row(to + 1.0f)};
    Rows& all = touched[static_cast<std::size_t>(c)];
    all.first = std::min(all.first, range.first);
    all.end = std::max(all.end, range.end);
    return range;
  }
};

// Signs and orders change from column to column with the noise of a curve. Compilers to WebAssembly and from
// there to machines turn a choice between two floats into a jump, and a jump that cannot be foreseen costs
// more than what it saves; so these do without.
float positive(float x) { return 0.5f * (x + std::abs(x)); }
float less_of(float a, float b) { return 0.5f * (a + b - std::abs(a - b)); }
float more_of(float a, float b) { return 0.5f * (a + b + std::abs(a - b)); }

/// How much of [y, y + 1] lies within [from, to].
float within(float y, float from, float to) { return positive(less_of(y + 1.0f, to) - more_of(y, from)); }

void raise(std::uint8_t& share, float to) {
  const int now = static_cast<int>(to * static_cast<float>(opaque) + 0.5f);
  share = static_cast<std::uint8_t>(std::max<int>(share, now));
}

/// A straight stroke, not a level one, from the left side of column `c` at y = from to its right side at y =
/// to.
struct Slanted {
  float from, slope, fall, reach;  // fall: |slope|; reach: half the stroke's upright extent
  float begin, end;                // where it is cut off
  float per_twice_fall;
};
Slanted slanted(float from, float to, float half) {
  const float slope = to - from, fall = std::abs(slope);
  return {from,
          slope,
          fall,
          half * std::sqrt(1.0f + slope * slope),
          less_of(from, to) - half,
          more_of(from, to) + half,
          0.5f / fall};
}

/// What it covers of column c + aside. Seen from there it is a band between two slanted edges.
void add(Cover& cover, int c, int aside, const Slanted& stroke) {
  if (c + aside < 0 || c + aside >= cover.columns) return;
  const float middle = stroke.from + stroke.slope * (static_cast<float>(aside) + 0.5f);
  const float upper = middle - stroke.reach - 0.5f * stroke.fall;  // of the upper edge, its upper end
  const float lower = middle + stroke.reach - 0.5f * stroke.fall;
  const float begin = more_of(stroke.begin, upper), end = less_of(stroke.end, lower + stroke.fall);
  if (begin >= end) return;
  const Cover::Rows range = cover.touch(c + aside, begin, end);
  std::uint8_t* column = cover.column(c + aside);
  // The area between an edge and the height y in this column, one pixel wide.
  const auto area = [&](float edge, float y) {
    const float above = positive(y - edge), below = positive(y - edge - stroke.fall);
    return (above - below) * (above + below) * stroke.per_twice_fall;
  };
  float y = static_cast<float>(cover.top + range.first);
  float before = area(upper, y) - area(lower, y);
  for (int r = range.first; r < range.end; ++r, y += 1.0f) {
    const float now = area(upper, y + 1.0f) - area(lower, y + 1.0f);
    raise(column[r], less_of(now - before, within(y, stroke.begin, stroke.end)));
    before = now;
  }
}

/// An upright stroke in the middle of column c, from y = high down to y = low: its share of column c + aside.
void add_upright(Cover& cover, int c, int aside, float high, float low, float half) {
  if (c + aside < 0 || c + aside >= cover.columns) return;
  const float share = within(static_cast<float>(aside), 0.5f - half, 0.5f + half);
  if (share <= 0.0f) return;
  const float begin = high - half, end = low + half;
  const Cover::Rows range = cover.touch(c + aside, begin, end);
  if (range.first >= range.end) return;
  std::uint8_t* column = cover.column(c + aside);
  const auto soften = [&](int r) {
    raise(column[r], share * within(static_cast<float>(cover.top + r), begin, end));
  };
  soften(range.first);
  soften(range.end - 1);
  const int full = static_cast<int>(share * static_cast<float>(opaque) + 0.5f);
  for (int r = range.first + 1; r < range.end - 1; ++r)
    column[r] = static_cast<std::uint8_t>(std::max<int>(column[r], full));
}

Cover cover_of(const Pixels& pixels, const StripPlace& place, const Decimated& curve, float thick) {
  Cover cover(pixels.width, place);
  const float half = 0.5f * thick;
  const int aside = static_cast<int>(std::ceil(half));  // columns to either side that it may reach
  const auto y_of = [&](float value) {
    return std::clamp(place.zero - value * place.per_unit, static_cast<float>(place.top) - far_off,
                      static_cast<float>(place.bottom) + far_off);
  };
  const int columns = std::min(pixels.width, static_cast<int>(curve.low.size()));
  bool joined = false;
  for (int c = 0; c < columns; ++c) {
    const auto i = static_cast<std::size_t>(c);
    const bool there = !std::isnan(curve.low[i]) && !std::isnan(curve.high[i]);
    const float first = joined ? curve.last[i - 1] : there ? curve.low[i] : 0.0f;
    joined = there;
    if (!there) continue;
    const float begin = y_of(first), end = y_of(curve.last[i]);
    const float high = y_of(curve.high[i]), low = y_of(curve.low[i]);
    const bool straight = std::min(begin, end) - high < slack && low - std::max(begin, end) < slack;
    // A stroke this level goes on in the columns beside it anyway.
    const int beside = low - high < 0.5f ? 0 : aside;
    if (!straight || low - high < level) {
      for (int k = -beside; k <= beside; ++k) add_upright(cover, c, k, high, low, half);
      continue;
    }
    const Slanted stroke = slanted(begin, end, half);
    for (int k = -beside; k <= beside; ++k) add(cover, c, k, stroke);
  }
  return cover;
}

int alpha_of(std::uint32_t colour) { return static_cast<int>(colour >> 24); }

/// A colour of that opacity over another (Porter and Duff, "Compositing Digital Images", 1984: over).
std::uint32_t over(std::uint32_t above, int alpha, std::uint32_t below) {
  const int under = alpha_of(below) * (opaque - alpha) / opaque;  // what is still seen of the lower one
  const int sum = alpha + under;
  if (sum == 0) return 0;
  std::uint32_t mixed = static_cast<std::uint32_t>(sum) << 24;
  for (int shift = 0; shift < 24; shift += 8) {
    const int a = static_cast<int>((above >> shift) & 255u), b = static_cast<int>((below >> shift) & 255u);
    mixed |= static_cast<std::uint32_t>((a * alpha + b * under + sum / 2) / sum) << shift;
  }
  return mixed;
}

}  // namespace

void clear(Pixels& pixels, int width, int height) {
  pixels.width = width;
  pixels.height = height;
  pixels.colours.assign(static_cast<std::size_t>(width) * static_cast<std::size_t>(height), 0u);
}

void draw_curve(Pixels& pixels, const StripPlace& place, const Decimated& curve, std::uint32_t colour,
                float thick) {
  if (pixels.width <= 0 || place.bottom <= place.top) return;
  Cover cover = cover_of(pixels, place, curve, thick);
  const int most = alpha_of(colour);
  const auto stride = static_cast<std::size_t>(pixels.width);
  for (int c = 0; c < cover.columns; ++c) {
    const Cover::Rows range = cover.touched[static_cast<std::size_t>(c)];
    const std::uint8_t* share = cover.column(c);
    std::uint32_t* pixel = pixels.colours.data() +
                           static_cast<std::size_t>(place.top + range.first) * stride +
                           static_cast<std::size_t>(c);
    for (int r = range.first; r < range.end; ++r, pixel += stride) {
      if (share[r] == 0) continue;
      const int alpha = (share[r] * most + opaque / 2) / opaque;
      if (alpha == opaque || alpha_of(*pixel) == 0)
        *pixel = (colour & 0xFFFFFFu) | static_cast<std::uint32_t>(alpha) << 24;
      else
        *pixel = over(colour, alpha, *pixel);
    }
  }
}

}  // namespace lw::panel
