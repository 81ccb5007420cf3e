#include "engine/scenario/link.h"

#include <zlib.h>

#include <array>
#include <cstdint>

#include "engine/scenario/text.h"
#include "engine/scenario/value_text.h"

namespace lw {
namespace {

constexpr std::string_view alphabet = "ABCDEFGHIJKLMNOPQRSTUVWXYZabcdefghijklmnopqrstuvwxyz0123456789-_";

Error broken(std::string why) { return Error{"link", "", std::move(why)}; }

std::string foreign(char c, std::size_t place) {
  const bool ascii =
      static_cast<unsigned char>(c) < 0x80;  // a byte of a longer character cannot be shown alone
  return "character " + std::to_string(place) + " of its data, " +
         (ascii ? in_quotes(clipped({&c, 1})) : "a byte that is no letter") + ", is not base64url";
}

constexpr int raw_window = -15;  // zlib: no header or checksum around the stream, 32 KB window

Bytef* bytes_of(std::string_view text) {
  // zlib reads through a pointer to non-const for the sake of old compilers; it writes nothing there.
  return reinterpret_cast<Bytef*>(const_cast<char*>(text.data()));
}

// The part behind '#', or all of a text without one, without blanks around it.
std::string_view fragment_of(std::string_view link) {
  constexpr std::string_view blanks = " \t\r\n";
  const std::size_t hash = link.find('#');
  if (hash != std::string_view::npos) link.remove_prefix(hash + 1);
  const std::size_t first = link.find_first_not_of(blanks);
  if (first == std::string_view::npos) return "";
  return link.substr(first, link.find_last_not_of(blanks) - first + 1);
}

// The version in a mark "lw<version>." at the beginning; empty without such a mark.
std::string_view version_of(std::string_view fragment) {
  if (fragment.substr(0, 2) != "lw") return "";
  const std::size_t dot = fragment.find('.');
  if (dot == std::string_view::npos || dot > 8) return "";
  const std::string_view version = fragment.substr(2, dot - 2);
  return version.find_first_not_of("0123456789") == std::string_view::npos ? version : "";
}

}  // namespace

std::string base64url(std::string_view bytes) {
  std::string text;
  std::uint32_t held = 0;
  int bits = 0;
  for (const char c : bytes) {
    held = held << 8 | static_cast<unsigned char>(c);
    for (bits += 8; bits >= 6;) text += alphabet[held >> (bits -= 6) & 63];
  }
  if (bits > 0) text += alphabet[held << (6 - bits) & 63];
  return text;
}

Result<std::string> from_base64url(std::string_view text) {
  std::string bytes;
  std::uint32_t held = 0;
  int bits = 0;
  for (std::size_t i = 0; i < text.size(); ++i) {
    const std::size_t digit = alphabet.find(text[i]);
    if (digit == std::string_view::npos) return broken(foreign(text[i], i + 1));
    held = held << 6 | static_cast<std::uint32_t>(digit);
    bits += 6;
    if (bits < 8) continue;
    bits -= 8;
    bytes += static_cast<char>(held >> bits & 255);
  }
  if (bits == 6) return broken("its data is cut off: a last character alone makes no byte");
  if ((held & ((1u << bits) - 1)) != 0)
    return broken("its data is cut off or altered: bits left over at the end are not 0");
  return bytes;
}

Result<std::string> deflated(std::string_view bytes) {
  z_stream stream{};
  constexpr int memory = 9;  // zlib's most, which packs best
  if (deflateInit2(&stream, Z_BEST_COMPRESSION, Z_DEFLATED, raw_window, memory, Z_DEFAULT_STRATEGY) != Z_OK)
    return broken("out of memory");
  std::string packed(deflateBound(&stream, static_cast<uLong>(bytes.size())), '\0');
  stream.next_in = bytes_of(bytes);
  stream.avail_in = static_cast<uInt>(bytes.size());
  stream.next_out = bytes_of(packed);
  stream.avail_out = static_cast<uInt>(packed.size());
  const int state = deflate(&stream, Z_FINISH);
  packed.resize(packed.size() - stream.avail_out);
  deflateEnd(&stream);
  if (state != Z_STREAM_END) return broken("out of memory");
  return packed;
}

Result<std::string> inflated(std::string_view packed, std::size_t most) {
  z_stream stream{};
  if (inflateInit2(&stream, raw_window) != Z_OK) return broken("out of memory");
  stream.next_in = bytes_of(packed);
  stream.avail_in = static_cast<uInt>(packed.size());
  std::string bytes;
  std::array<char, 16384> piece;
  int state = Z_OK;
  while (state == Z_OK && bytes.size() <= most) {
    stream.next_out = reinterpret_cast<Bytef*>(piece.data());
    stream.avail_out = static_cast<uInt>(piece.size());
    state = inflate(&stream, Z_NO_FLUSH);
    bytes.append(piece.data(), piece.size() - stream.avail_out);
  }
  const std::size_t left = stream.avail_in;
  inflateEnd(&stream);
  if (bytes.size() > most) return broken("it unpacks to more than " + std::to_string(most) + " bytes");
  if (state == Z_MEM_ERROR) return broken("out of memory");
  if (state == Z_BUF_ERROR) return broken("its data is cut off");
  if (state != Z_STREAM_END) return broken("its data is damaged");
  if (left > 0) return broken("something follows its data");
  return bytes;
}

Result<std::string> encode_link(const Scenario& scenario) {
  const std::string text = write_short(scenario);
  if (text.size() > most_text_bytes) return broken("the scenario is too large for a link");
  const auto packed = deflated(text);
  if (!packed) return packed.error();
  std::string link = std::string(link_mark) + base64url(*packed);
  if (link.size() > most_link_bytes) return broken("the scenario is too large for a link");
  return link;
}

bool looks_like_link(std::string_view text) {
  const std::size_t hash = text.substr(0, 2048).find("#lw");
  return !version_of(fragment_of(hash == std::string_view::npos ? text : text.substr(hash))).empty();
}

Result<Scenario> decode_link(std::string_view link) {
  const std::string_view fragment = fragment_of(link);
  if (fragment.size() > most_link_bytes)
    return broken("it is " + std::to_string(fragment.size()) + " characters long; at most " +
                  std::to_string(most_link_bytes) + " are read");
  const std::string_view version = version_of(fragment);
  if (version.empty())
    return broken("not a link of linewright: behind '#' it would begin with " + in_quotes(link_mark));
  if (fragment.substr(0, link_mark.size()) != link_mark)
    return broken("made for another linewright: version " + std::string(version) + ", and this one reads 1");
  const auto packed = from_base64url(fragment.substr(link_mark.size()));
  if (!packed) return packed.error();
  if (packed->empty()) return broken("it holds no data");
  const auto text = inflated(*packed, most_text_bytes);
  if (!text) return text.error();
  return read(*text, "link");
}

}  // namespace lw
