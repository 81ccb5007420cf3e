#include "engine/numeric/lanes.h"

#include <cmath>

#include "tests/catch.h"

using namespace lw;

TEST_CASE("rounding to whole numbers follows the ties-to-even rule") {
  CHECK(nearest_whole(0.5) == 0.0);
  CHECK(nearest_whole(1.5) == 2.0);
  CHECK(nearest_whole(-2.5) == -2.0);
  for (double x = -1000.25; x < 1000.0; x += 0.37) {
    REQUIRE(nearest_whole(x) == std::nearbyint(x));
    REQUIRE(whole_below(x) == std::floor(x));
  }
}

TEST_CASE("whole numbers turn into integers and back") {
  for (const double whole : {0.0, 1.0, 4095.0, 1048577.0, 4503599627370495.0}) {
    CHECK(index_of(whole) == static_cast<std::uint64_t>(whole));
    CHECK(number_from<double>(static_cast<std::uint64_t>(whole)) == whole);
  }
}

TEST_CASE("no NaN passes a bound") {
  const double nothing = std::nan("");
  CHECK(held(nothing, -1.0, 1.0) == -1.0);
  const Pack<2> two = held(Pack<2>{nothing, 0.5}, all_lanes<Pack<2>>(-1.0), all_lanes<Pack<2>>(1.0));
  CHECK(two[0] == -1.0);
  CHECK(two[1] == 0.5);
}

TEST_CASE("masks select lane by lane") {
  const Pack<4> a{1, 2, 3, 4}, b{4, 3, 2, 1};
  const Pack<4> least = lesser(a, b), most = greater(a, b);
  for (int i = 0; i < 4; ++i) {
    CHECK(least[i] == std::fmin(a[i], b[i]));
    CHECK(most[i] == std::fmax(a[i], b[i]));
  }
  CHECK(any(a > 3.5));
  CHECK_FALSE(any(a > 4.5));
  CHECK(any(inverse(a > 3.5)));
}

TEST_CASE("signs are moved without touching the magnitude") {
  CHECK(with_sign(3.0, -0.0) == -3.0);
  CHECK(magnitude(-0.25) == 0.25);
  CHECK(square_root(Pack<2>{4.0, 2.0})[1] == std::sqrt(2.0));
}
