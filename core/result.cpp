// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/result.h"

namespace whichway {

std::string describe(const Error& error) {
    std::string text;
    if (!error.place.file.empty()) {
        text = error.place.file;
        if (error.place.line > 0)
            text += ":" + std::to_string(error.place.line);
        if (error.place.column > 0)
            text += ":" + std::to_string(error.place.column);
        text += ": ";
    }
    text += error.message;
    if (!error.remedy.empty())
        text += " " + error.remedy;
    return text;
}

} // namespace whichway
