// Links against Python's base64, zlib and tomllib and against gzip, run live (link_check.py beside this
// file).
#ifndef __EMSCRIPTEN__  // a test inside node cannot start other programs

#include <cstdlib>
#include <fstream>
#include <iterator>
#include <string>

#include "engine/scenario/link.h"
#include "engine/scenario/same.h"
#include "engine/scenario/text.h"
#include "tests/catch.h"
#include "tests/engine/scenario/samples.h"

namespace lw {
namespace {

const std::string script = LINEWRIGHT_SOURCE_DIR "/tests/outside/link_check.py";
const std::string folder = LINEWRIGHT_BINARY_DIR;

void save(const std::string& name, const std::string& bytes) {
  std::ofstream file(name, std::ios::binary);
  file << bytes;
  REQUIRE(file.flush());
}

std::string load(const std::string& name) {
  std::ifstream file(name, std::ios::binary);
  return {std::istreambuf_iterator<char>(file), std::istreambuf_iterator<char>()};
}

bool run(const std::string& call) { return std::system(("python3 '" + script + "' " + call).c_str()) == 0; }

bool python_is_here() { return std::system("python3 -c 'import tomllib, zlib' 2>/dev/null") == 0; }

TEST_CASE("other programs unpack our links and we read theirs", "[outside]") {
  if (!python_is_here()) {
    WARN("python3 with tomllib is missing: links were not held against other programs");
    return;
  }
  const std::string text = folder + "/link_check.toml";
  const std::string link = folder + "/link_check.txt";
  const std::string theirs = folder + "/link_made.txt";
  for (std::uint64_t seed = 40; seed < 48; ++seed) {
    const Scenario scenario = seed == 40 ? samples::seedling_cart() : samples::random_scenario(seed);
    INFO("seed " << seed);
    save(text, write_short(scenario));
    save(link, "https://carts.example/page#" + *encode_link(scenario) + '\n');
    CHECK(run("check '" + link + "' '" + text + "'"));
    save(text, write(scenario));
    REQUIRE(run("make '" + text + "' > '" + theirs + "'"));
    const auto back = decode_link(load(theirs));
    INFO((back ? "" : text_of(back.error())));
    REQUIRE(back);
    CHECK(same(*back, scenario));
  }
  Scenario other = samples::seedling_cart();
  save(link, *encode_link(other));
  other.vehicle.wheel_left_mm = 59.9;
  save(text, write_short(other));
  CHECK(!run("check '" + link + "' '" + text + "' 2>/dev/null"));  // the check can fail
}

}  // namespace
}  // namespace lw

#endif
