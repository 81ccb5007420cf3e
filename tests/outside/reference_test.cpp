// Whole drives against reference_drive.py, which works the model out a second time from its description alone
// (reference_check.py beside this file compares the two).
#include "tests/outside/python.h"

#if !defined(__EMSCRIPTEN__) && defined(LINEWRIGHT_COMMAND)

using namespace lw::test;

TEST_CASE("drives agree with a second implementation of the model", "[outside]") {
  const std::string python = python_with("numpy, scipy.interpolate, tomllib", "the whole drive");
  if (python.empty()) return;
  const std::string command = "'" LINEWRIGHT_COMMAND "' ";
  CHECK(passes(python, "reference_check.py", command + "--quick"));
  // the check can fail
  CHECK_FALSE(
      passes(python, "reference_check.py", command + "--unlike controller.kp=0.35 'oval P' >/dev/null"));
  CHECK_FALSE(passes(python, "reference_check.py", command + "'no such case' >/dev/null"));
}

#endif
