#include <cmath>

#include "engine/scenario/text.h"
#include "engine/scenario/validate.h"
#include "engine/scenario/value_text.h"
#include "shell/commands.h"
#include "shell/derived.h"
#include "shell/driven.h"
#include "shell/scenario_json.h"
#include "shell/table.h"

namespace lw::shell {
namespace {

constexpr std::size_t most_bends = 12;  // listed for people; JSON has all

// ---- the keys themselves ------------------------------------------------------------------------------

template <class T>
constexpr bool is_number_type =
    std::is_same_v<T, double> || std::is_same_v<T, std::int64_t> ||
    std::is_same_v<T, std::optional<double>> || std::is_same_v<T, std::vector<double>> ||
    std::is_same_v<T, Point> || std::is_same_v<T, std::vector<Point>> ||
    std::is_same_v<T, std::vector<int>> || std::is_same_v<T, std::vector<Stretch>>;

template <class T>
std::vector<std::string> words_of(const T& value) {
  std::vector<std::string> words;
  if constexpr (NamedEnum<T>) {
    for (const std::string_view name : names_of(value)) words.emplace_back(name);
  } else if constexpr (std::is_same_v<T, std::optional<Outcome>>) {
    for (const std::string_view name : outcome_names) words.emplace_back(name);
  }
  return words;
}

std::string joined(const std::vector<std::string>& words, const char* between) {
  std::string text;
  for (const std::string& word : words) text += (text.empty() ? "" : between) + word;
  return text;
}

std::string shown(const Json& value) {
  if (value.is_null()) return "-";
  return value.is_number_float() ? number_text(value.get<double>()) : value.dump();
}

template <class T>
Json json_of_key(const FieldInfo& info, const T& value) {
  Json json;
  json["key"] = path_of(info);
  json["unit"] = info.unit;
  json["default"] = json_of(value);
  if constexpr (is_number_type<T>) {
    json["low"] = info.range.low;
    json["high"] = info.range.high;
  }
  if (const auto words = words_of(value); !words.empty()) json["words"] = words;
  json["meaning"] = info.meaning;
  return json;
}

template <class T>
std::vector<std::string> row_of_key(const FieldInfo& info, const T& value) {
  std::string allowed = joined(words_of(value), " | ");
  if constexpr (is_number_type<T>) allowed = range_text(info);
  return {"  " + std::string(info.key), shown(json_of(value)), allowed, std::string(info.meaning)};
}

Answer all_keys() {
  Answer answer;
  answer.json["keys"] = Json::array();
  std::vector<std::vector<std::string>> rows{{"  key", "default", "allowed", "meaning"}};
  const Scenario defaults;
  std::string section;
  each_field(defaults, [&](const FieldInfo& info, const auto& value) {
    answer.json["keys"].push_back(json_of_key(info, value));
    if (info.section != section) rows.push_back({"[" + (section = std::string(info.section)) + "]"});
    rows.push_back(row_of_key(info, value));
  });
  answer.text =
      "Keys of a scenario. Only format = \"linewright 1\" and a course of pieces or points_mm have "
      "to be there.\n\n" +
      table(rows);
  return answer;
}

// ---- one scenario -------------------------------------------------------------------------------------

bool is_bend(const CourseSection& section) { return std::isfinite(section.radius); }

Json json_of_sections(const Centreline& line) {
  Json bends = Json::array();
  for (const CourseSection& section : line.sections) {
    if (!is_bend(section)) continue;
    Json bend;
    bend["from_mm"] = 1e3 * section.from;
    bend["to_mm"] = 1e3 * section.to;
    bend["radius_mm"] = 1e3 * section.radius;
    bend["turn_deg"] = degrees_per_radian * section.turn;
    bends.push_back(bend);
  }
  return bends;
}

Json json_of_gains(const Gains& gains) {
  Json json;
  json["kp"] = gains.kp;
  json["ki"] = gains.ki;
  json["kd"] = gains.kd;
  return json;
}

std::vector<std::string> gain_row(const char* name, const Gains& gains) {
  return {name, "Kp " + brief(gains.kp, 6), "Ki " + brief(gains.ki, 6), "Kd " + brief(gains.kd, 6)};
}

std::string bends_text(const Centreline& line) {
  std::vector<std::vector<std::string>> rows;
  std::size_t bends = 0;
  for (const CourseSection& section : line.sections) {
    if (!is_bend(section) || ++bends > most_bends) continue;
    const std::string what =
        section.radius > 0.0 ? "radius " + fixed(1e3 * section.radius, 0) + " mm" : "corner";
    rows.push_back({"at " + fixed(1e3 * section.from, 0) + " mm", what,
                    fixed(degrees_per_radian * section.turn, 1) + " deg"});
  }
  std::string text = table(rows);
  if (bends > most_bends) text += "and " + std::to_string(bends - most_bends) + " more\n";
  return text.empty() ? "none\n" : text;
}

std::string figures_text(const std::vector<Figure>& figures) {
  std::vector<std::vector<std::string>> rows;
  for (const Figure& figure : figures)
    rows.push_back(
        {figure.label, std::isfinite(figure.value) ? brief(figure.value, 5) + ' ' + figure.unit : "none"});
  return table(rows);
}

/// Every line as a TOML comment, so that the whole description is a scenario again.
std::string commented(const std::string& text) {
  std::string out;
  for (std::size_t at = 0; at < text.size();) {
    const std::size_t end = text.find('\n', at);
    out += end == at ? "#" : "# ";
    out.append(text, at, end - at + 1);
    at = end + 1;
  }
  return out;
}

Answer one_scenario(const Loaded& loaded, const Plan& plan) {
  const Scenario& scenario = loaded.scenario;
  const Gains per_loop = gains_per_loop(scenario), per_second = gains_per_second(scenario);
  const std::vector<Figure> figures = figures_of(scenario, plan);
  Answer answer;
  answer.json["scenario"] = json_of(scenario);
  answer.json["gains"]["per_loop"] = json_of_gains(per_loop);
  answer.json["gains"]["per_second"] = json_of_gains(per_second);
  for (const Figure& figure : figures)
    answer.json["derived"][figure.key] = std::isfinite(figure.value) ? Json(figure.value) : Json(nullptr);
  answer.json["derived"]["bends"] = json_of_sections(plan.ground->line);
  answer.text = write(scenario) + '\n' +
                commented("Derived figures\n" + figures_text(figures) + "\nGains\n" +
                          table({gain_row("per loop", per_loop), gain_row("per second", per_second)}) +
                          "\nBends\n" + bends_text(plan.ground->line));
  return answer;
}

}  // namespace

Answer describe_command(const DescribeCall& call) {
  if (call.all_keys) return all_keys();
  const auto loaded = load(call.input);
  if (!loaded) return refused(loaded.error());
  const auto plan = plan_of(*loaded);
  if (!plan) return refused(plan.error());
  return one_scenario(*loaded, *plan);
}

}  // namespace lw::shell
