#include "cases/sha256.h"

#include <gtest/gtest.h>

namespace falcate::cases {
namespace {

TEST(Sha256, GivesThePublishedDigests) {
  // FIPS 180-4 examples (NIST, SHA-256 of "abc" and of the two-block message).
  EXPECT_EQ(sha256("abc"), "ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad");
  EXPECT_EQ(sha256("abcdbcdecdefdefgefghfghighijhijkijkljklmklmnlmnomnopnopq"),
            "248d6a61d20638b8e5c026930c3e6039a33ce45964ff2167f6ecedd419db06c1");
}

}  // namespace
}  // namespace falcate::cases
