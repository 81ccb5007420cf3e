#include "shell/junit.h"

#include "engine/scenario/value_text.h"
#include "shell/table.h"

namespace lw::shell {
namespace {

std::string attribute(std::string_view name, std::string_view value) {
  return ' ' + std::string(name) + "=\"" + xml_text(value) + '"';
}

std::string testcase(const Checked& checked, const Assertion& assertion) {
  const std::string open =
      "    <testcase" + attribute("name", assertion.key) + attribute("classname", checked.name);
  if (assertion.holds) return open + "/>\n";
  return open + ">\n      <failure" + attribute("message", sentence(assertion)) + ">" +
         xml_text(checked.reason) + "</failure>\n    </testcase>\n";
}

std::string counts(std::size_t tests, std::size_t failed) {
  return attribute("tests", std::to_string(tests)) + attribute("failures", std::to_string(failed)) +
         attribute("errors", "0");
}

std::string testsuite(const Checked& checked) {
  std::string text = "  <testsuite" + attribute("name", checked.name) +
                     counts(checked.assertions.size(), failures(checked)) + ">\n";
  for (const Assertion& assertion : checked.assertions) text += testcase(checked, assertion);
  return text + "  </testsuite>\n";
}

}  // namespace

std::string xml_text(std::string_view text) {
  const bool known = is_utf8(text);
  std::string out;
  for (const char c : text) {
    const auto code = static_cast<unsigned char>(c);
    if (c == '&') {
      out += "&amp;";
    } else if (c == '<') {
      out += "&lt;";
    } else if (c == '>') {
      out += "&gt;";
    } else if (c == '"') {
      out += "&quot;";
    } else {
      out += code < 0x20 || code == 0x7F || (code >= 0x80 && !known) ? '?' : c;
    }
  }
  return out;
}

std::string junit_xml(const std::vector<Checked>& all) {
  std::size_t tests = 0, failed = 0;
  std::string suites;
  for (const Checked& checked : all) {
    tests += checked.assertions.size();
    failed += failures(checked);
    suites += testsuite(checked);
  }
  return "<?xml version=\"1.0\" encoding=\"UTF-8\"?>\n<testsuites" + attribute("name", "linewright check") +
         counts(tests, failed) + ">\n" + suites + "</testsuites>\n";
}

}  // namespace lw::shell
