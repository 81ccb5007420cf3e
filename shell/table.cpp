#include "shell/table.h"

#include <algorithm>
#include <cmath>
#include <cstdio>

namespace lw::shell {
namespace {

/// Letters, not bytes, of UTF-8 text.
std::size_t width_of(std::string_view text) {
  return static_cast<std::size_t>(std::count_if(
      text.begin(), text.end(), [](char c) { return (static_cast<unsigned char>(c) & 0xC0) != 0x80; }));
}

std::string printed(const char* format, int digits, double value) {
  char text[400];  // the longest double takes 309 digits before its point
  std::snprintf(text, sizeof text, format, digits, value);
  return text;
}

}  // namespace

std::string table(const std::vector<std::vector<std::string>>& rows) {
  std::vector<std::size_t> widths;
  for (const auto& row : rows) {
    widths.resize(std::max(widths.size(), row.size()));
    for (std::size_t i = 0; i < row.size(); ++i) widths[i] = std::max(widths[i], width_of(row[i]));
  }
  std::string text;
  for (const auto& row : rows) {
    std::string line;
    std::size_t column = 0;
    for (std::size_t i = 0; i < row.size(); ++i) {
      line.append(column - std::min(column, width_of(line)), ' ');
      line += row[i];
      column += widths[i] + 2;
    }
    line.erase(line.find_last_not_of(' ') + 1);
    text += line + '\n';
  }
  return text;
}

std::string fixed(double value, int digits) {
  const std::string text = printed("%.*f", digits, value);
  return text.find_first_not_of("-0.") == std::string::npos && text[0] == '-' ? text.substr(1) : text;
}

std::string brief(double value, int digits) { return printed("%.*g", digits, value); }

}  // namespace lw::shell
