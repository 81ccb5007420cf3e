// How single values look in scenario text, messages and links.
#pragma once

#include <cstddef>
#include <string>
#include <string_view>

namespace lw {

/// A number as the shortest of 15, 16 or 17 significant digits that reads back to the same double (17 always
/// do: IEEE 754, 5.12.2). "40" for 40.0; "nan", "inf" and "-inf" as TOML writes them. Only -0 carries a
/// point, "-0.0", because a whole number has no negative zero.
std::string number_text(double value);

/// number_text() with a point or exponent always there: "40.0".
std::string float_text(double value);

/// A TOML basic string with its quotes: control characters, quotes and backslashes escaped. (Not called
/// quoted: for a std::string that finds std::quoted as well.)
std::string in_quotes(std::string_view text);

/// Text for a message: control characters become '?', and what is longer than `most` bytes ends in "...",
/// never inside a UTF-8 character.
std::string clipped(std::string_view text, std::size_t most = 60);

/// Whether the bytes are well-formed UTF-8 (RFC 3629: no overlong forms, no surrogates, nothing above
/// U+10FFFF).
bool is_utf8(std::string_view text);

}  // namespace lw
