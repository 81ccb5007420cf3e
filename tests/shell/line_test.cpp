// Words, options and exit codes of the command line; every message for a wrong call.
#include "build_info.h"
#include "tests/catch.h"
#include "tests/shell/calls.h"

using namespace lw::test;

namespace {

struct Wrong {
  const char* arguments;
  const char* message;
};

void check_refused(const Wrong& wrong) {
  INFO("linewright " << wrong.arguments);
  const Ran ran = linewright(wrong.arguments);
  CHECK(ran.code == 2);
  CHECK(ran.out.empty());
  CHECK(ran.err == std::string("linewright: ") + wrong.message + '\n');
}

}  // namespace

TEST_CASE("a wrong call exits 2, prints nothing on stdout and says on stderr what is wrong", "[shell]") {
  const Wrong calls[] = {
      {"drvie x.toml", "unknown command drvie; did you mean drive?"},
      {"Check x.toml", "unknown command Check; did you mean check?"},
      {"--versoin", "unknown option --versoin; did you mean --version?"},
      {"drive", "drive: SCENARIO is required; see linewright drive --help"},
      {"check", "check: SCENARIO is required; see linewright check --help"},
      {"drive --jsno x.toml", "unknown option --jsno of drive; did you mean --json?"},
      {"drive x.toml --tarce=f", "unknown option --tarce of drive; did you mean --trace?"},
      {"drive x.toml --qqqqqqqqqq", "unknown option --qqqqqqqqqq of drive; see linewright drive --help"},
      {"describe --set controller.kp=1", "describe: --set requires SCENARIO; see linewright describe --help"},
      {"drive a.toml b.toml", "drive takes one scenario, and b.toml is one too many"},
      {"drive x.toml --trace", "drive: --trace: 1 required FILE missing; see linewright drive --help"},
      {"drive x.toml --set", "drive: --set: 1 required KEY=VALUE missing; see linewright drive --help"},
  };
  for (const Wrong& wrong : calls) check_refused(wrong);
}

TEST_CASE("a word like no command is answered with the list of them", "[shell]") {
  for (const char* word : {"zzzzzzzz", "''"}) {
    const Ran ran = linewright(word);
    CHECK(ran.code == 2);
    CHECK(ran.out.empty());
    CHECK(ran.err.find("; the commands are drive, check, describe, link") != std::string::npos);
  }
}

TEST_CASE("without a command it prints the help on stderr and exits 2", "[shell]") {
  const Ran ran = linewright("");
  CHECK(ran.code == 2);
  CHECK(ran.out.empty());
  CHECK(ran.err.find("a command is wanted") != std::string::npos);
}

TEST_CASE("help names every command and option, version tells the build", "[shell]") {
  const Ran help = linewright("--help");
  CHECK(help.code == 0);
  for (const char* word : {"drive", "check", "describe", "link", "loop", "--version", "Exit code"})
    CHECK(help.out.find(word) != std::string::npos);
  const Ran drive = linewright("drive --help");
  CHECK(drive.code == 0);
  for (const char* word : {"--json", "--set", "--trace", "SCENARIO"})
    CHECK(drive.out.find(word) != std::string::npos);
  const Ran version = linewright("--version");
  CHECK(version.code == 0);
  CHECK(version.out == std::string(lw::build_info) + '\n');
}

TEST_CASE("output that cannot be written is an error", "[shell]") {
  // Nothing reads what the braces hold, so a failing write inside is the only way to this exit code.
  const Ran ran = linewright("--version >/dev/null; { '" LINEWRIGHT_COMMAND "' describe >/dev/full; }");
  CHECK(ran.code == 2);
  CHECK(ran.err == "linewright: cannot write to stdout: No space left on device\n");
}
