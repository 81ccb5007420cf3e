#include "engine/controller/check_signal.h"
#include "engine/drive/plan.h"
#include "shell/commands.h"

namespace lw::shell {
namespace {

Json json_of(const std::vector<SignalRow>& rows) {
  static constexpr struct {
    const char* name;
    double SignalRow::*member;
  } columns[] = {{"t_s", &SignalRow::t},     {"error", &SignalRow::error}, {"p", &SignalRow::p},
                 {"i", &SignalRow::i},       {"d", &SignalRow::d},         {"steer", &SignalRow::steer},
                 {"left", &SignalRow::left}, {"right", &SignalRow::right}};
  Json json;
  json["loops"] = rows.size();
  for (const auto& column : columns) {
    json[column.name] = Json::array();
    for (const SignalRow& row : rows) json[column.name].push_back(row.*column.member);
  }
  return json;
}

}  // namespace

Answer signal_command(const SignalCall& call) {
  const auto knots = read_knots(call.segments);
  if (!knots) return refused(knots.error());
  const auto loaded = load(call.input);
  if (!loaded) return refused(loaded.error());
  const Scenario& scenario = loaded->scenario;
  const auto rows = answer_to(*knots, law_of(scenario.controller, scenario.sensors, scenario.vehicle),
                              wiring_of(scenario).law, 1e-3 * scenario.loop.period_ms);
  if (!rows) return refused(rows.error());
  Answer answer;
  answer.json = json_of(*rows);
  answer.text = csv_of(*rows);
  if (!call.csv.empty()) {
    if (const auto written = write_file(call.csv, answer.text); !written) return refused(written.error());
    answer.text = std::to_string(rows->size()) + " loops in " + call.csv + '\n';
  }
  return answer;
}

}  // namespace lw::shell
