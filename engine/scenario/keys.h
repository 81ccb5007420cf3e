// Finding keys by name, and the nearest one to a name that is none.
#pragma once

#include <cstddef>
#include <string>
#include <string_view>

namespace lw {

/// Whether the text may have [name].
bool is_section(std::string_view name);

/// Whether `key` may stand in [section]; section "" is the top level.
bool is_key(std::string_view section, std::string_view key);

/// How many letters have to be put in, taken out or changed to turn one word into the other (Levenshtein
/// 1966).
std::size_t edits_between(std::string_view a, std::string_view b);

/// The closest of all "section.key" paths to a misspelt one, by edits_between(); the same key in another
/// section is closest of all. Empty when none is close.
std::string nearest_path(std::string_view path);

/// "unknown key", with the nearest path where there is one.
std::string unknown_key_rule(std::string_view path);

}  // namespace lw
