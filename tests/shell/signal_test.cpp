// The command signal: CSV on stdout or into a file, JSON, refusals.
#include "tests/catch.h"
#include "tests/shell/calls.h"

using namespace lw::test;

TEST_CASE("signal prints what the controller makes of the segments, loop by loop", "[shell]") {
  const std::string call = "--segments '0@0.02, 0.2@0, 0.2@0.05' " + scenario("straight");
  const Ran ran = linewright("signal " + call);
  CHECK(ran.code == 0);
  CHECK(ran.out.find("t_s,error,p,i,d,steer,left,right\n0,0,0,0,0,0,") == 0);

  const std::string file = scratch("signal.csv");
  const Ran written = linewright("signal --csv '" + file + "' " + call);
  CHECK(written.code == 0);
  CHECK(load(file) == ran.out);

  const Json json = json_from("signal --json " + call);
  CHECK(keys_of(json) == "loops t_s error p i d steer left right");
  CHECK(json["p"].back().get<double>() == Approx(0.25 * 0.2));  // the scenario's kp is 0.25
  CHECK(json["loops"].get<std::size_t>() == json["steer"].size());
}

TEST_CASE("signal without segments, or with one that is none, is refused", "[shell]") {
  CHECK(linewright("signal " + scenario("straight")).code == 2);
  const Ran ran = linewright("signal --segments 0.2 " + scenario("straight"));
  CHECK(ran.code == 2);
  CHECK(ran.out.empty());
  CHECK(ran.err.find("an entry is LEVEL@SECONDS") != std::string::npos);
}
