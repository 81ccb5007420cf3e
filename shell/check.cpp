#include "shell/commands.h"
#include "shell/driven.h"
#include "shell/expectations.h"
#include "shell/junit.h"
#include "shell/line.h"

namespace lw::shell {
namespace {

std::string counted(std::size_t count, const char* noun) {
  return std::to_string(count) + ' ' + noun + (count == 1 ? "" : "s");
}

Json json_of(const Checked& checked) {
  Json json;
  json["file"] = checked.name;
  json["title"] = checked.title;
  json["outcome"] = checked.outcome;
  json["trace_hash"] = checked.trace_hash;
  json["reason"] = checked.reason;
  json["passed"] = failures(checked) == 0;
  json["expectations"] = Json::array();
  for (const Assertion& assertion : checked.assertions) {
    Json one;
    one["key"] = assertion.key;
    one["expected"] = assertion.expected;
    one["actual"] = assertion.actual;
    one["passed"] = assertion.holds;
    json["expectations"].push_back(one);
  }
  return json;
}

std::string text_for_people(const Checked& checked) {
  std::string text = std::string(failures(checked) == 0 ? "ok    " : "FAIL  ") + checked.name + "  (" +
                     counted(checked.assertions.size(), "expectation") + "): " + checked.reason + '\n';
  for (const Assertion& assertion : checked.assertions) {
    if (!assertion.holds) text += "        " + sentence(assertion) + '\n';
  }
  return text;
}

Answer answer_of(const std::vector<Checked>& all) {
  Answer answer;
  answer.json["files"] = Json::array();
  std::size_t passed = 0, failed = 0;
  for (const Checked& checked : all) {
    const std::size_t failing = failures(checked);
    failed += failing;
    passed += checked.assertions.size() - failing;
    answer.json["files"].push_back(json_of(checked));
    answer.text += text_for_people(checked);
    if (checked.assertions.empty()) answer.notes.push_back(checked.name + ": expects nothing; add [expect]");
  }
  answer.json["passed"] = passed;
  answer.json["failed"] = failed;
  answer.text += counted(all.size(), "scenario") + ": " + counted(passed, "expectation") + " held, " +
                 std::to_string(failed) + " failed\n";
  answer.exit = failed == 0 ? done : expectation_failed;
  return answer;
}

}  // namespace

Answer check_command(const CheckCall& call) {
  std::vector<Checked> all;
  std::vector<Error> errors;
  for (const std::string& from : call.from) {
    const auto loaded = load({from, call.set});
    const auto checked = loaded ? checked_of(*loaded) : Result<Checked>(loaded.error());
    if (checked)
      all.push_back(*checked);
    else
      errors.push_back(checked.error());
  }
  Answer answer = answer_of(all);
  answer.errors = std::move(errors);
  if (answer.errors.empty() && !call.junit.empty()) {
    if (const auto written = write_file(call.junit, junit_xml(all)); !written)
      return refused(written.error());
  }
  return answer;
}

}  // namespace lw::shell
