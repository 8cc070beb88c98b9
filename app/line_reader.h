// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <chrono>
#include <cstddef>
#include <optional>
#include <string>

namespace whichway {

/// Reads lines from a file descriptor, waiting for each no longer than asked. Bytes of an unfinished line are
/// kept for the next call. Of a line longer than kLongest only the first kLongest bytes are kept.
class LineReader {
public:
    enum class Outcome {
        Line,     ///< a whole line, or what stood unfinished at the end of the input
        TimedOut, ///< no whole line yet
        Ended     ///< the input has ended and was read to its end
    };
    static constexpr std::size_t kLongest = 128 * 1024;

    explicit LineReader(int descriptor) : descriptor_(descriptor) {}

    /// @param line without its line end
    /// @param patience none: for ever; 0: only what is there already
    Outcome read(std::string& line, std::optional<std::chrono::milliseconds> patience);

private:
    bool takeLine(std::string& line);
    void store(const char* bytes, std::size_t count);

    int descriptor_;
    std::string buffer_;
    std::size_t unfinished_ = 0; ///< bytes kept of the line that has no end yet
    bool ended_ = false;
};

} // namespace whichway
