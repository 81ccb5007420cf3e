#include "engine/drive/drive.h"

#include "engine/drive/trace_text.h"
#include "engine/scenario/fields.h"
#include "shell/commands.h"
#include "shell/driven.h"
#include "shell/table.h"

namespace lw::shell {
namespace {

Json json_of(const Driven& driven) {
  const Summary& summary = driven.summary;
  Json json;
  json["outcome"] = name_of(summary.outcome);
  json["time_s"] = summary.time;
  json["progress_mm"] = 1e3 * summary.progress;
  json["deviation_mean_mm"] = 1e3 * summary.deviation_mean;
  json["deviation_rms_mm"] = 1e3 * summary.deviation_rms;
  json["deviation_max_mm"] = 1e3 * summary.deviation_max;
  json["error_mean"] = summary.error_mean;
  json["saturated_pct"] = 1e2 * summary.saturated;
  json["reversals_per_s"] = summary.reversals_per_s;
  json["slid"] = summary.slid;
  json["steps"] = summary.steps;
  json["trace_hash"] = driven.hash;
  json["reason"] = driven.reason;
  return json;
}

std::string text_for_people(const Scenario& scenario, const Driven& driven) {
  const Summary& summary = driven.summary;
  const bool bar = scenario.sensors.scheme == Scheme::bar;
  std::string text = scenario.title.empty() ? "" : scenario.title + '\n';
  text += driven.reason + "\n\n";
  return text + table({
                    {"outcome", std::string(name_of(summary.outcome))},
                    {"time", fixed(summary.time, 3) + " s"},
                    {"progress", fixed(1e3 * summary.progress, 1) + " mm"},
                    {"mean speed", fixed(1e3 * summary.mean_speed, 1) + " mm/s"},
                    {"deviation mean", fixed(1e3 * summary.deviation_mean, 2) + " mm"},
                    {"deviation rms", fixed(1e3 * summary.deviation_rms, 2) + " mm"},
                    {"deviation max", fixed(1e3 * summary.deviation_max, 2) + " mm at " +
                                          fixed(1e3 * summary.deviation_max_at, 0) + " mm"},
                    {"error mean", bar ? fixed(summary.error_mean, 3) + " mm"
                                       : fixed(1e2 * summary.error_mean, 2) + " % of full scale"},
                    {"saturated", fixed(1e2 * summary.saturated, 1) + " % of the time"},
                    {"steer reversals", fixed(summary.reversals_per_s, 2) + " per s"},
                    {"tyres slid", summary.slid ? "yes" : "no"},
                    {"steps", std::to_string(summary.steps)},
                    {"trace hash", driven.hash},
                });
}

}  // namespace

Answer drive_command(const DriveCall& call) {
  const auto loaded = load(call.input);
  if (!loaded) return refused(loaded.error());
  const auto driven = driven_of(*loaded);
  if (!driven) return refused(driven.error());
  if (!call.trace.empty()) {
    if (const auto written = write_file(call.trace, trace_csv(driven->trace)); !written)
      return refused(written.error());
  }
  if (!call.trace_bits.empty()) {
    if (const auto written = write_file(call.trace_bits, trace_bits(driven->trace)); !written)
      return refused(written.error());
  }
  Answer answer;
  answer.json = json_of(*driven);
  answer.text = text_for_people(loaded->scenario, *driven);
  return answer;
}

}  // namespace lw::shell
