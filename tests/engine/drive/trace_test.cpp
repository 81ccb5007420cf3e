#include "engine/drive/trace.h"

#include "engine/drive/drive.h"
#include "tests/catch.h"
#include "tests/engine/drive/courses.h"

using namespace lw;
using namespace lw::test;

namespace {

Trace small_trace() {
  Trace trace;
  trace.sensors = 2;
  for (int row = 0; row < 3; ++row) {
    TraceRow one;
    for (const TraceColumn& column : trace_columns) one.*column.member = 0.5 + row;
    trace.rows.push_back(one);
    trace.readings.insert(trace.readings.end(), {0.25 * row, 0.75});
  }
  return trace;
}

}  // namespace

TEST_CASE("every field of a row is among the columns") {
  CHECK(sizeof(TraceRow) == std::size(trace_columns) * sizeof(double));
}

TEST_CASE("changing any one field changes the hash, and the difference names row and field") {
  const Trace base = small_trace();
  const std::uint64_t hash = trace_hash(base);
  for (const TraceColumn& column : trace_columns) {
    Trace changed = base;
    changed.rows[1].*column.member += 1e-15;
    TraceDifference difference;
    CHECK(trace_hash(changed) != hash);
    REQUIRE(first_difference(base, changed, difference));
    CHECK(difference.row == 1);
    CHECK(difference.field == column.name);
  }
  Trace changed = base;
  changed.readings[5] = 0.76;
  TraceDifference difference;
  CHECK(trace_hash(changed) != hash);
  REQUIRE(first_difference(base, changed, difference));
  CHECK(difference.row == 2);
  CHECK(difference.field == "reading_1");
}

TEST_CASE("minus zero is no difference, a missing row is one") {
  Trace a = small_trace(), b = a;
  a.rows[0].steer = 0.0;
  b.rows[0].steer = -0.0;
  TraceDifference difference;
  CHECK_FALSE(first_difference(a, b, difference));
  CHECK(trace_hash(a) == trace_hash(b));
  b.rows.pop_back();
  REQUIRE(first_difference(a, b, difference));
  CHECK(difference.field == "rows");
}

TEST_CASE("two drives of one plan have the same bits, another seed has not") {
  Scenario scenario = on_oval();
  scenario.sensors.noise_pct = 1.0;
  const Result<Plan> plan = make_plan(scenario);
  REQUIRE(plan.ok());
  Trace a, b, c;
  drive(*plan, &a);
  drive(*plan, &b);
  drive(*plan, &c, 1);
  CHECK(trace_hash(a) == trace_hash(b));
  CHECK(trace_hash(a) != trace_hash(c));
}
