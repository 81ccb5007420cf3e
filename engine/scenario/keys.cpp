#include "engine/scenario/keys.h"

#include <algorithm>
#include <vector>

#include "engine/scenario/fields.h"

namespace lw {
namespace {

std::string_view key_of(std::string_view path) { return path.substr(path.find_last_of('.') + 1); }

}  // namespace

std::size_t edits_between(std::string_view a, std::string_view b) {
  std::vector<std::size_t> row(b.size() + 1);
  for (std::size_t k = 0; k <= b.size(); ++k) row[k] = k;
  for (std::size_t i = 1; i <= a.size(); ++i) {
    std::size_t diagonal = row[0];
    row[0] = i;
    for (std::size_t k = 1; k <= b.size(); ++k) {
      const std::size_t changed = diagonal + (a[i - 1] == b[k - 1] ? 0 : 1);
      diagonal = row[k];
      row[k] = std::min({row[k] + 1, row[k - 1] + 1, changed});
    }
  }
  return row[b.size()];
}

bool is_section(std::string_view name) {
  const Scenario scenario;
  bool found = false;
  each_field(scenario, [&](const FieldInfo& info, const auto&) { found |= info.section == name; });
  return found && !name.empty();
}

bool is_key(std::string_view section, std::string_view key) {
  const Scenario scenario;
  bool found = section.empty() && (key == "format" || is_section(key));
  each_field(scenario, [&](const FieldInfo& info, const auto&) {
    found |= info.section == section && info.key == key;
  });
  return found;
}

std::string nearest_path(std::string_view path) {
  const Scenario scenario;
  const std::string_view wrong = path.substr(0, 80);  // nothing longer is near any key
  std::string nearest;
  std::size_t least = std::max<std::size_t>(2, key_of(wrong).size() / 3) + 1;
  each_field(scenario, [&](const FieldInfo& info, const auto&) {
    const std::string candidate = path_of(info);
    const std::size_t edits = info.key == key_of(wrong) ? 0 : edits_between(candidate, wrong);
    if (edits >= least) return;
    least = edits;
    nearest = candidate;
  });
  return nearest;
}

std::string unknown_key_rule(std::string_view path) {
  const std::string nearest = nearest_path(path);
  return nearest.empty() ? "unknown key" : "unknown key; did you mean " + nearest + '?';
}

}  // namespace lw
