#include "shell/expectations.h"

#include <algorithm>

#include "engine/scenario/fields.h"
#include "engine/scenario/value_text.h"
#include "engine/theory/margins.h"
#include "shell/driven.h"
#include "shell/table.h"

namespace lw::shell {
namespace {

/// Where the figure that a limit is about comes from.
struct Measure {
  std::string_view key;
  double (*of)(const Summary&);
};
constexpr Measure measures[] = {
    {"time_s_max", [](const Summary& summary) { return summary.time; }},
    {"deviation_mm_max", [](const Summary& summary) { return 1e3 * summary.deviation_max; }},
    {"deviation_rms_mm_max", [](const Summary& summary) { return 1e3 * summary.deviation_rms; }},
    {"saturated_pct_max", [](const Summary& summary) { return 1e2 * summary.saturated; }},
    {"reversals_per_s_max", [](const Summary& summary) { return summary.reversals_per_s; }},
};

const Measure* measure_of(std::string_view key) {
  for (const Measure& measure : measures) {
    if (measure.key == key) return &measure;
  }
  return nullptr;
}

/// The one limit that is not about the drive: about the linear loop on the straight, and at least.
constexpr std::string_view margin_key = "gain_margin_db_min";

struct Judge {
  const Scenario& scenario;
  const Summary& summary;
  std::vector<Assertion> made;

  bool ended_well() const { return summary.outcome == scenario.expect.outcome.value_or(Outcome::finished); }

  void assert_value(const FieldInfo& info, Outcome expected) {
    made.push_back({std::string(info.key), name_of(expected), name_of(summary.outcome),
                    summary.outcome == expected, ""});
  }

  void assert_margin(double limit) {
    Assertion assertion{std::string(margin_key), limit, nullptr, false, ""};
    assertion.at_least = true;
    const Result<SampledLoop> loop = linearise(scenario);
    if (!loop) {
      assertion.why = text_of(loop.error());
    } else {
      const Margins found = margins(*loop);
      if (found.gain_high) assertion.actual = decibels(*found.gain_high);
      const bool enough = found.gain_high ? decibels(*found.gain_high) >= limit : found.stable;
      assertion.holds = enough && (found.stable || limit < 0.0);
      if (!found.stable) assertion.why = "the linear loop on the straight is not stable";
    }
    made.push_back(assertion);
  }

  void assert_value(const FieldInfo& info, double limit) {
    if (info.key == margin_key) return assert_margin(limit);
    const double actual = measure_of(info.key)->of(summary);
    Assertion assertion{std::string(info.key), limit, actual, actual <= limit, ""};
    if (info.key == "time_s_max" && !ended_well()) {
      assertion.holds = false;
      assertion.why = "the drive ended as " + std::string(name_of(summary.outcome));
    }
    made.push_back(assertion);
  }
};

Error not_asserted(const Loaded& loaded, const FieldInfo& info, double limit) {
  return Error{loaded.name, path_of(info) + " = " + number_text(limit),
               "this version cannot assert it, and does not pass over it; leave it out to check the rest"};
}

std::optional<Error> find_unasserted(const Loaded& loaded) {
  std::optional<Error> error;
  each_expect_field(loaded.scenario.expect, [&](const FieldInfo& info, const auto& value) {
    if constexpr (std::is_same_v<std::decay_t<decltype(value)>, std::optional<double>>) {
      if (value && info.key != margin_key && !measure_of(info.key) && !error)
        error = not_asserted(loaded, info, *value);
    }
  });
  return error;
}

std::string shown(const Json& value) {
  if (value.is_null()) return "none";
  return value.is_number() ? brief(value.get<double>(), 5) : value.get<std::string>();
}

}  // namespace

Result<Checked> checked_of(const Loaded& loaded) {
  if (const auto error = find_unasserted(loaded)) return *error;
  const auto driven = driven_of(loaded);
  if (!driven) return driven.error();
  Judge judge{loaded.scenario, driven->summary, {}};
  each_expect_field(loaded.scenario.expect, [&](const FieldInfo& info, const auto& value) {
    if (value) judge.assert_value(info, *value);
  });
  return Checked{loaded.name,  loaded.scenario.title, std::string(name_of(driven->summary.outcome)),
                 driven->hash, driven->reason,        std::move(judge.made)};
}

std::size_t failures(const Checked& checked) {
  return static_cast<std::size_t>(std::count_if(checked.assertions.begin(), checked.assertions.end(),
                                                [](const Assertion& assertion) { return !assertion.holds; }));
}

std::string sentence(const Assertion& assertion) {
  const char* bound = assertion.at_least ? ", expected at least " : ", expected at most ";
  const char* relation = assertion.expected.is_number() ? bound : ", expected ";
  std::string text = assertion.key + ": " + shown(assertion.actual) + relation + shown(assertion.expected);
  return assertion.why.empty() ? text : text + "; " + assertion.why;
}

}  // namespace lw::shell
