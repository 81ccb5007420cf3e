// Short aligned tables and numbers for people.
#pragma once

#include <string>
#include <string_view>
#include <vector>

namespace lw::shell {

/// Rows of cells; every column but the last is padded to its widest cell. Trailing blanks are left out.
std::string table(const std::vector<std::vector<std::string>>& rows);

/// A number to `digits` behind the point: "12.30".
std::string fixed(double value, int digits);

/// A number to `digits` significant digits, without trailing zeros: "0.3", "1047".
std::string brief(double value, int digits = 4);

}  // namespace lw::shell
