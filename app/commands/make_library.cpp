// SPDX-License-Identifier: GPL-3.0-or-later
#include "app/commands/make_library.h"

#include "app/terminal.h"
#include "core/files/file_system.h"
#include "core/motion/write_library.h"

#include <fmt/core.h>

namespace whichway {

int makeLibrary(const std::string& recipe, const std::string& folder) {
    RealFileSystem files;
    const auto written = writeLibrary(files, recipe, folder);
    if (!written)
        return complain(written.error());
    for (const Error& problem : written->problems)
        complain(problem);
    if (!written->problems.empty())
        return kInputAtFault;
    say(fmt::format("{} motions in {}", written->motions, folder));
    return kDone;
}

} // namespace whichway
