#include "engine/numeric/hash.h"

#include "tests/catch.h"

using namespace lw;

// Test vectors of FNV-1a 64 for "", "a" and "foobar" from the IETF draft "The FNV Non-Cryptographic Hash
// Algorithm", appendix C; written from memory.
TEST_CASE("FNV-1a gives the published vectors") {
  const auto hash = [](std::string_view text) {
    std::uint64_t value = fnv_start;
    for (const char letter : text) value = fnv_byte(value, static_cast<unsigned char>(letter));
    return value;
  };
  CHECK(hash("") == 0xcbf29ce484222325u);
  CHECK(hash("a") == 0xaf63dc4c8601ec8cu);
  CHECK(hash("foobar") == 0x85944171f73967e8u);
}

TEST_CASE("minus zero counts as zero and texts do not run together") {
  CHECK(fnv_number(fnv_start, -0.0) == fnv_number(fnv_start, 0.0));
  CHECK(fnv_number(fnv_start, 1.0) != fnv_number(fnv_start, -1.0));
  CHECK(fnv_text(fnv_text(fnv_start, "ab"), "c") != fnv_text(fnv_text(fnv_start, "a"), "bc"));
}
