// Damaged text and links: whatever comes in, there is a value that can be written again or an error that says
// something. Meant for the sanitizer build as well, where reading beyond an end would be seen.
#include <string>

#include "engine/scenario/link.h"
#include "engine/scenario/same.h"
#include "engine/scenario/text.h"
#include "engine/scenario/validate.h"
#include "tests/catch.h"
#include "tests/engine/scenario/samples.h"

namespace lw {
namespace {

// A few random strokes: bytes changed, put in, taken out, a part doubled or moved.
std::string damaged(std::string text, samples::Dice& dice) {
  const std::string likely = "\"'#=.,{}[]\n\\-+_eE0x \xff\xc3";
  for (std::size_t strokes = 1 + dice.below(4); strokes > 0; --strokes) {
    const std::size_t at = dice.below(text.size() + 1);
    const char byte = dice.coin() ? likely[dice.below(likely.size())] : static_cast<char>(dice.bits());
    const std::size_t length = dice.below(20);
    switch (dice.below(5)) {
      case 0:
        if (at < text.size()) text[at] = byte;
        break;
      case 1:
        text.insert(at, 1, byte);
        break;
      case 2:
        text.erase(at, length);
        break;
      case 3:
        text.insert(at, text.substr(dice.below(text.size() + 1), length));
        break;
      default:
        text.resize(at);
    }
  }
  return text;
}

struct Tally {
  int values = 0;
  int errors = 0;
};

void judge(const Result<Scenario>& result, Tally& tally) {
  if (!result) {
    ++tally.errors;
    CHECK(!text_of(result.error()).empty());
    CHECK(text_of(result.error()).size() < 600);
    CHECK(text_of(result.error()).find('\n') == std::string::npos);
    return;
  }
  ++tally.values;
  CHECK(!validate(*result));
  const auto again = read(write(*result), "again");
  REQUIRE(again);
  CHECK(same(*again, *result));
}

TEST_CASE("damaged text gives a scenario or an error") {
  Tally tally;
  for (std::uint64_t seed = 1; seed <= 3000; ++seed) {
    samples::Dice dice{seed};
    const Scenario scenario = seed % 4 ? samples::seedling_cart() : samples::random_scenario(seed);
    const std::string text = damaged(seed % 2 ? write(scenario) : write_short(scenario), dice);
    INFO("seed " << seed << '\n' << text);
    judge(read(text, "text"), tally);
  }
  CHECK(tally.values > 40);
  CHECK(tally.errors > 1000);
}

TEST_CASE("damaged links give a scenario or an error") {
  Tally tally;
  const std::string link = *encode_link(samples::seedling_cart());
  const std::string packed = *deflated(write_short(samples::random_scenario(3)));
  for (std::uint64_t seed = 1; seed <= 4000; ++seed) {
    samples::Dice dice{seed};
    const std::string text =
        seed % 2 ? damaged(link, dice) : std::string(link_mark) + base64url(damaged(packed, dice));
    INFO("seed " << seed << '\n' << text);
    judge(decode_link(text), tally);
  }
  CHECK(tally.values > 0);
  CHECK(tally.errors > 3000);
}

TEST_CASE("a damaged value of --set gives a scenario or an error") {
  Tally tally;
  const Scenario scenario = samples::seedling_cart();
  for (std::uint64_t seed = 1; seed <= 4000; ++seed) {
    samples::Dice dice{seed};
    const std::string path = seed % 2 ? "sensors.lateral_mm" : damaged("sensors.gain[0]", dice);
    const std::string value = damaged(seed % 2 ? "[10.0, -12.5]" : "1.25", dice);
    INFO("seed " << seed << ", " << path << " = " << value);
    const auto changed = set_key(scenario, path, value);
    if (changed && validate(*changed)) continue;  // two sensors at one place: judged when all is set
    judge(changed, tally);
  }
  CHECK(tally.values > 40);
  CHECK(tally.errors > 1000);
}

}  // namespace
}  // namespace lw
