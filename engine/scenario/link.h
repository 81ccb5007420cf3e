// A scenario as a link: something short enough to paste, that the page and the command line both read.
//
//   any address # lw1. base64url( raw DEFLATE( write_short(scenario) ) )
//
// "lw1." marks the version of this packing. DEFLATE is RFC 1951 without wrapper; base64url is RFC 4648,
// section 5, without padding. Links come from strangers: the length is bounded before anything is decoded,
// and unpacking stops at the size of the largest text that read() would take.
#pragma once

#include <cstddef>
#include <string>
#include <string_view>

#include "engine/numeric/result.h"
#include "engine/scenario/scenario.h"

namespace lw {

inline constexpr std::string_view link_mark = "lw1.";
inline constexpr std::size_t most_link_bytes = std::size_t{1} << 19;  // of the part behind '#'

/// The part of a link behind '#'. Fails only on a scenario too large to be valid.
Result<std::string> encode_link(const Scenario& scenario);

/// Reads a whole link or the part behind its '#'; blanks around it are ignored. Errors say what is wrong with
/// the link ("link: ..."), or, once it is unpacked, with the text in it ("link:3: vehicle.grip = ...").
Result<Scenario> decode_link(std::string_view link);

/// Whether a text is meant as a link: it has the mark at its beginning or behind '#', of whatever version.
bool looks_like_link(std::string_view text);

/// Bytes as base64url without padding.
std::string base64url(std::string_view bytes);

/// The bytes of unpadded base64url. Refuses characters outside the alphabet (counted from 1 in the error),
/// lengths no bytes give, and unused bits that are not 0 (RFC 4648, section 3.5), so that each sequence of
/// bytes has one text.
Result<std::string> from_base64url(std::string_view text);

/// Bytes as one raw DEFLATE stream.
Result<std::string> deflated(std::string_view bytes);

/// The bytes of one raw DEFLATE stream that fills `packed` to its end, at most `most` of them.
Result<std::string> inflated(std::string_view packed, std::size_t most);

}  // namespace lw
