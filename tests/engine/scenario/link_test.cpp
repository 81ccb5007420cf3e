// Links: base64url against RFC 4648, DEFLATE against bytes packed elsewhere, and every way in which a link
// can be bad. tests/outside/link_check.py unpacks links with Python's own modules.
#include "engine/scenario/link.h"

#include <string>

#include "engine/scenario/same.h"
#include "engine/scenario/text.h"
#include "tests/catch.h"
#include "tests/engine/scenario/samples.h"

namespace lw {
namespace {

std::string error_of_link(std::string_view link) {
  const auto scenario = decode_link(link);
  return scenario ? "no error" : text_of(scenario.error());
}

std::string packed_link(std::string_view text) { return std::string(link_mark) + base64url(*deflated(text)); }

TEST_CASE("base64url gives the test vectors of RFC 4648, section 10, unpadded") {
  const std::pair<std::string, std::string> vectors[] = {
      {"", ""},           {"f", "Zg"},          {"fo", "Zm8"},         {"foo", "Zm9v"},
      {"foob", "Zm9vYg"}, {"fooba", "Zm9vYmE"}, {"foobar", "Zm9vYmFy"}};
  for (const auto& vector : vectors) {
    CHECK(base64url(vector.first) == vector.second);
    REQUIRE(from_base64url(vector.second));
    CHECK(*from_base64url(vector.second) == vector.first);
  }
  // RFC 4648, section 9: 14fb9c03d97e is FPucA9l+, and section 5 puts - for + and _ for /.
  CHECK(base64url("\x14\xfb\x9c\x03\xd9\x7e") == "FPucA9l-");
  CHECK(base64url("\xff\xff\xff") == "____");
}

TEST_CASE("base64url of any bytes reads back") {
  samples::Dice dice{5};
  for (std::size_t length = 0; length < 300; ++length) {
    std::string bytes;
    for (std::size_t i = 0; i < length; ++i) bytes += static_cast<char>(dice.bits());
    const std::string text = base64url(bytes);
    CHECK(text.size() == (length * 4 + 2) / 3);
    REQUIRE(from_base64url(text));
    CHECK(*from_base64url(text) == bytes);
  }
}

TEST_CASE("base64url refuses what no bytes give") {
  const auto why = [](std::string_view text) {
    const auto bytes = from_base64url(text);
    return bytes ? "no error" : bytes.error().why;
  };
  CHECK(why("Zm9+") == "character 4 of its data, \"+\", is not base64url");
  CHECK(why("Zm/v") == "character 3 of its data, \"/\", is not base64url");
  CHECK(why("Zg==") == "character 3 of its data, \"=\", is not base64url");
  CHECK(why("Zm 9v") == "character 3 of its data, \" \", is not base64url");
  CHECK(why("\x80") == "character 1 of its data, a byte that is no letter, is not base64url");
  CHECK(why("Zm9vY") == "its data is cut off: a last character alone makes no byte");
  CHECK(why("Zh") == "its data is cut off or altered: bits left over at the end are not 0");  // RFC 4648, 3.5
  CHECK(why("Zm9") == "its data is cut off or altered: bits left over at the end are not 0");
}

// RFC 1951, section 3.2.4: a stored block is 1 (last), its length, the complement of it, the bytes.
// Section 3.2.6: the fixed code of 'a' (97) is 8 bits from 00110000 + 97, of the end 0000000: 4b 04 00, which
// other packers give as well.
TEST_CASE("streams made by hand from RFC 1951 are unpacked") {
  const std::string stored{
      "\x01\x03\x00\xfc\xff"
      "abc",
      8};
  REQUIRE(inflated(stored, 100));
  CHECK(*inflated(stored, 100) == "abc");
  const std::string fixed{"\x4b\x04\x00", 3};
  REQUIRE(inflated(fixed, 100));
  CHECK(*inflated(fixed, 100) == "a");
  const std::string reserved{"\x07\x00", 2};  // block type 3, section 3.2.3: error
  CHECK(inflated(reserved, 100).error().why == "its data is damaged");
}

TEST_CASE("unpacking stops at its bound") {
  const auto bomb = deflated(std::string(50000000, 'a'));
  REQUIRE(bomb);
  CHECK(bomb->size() < 60000);
  CHECK(inflated(*bomb, 1000).error().why == "it unpacks to more than 1000 bytes");
  CHECK(error_of_link(std::string(link_mark) + base64url(*bomb)) ==
        "link: it unpacks to more than 1048576 bytes");
  REQUIRE(inflated(*deflated("abc"), 3));
  CHECK(!inflated(*deflated("abcd"), 3));
}

TEST_CASE("a link holds the scenario bit for bit, whatever address is before it") {
  for (std::uint64_t seed = 500; seed < 560; ++seed) {
    const Scenario scenario = seed == 500 ? samples::seedling_cart() : samples::random_scenario(seed);
    INFO("seed " << seed);
    const auto link = encode_link(scenario);
    REQUIRE(link);
    for (const std::string before :
         {"", "#", "https://carts.example/floor/?a=1.2#", "file:///media/usb/page.html#", " \n"}) {
      const auto back = decode_link(before + *link + (before == " \n" ? "\n" : ""));
      INFO(before << (back ? "" : text_of(back.error())));
      REQUIRE(back);
      CHECK(same(*back, scenario));
      CHECK(looks_like_link(before + *link) == (before != " \n" || looks_like_link(" \n" + *link)));
    }
  }
}

TEST_CASE("a usual link is short") {
  const auto link = encode_link(samples::seedling_cart());
  REQUIRE(link);
  CHECK(link->size() < 250);
  CHECK(link->rfind("lw1.", 0) == 0);
}

TEST_CASE("a link is told from a file name and from text") {
  CHECK(looks_like_link("lw1.abc"));
  CHECK(looks_like_link("https://carts.example/#lw1.abc"));
  CHECK(looks_like_link("https://carts.example/#lw2.abc"));
  for (const char* other : {"", "lw", "lw.toml", "lw1", "oval.toml", "scenarios/lw/oval.toml", "#",
                            "lwx.toml", "format = \"linewright 1\" # a comment"})
    CHECK(!looks_like_link(other));
}

TEST_CASE("what is wrong with a link is said plainly") {
  const std::string none = "link: not a link of linewright: behind '#' it would begin with \"lw1.\"";
  for (const char* other : {"", "#", "   ", "oval.toml", "https://carts.example/", "https://carts.example/#",
                            "lw", "lw.", "lwx.AAAA", "LW1.AAAA"})
    CHECK(error_of_link(other) == none);
  CHECK(error_of_link("lw2.AAAA") == "link: made for another linewright: version 2, and this one reads 1");
  CHECK(error_of_link("lw1.") == "link: it holds no data");
  CHECK(error_of_link("lw1.ab*d") == "link: character 3 of its data, \"*\", is not base64url");
  CHECK(error_of_link("lw1." + std::string(most_link_bytes, 'A')) ==
        "link: it is 524292 characters long; at most 524288 are read");
  const std::string packed = *deflated(write_short(samples::seedling_cart()));
  for (std::size_t length = 1; length < packed.size(); ++length) {
    INFO(length);
    CHECK(error_of_link(std::string(link_mark) + base64url(packed.substr(0, length))) ==
          "link: its data is cut off");
  }
  CHECK(error_of_link(std::string(link_mark) + base64url(packed + "x")) ==
        "link: something follows its data");
  CHECK(error_of_link("lw1.____") == "link: its data is damaged");
  CHECK(error_of_link(packed_link("")) ==
        "link: format: missing; a scenario begins with format = \"linewright 1\"");
  CHECK(error_of_link(packed_link(samples::format + "[vehicle]\ngrip=99\n" + samples::straight)) ==
        "link:3: vehicle.grip = 99: between 0 and 10");
}

TEST_CASE("the largest valid scenario fits into a link") {
  Scenario scenario = samples::seedling_cart();
  samples::Dice dice{11};
  scenario.title.clear();
  scenario.course.pieces.clear();
  for (std::size_t i = 0; i < most_points; ++i) {
    scenario.course.points_mm.push_back(Point{-1e6 * dice.unit(), -1e6 * dice.unit()});
    scenario.course.corners.push_back(static_cast<int>(i));
  }
  for (std::size_t i = 0; i < most_gaps; ++i) {
    const double from = 9e6 * dice.unit();
    scenario.course.gaps_mm.push_back(Stretch{from, from + dice.unit()});
  }
  for (std::size_t i = 0; i < 20000; ++i) scenario.note += static_cast<char>(' ' + dice.below(95));
  for (std::size_t i = 0; i < 300; ++i) scenario.title += static_cast<char>(' ' + dice.below(95));
  const auto link = encode_link(scenario);
  REQUIRE(link);
  const auto back = decode_link(*link);
  INFO((back ? "" : text_of(back.error())));
  REQUIRE(back);
  CHECK(same(*back, scenario));
}

}  // namespace
}  // namespace lw
