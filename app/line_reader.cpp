// SPDX-License-Identifier: GPL-3.0-or-later
#include "app/line_reader.h"

#include <algorithm>
#include <cerrno>
#include <climits>
#include <poll.h>
#include <unistd.h>

namespace whichway {

bool LineReader::takeLine(std::string& line) {
    const std::size_t end = buffer_.find('\n');
    if (end == std::string::npos && !(ended_ && !buffer_.empty()))
        return false;
    line = buffer_.substr(0, end);
    buffer_.erase(0, end == std::string::npos ? end : end + 1);
    if (!line.empty() && line.back() == '\r')
        line.pop_back();
    return true;
}

void LineReader::store(const char* bytes, std::size_t count) {
    for (const char* at = bytes; at != bytes + count; ++at) {
        if (*at == '\n') {
            buffer_.push_back('\n');
            unfinished_ = 0;
        } else if (unfinished_ < kLongest) {
            buffer_.push_back(*at);
            ++unfinished_;
        }
    }
}

LineReader::Outcome LineReader::read(std::string& line, std::optional<std::chrono::milliseconds> patience) {
    using Clock = std::chrono::steady_clock;
    const auto until = Clock::now() + patience.value_or(std::chrono::milliseconds(0));
    for (;;) {
        if (takeLine(line))
            return Outcome::Line;
        if (ended_)
            return Outcome::Ended;
        int timeout = -1;
        if (patience) {
            const auto left = std::chrono::ceil<std::chrono::milliseconds>(until - Clock::now()).count();
            timeout = static_cast<int>(std::clamp<long long>(left, 0, INT_MAX));
        }
        pollfd waiting{.fd = descriptor_, .events = POLLIN, .revents = 0};
        const int ready = ::poll(&waiting, 1, timeout);
        if (ready == 0)
            return Outcome::TimedOut;
        if (ready < 0) {
            ended_ = errno != EINTR;
            continue;
        }
        char bytes[4096];
        const ssize_t count = ::read(descriptor_, bytes, sizeof bytes);
        if (count > 0)
            store(bytes, static_cast<std::size_t>(count));
        else if (count == 0 || errno != EINTR)
            ended_ = true;
    }
}

} // namespace whichway
