// SPDX-License-Identifier: GPL-3.0-or-later
#include "app/terminal.h"

#include <cerrno>
#include <unistd.h>

namespace whichway {
namespace {

bool writeAll(int descriptor, std::string_view text) {
    while (!text.empty()) {
        const ssize_t written = ::write(descriptor, text.data(), text.size());
        if (written < 0 && errno != EINTR)
            return false;
        if (written > 0)
            text.remove_prefix(static_cast<std::size_t>(written));
    }
    return true;
}

} // namespace

bool say(std::string_view line) {
    return writeAll(STDOUT_FILENO, std::string(line) + '\n');
}

void complain(std::string_view line) {
    writeAll(STDERR_FILENO, std::string(line) + '\n');
}

int complain(const Error& error) {
    complain(describe(error));
    return kInputAtFault;
}

} // namespace whichway
