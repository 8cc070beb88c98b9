// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/files/sha256.h"

#include <cstdint>
#include <nettle/sha2.h>

namespace whichway {

std::string sha256(std::string_view bytes) {
    sha256_ctx context;
    sha256_init(&context);
    sha256_update(&context, bytes.size(), reinterpret_cast<const std::uint8_t*>(bytes.data()));
    std::uint8_t digest[SHA256_DIGEST_SIZE];
    sha256_digest(&context, sizeof digest, digest);
    std::string text;
    text.reserve(2 * sizeof digest);
    for (const std::uint8_t byte : digest) {
        text += "0123456789abcdef"[byte >> 4];
        text += "0123456789abcdef"[byte & 15];
    }
    return text;
}

} // namespace whichway
