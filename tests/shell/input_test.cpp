// Bad scenario files, links and overrides: exit 2, nothing on stdout, and a message with where, what and why.
#include "tests/catch.h"
#include "tests/shell/calls.h"

using namespace lw::test;

namespace {

/// Every command refuses the same input with the same words.
void check_refused(const std::string& arguments, const std::string& message, const std::string& in = "") {
  for (const char* command : {"drive", "check", "describe", "link"}) {
    INFO("linewright " << command << ' ' << arguments);
    const Ran ran = linewright(std::string(command) + " --json " + arguments, in);
    CHECK(ran.code == 2);
    CHECK(ran.out.empty());
    CHECK(ran.err == "linewright: " + message + '\n');
  }
}

void check_text_refused(const std::string& text, const std::string& message) {
  check_refused("-", message, text);
}

}  // namespace

TEST_CASE("input that cannot be read is refused", "[shell]") {
  check_refused("'" + scratch("absent.toml") + "'",
                scratch("absent.toml") + ": cannot be opened: No such file or directory");
  check_refused("'" + scratch("") + "'", scratch("") + ": is a folder; a scenario is one file");
  check_refused("''", "\"\": cannot be opened: No such file or directory");
  const std::string large = scratch("large.toml");
  save(large, std::string(1100000, '#'));
  check_refused("'" + large + "'", large + ": larger than the 1048576 bytes of any scenario");
}

TEST_CASE("scenario text that breaks a rule is refused with file, line, key, value and rule", "[shell]") {
  const std::string file = scratch("bad.toml");
  save(file, straight_text("[vehicle]\ngrip = -1.0\n"));
  check_refused("'" + file + "'", file + ":6: vehicle.grip = -1: between 0 and 10");
  check_text_refused("", "stdin: format: missing; a scenario begins with format = \"linewright 1\"");
  check_text_refused(straight_text("[vehicel]\n"), "stdin:5: vehicel: unknown key");
}

TEST_CASE("a link that is broken is refused", "[shell]") {
  check_refused("'page.html#lw1.AAAA'", "link: its data is cut off");
  check_refused("'lw1.'", "link: it holds no data");
  check_refused("'lw9.AAAA'", "link: made for another linewright: version 9, and this one reads 1");
  check_refused("'lw1.A*A'", "link: character 2 of its data, \"*\", is not base64url");
}

TEST_CASE("an override that breaks a rule is refused", "[shell]") {
  const auto set = [](const char* value) { return scenario("straight") + " --set '" + value + "'"; };
  check_refused(set("controller.kq=1"), "--set: controller.kq: unknown key; did you mean controller.kp?");
  check_refused(set("controller.kp"),
                "--set: controller.kp: KEY=VALUE is wanted, such as controller.kp=0.25");
  check_refused(set("=1"), "--set: =1: KEY=VALUE is wanted, such as controller.kp=0.25");
  check_refused(set("vehicle.grip=11"), "--set: vehicle.grip = 11: between 0 and 10");
}

TEST_CASE("overrides that do not fit together are refused", "[shell]") {
  const Ran ran = linewright("drive " + scenario("straight") + " --set sensors.scheme=bar");
  CHECK(ran.code == 2);
  CHECK(ran.out.empty());
  CHECK(ran.err.find("straight.toml with --set: sensors.lateral_mm = ") != std::string::npos);
}

TEST_CASE("a course that does not close is refused by how much", "[shell]") {
  const std::string text =
      "format = \"linewright 1\"\n[course]\npieces = [{ straight_mm = 500.0 }, { radius_mm = 100.0, turn_deg "
      "= 90.0 }]\n";
  const Ran ran = linewright("drive -", text);
  CHECK(ran.code == 2);
  CHECK(ran.out.empty());
  CHECK(ran.err.find("linewright: stdin: course.pieces: ends 608.276 mm from its start") == 0);
}

TEST_CASE("a trace or report that cannot be written is an error, and nothing is printed", "[shell]") {
  for (const std::string option : {"drive --trace", "drive --trace-bits", "check --junit"}) {
    INFO(option);
    const std::string file = scratch("no/such/folder/file");
    const Ran ran = linewright(option + " '" + file + "' " + scenario("straight"));
    CHECK(ran.code == 2);
    CHECK(ran.out.empty());
    CHECK(ran.err == "linewright: " + file + ": cannot be written: No such file or directory\n");
    CHECK(linewright(option + " /dev/full " + scenario("straight")).code == 2);
  }
}
