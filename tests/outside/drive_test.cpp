// The drive against SciPy's DOP853 on the same equations (drive_ode.py beside this file).
#include "tests/outside/python.h"

#ifndef __EMSCRIPTEN__

#include "engine/drive/drive.h"
#include "engine/drive/trace_text.h"
#include "engine/scenario/text.h"
#include "tests/engine/drive/courses.h"

using namespace lw;
using namespace lw::test;

TEST_CASE("the pose follows the differential equations as DOP853 integrates them", "[outside]") {
  const std::string python = python_with("scipy.integrate, tomllib", "the drive");
  if (python.empty()) return;
  const auto check = [&](const std::string& name, Scenario scenario) {
    INFO(name);
    scenario.drive.time_limit_s = 2.0;
    const Result<Plan> plan = make_plan(scenario);
    REQUIRE(plan.ok());
    Trace trace;
    drive(*plan, &trace);
    const std::string text = saved("ode_" + name + ".toml", write(scenario));
    const std::string csv = saved("ode_" + name + ".csv", trace_csv(trace));
    CHECK(passes(python, "drive_ode.py", "'" + text + "' '" + csv + "'"));
    trace.rows[trace.rows.size() / 2].x += 2e-6;  // the check can fail
    saved("ode_" + name + ".csv", trace_csv(trace));
    CHECK_FALSE(passes(python, "drive_ode.py", "'" + text + "' '" + csv + "' 2>/dev/null"));
  };
  Scenario scenario = on_oval();
  scenario.drive.start_offset_mm = 8.0;
  check("plain", scenario);
  scenario.vehicle.wheel_left_mm = 48.0;
  scenario.vehicle.dead_band_pct = 6.0;
  scenario.vehicle.command_delay_ms = 7.3;
  scenario.vehicle.supply_pct = 92.0;
  scenario.controller.kp = 0.2;
  scenario.sensors.noise_pct = 1.0;
  check("delayed", scenario);
}

#endif
