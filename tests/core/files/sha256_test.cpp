// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/files/sha256.h"

#include <gtest/gtest.h>

using namespace whichway;

// Source: the examples of FIPS 180-2, appendix B.1 to B.3 (NIST's "SHA256.pdf" of example values for FIPS
// 180-4), written down from memory and confirmed by coreutils' sha256sum.
TEST(Sha256, GivesTheDigestsThatTheStandardShows) {
    EXPECT_EQ(sha256("abc"), "ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad");
    EXPECT_EQ(sha256("abcdbcdecdefdefgefghfghighijhijkijkljklmklmnlmnomnopnopq"),
              "248d6a61d20638b8e5c026930c3e6039a33ce45964ff2167f6ecedd419db06c1");
    EXPECT_EQ(sha256(std::string(1000000, 'a')),
              "cdc76e5c9914fb9281a1c7e284d73e67f1809a48a497200e046d39ccc7112cd0");
    EXPECT_EQ(sha256(""), "e3b0c44298fc1c149afbf4c8996fb92427ae41e4649b934ca495991b7852b855");
}

TEST(Sha256, TakesBytesOfAnyValue) {
    // Source: `printf '\0\377\n' | sha256sum`.
    EXPECT_EQ(sha256(std::string("\0\xff\n", 3)),
              "712450d3c4a79eea9509e75dc1dacdeff58034df538536cfae2da882bd8a0c50");
}
