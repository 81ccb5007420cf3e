// The result of `check` as JUnit XML, the report that build servers read: one testsuite a scenario, one
// testcase an expectation. Elements and attributes are those that the servers' documentation agrees on
// (common practice; there is no standard).
#pragma once

#include <string>
#include <string_view>
#include <vector>

#include "shell/expectations.h"

namespace lw::shell {

/// The whole document.
std::string junit_xml(const std::vector<Checked>& all);

/// Text as the value of an attribute in quotes (XML 1.0, section 2.4). Control characters, which XML 1.0 has
/// no way to hold (section 2.2), and bytes that are not UTF-8 become '?'.
std::string xml_text(std::string_view text);

}  // namespace lw::shell
