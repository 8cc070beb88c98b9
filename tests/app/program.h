// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "tests/support/child_process.h"

#include <cstdlib>
#include <filesystem>
#include <fstream>
#include <sstream>
#include <stdexcept>
#include <string>
#include <utility>
#include <vector>

namespace whichway::testing_support {

/// A folder of its own that is removed with the object.
class TemporaryFolder {
public:
    TemporaryFolder() {
        std::string pattern = (std::filesystem::temp_directory_path() / "whichway test XXXXXX").string();
        if (!mkdtemp(pattern.data()))
            throw std::runtime_error("mkdtemp failed");
        path_ = pattern;
    }
    ~TemporaryFolder() {
        std::error_code ignored;
        std::filesystem::remove_all(path_, ignored);
    }
    TemporaryFolder(const TemporaryFolder&) = delete;
    TemporaryFolder& operator=(const TemporaryFolder&) = delete;
    const std::filesystem::path& path() const { return path_; }

private:
    std::filesystem::path path_;
};

inline std::string contentOf(const std::filesystem::path& path) {
    std::ifstream in(path, std::ios::binary);
    if (!in)
        throw std::runtime_error("cannot read " + path.string());
    std::ostringstream text;
    text << in.rdbuf();
    return text.str();
}

/// A copy of the first sample study, without its sessions.
inline std::string copyOfWardCart(const TemporaryFolder& folder) {
    namespace fs = std::filesystem;
    const fs::path from = fs::path(WHICHWAY_SOURCE_DIR) / "sample_studies" / "ward_cart";
    const fs::path to = folder.path() / "ward cart";
    fs::create_directory(to);
    for (const auto& entry : fs::directory_iterator(from))
        if (entry.path().filename() != "sessions" && entry.path().filename() != "pilots")
            fs::copy(entry.path(), to / entry.path().filename(), fs::copy_options::recursive);
    return to.string();
}

inline std::vector<std::string> programWith(std::vector<std::string> arguments) {
    arguments.insert(arguments.begin(), WHICHWAY_PROGRAM);
    return arguments;
}

/// Runs the program to its end, without a display.
inline Finished runProgram(std::vector<std::string> arguments, const std::string& input = "") {
    return run(programWith(std::move(arguments)), input, {"DISPLAY=", "WAYLAND_DISPLAY="});
}

/// The path behind "Session: " on standard error.
inline std::string sessionPathIn(const std::string& errors) {
    const std::string mark = "Session: ";
    const std::size_t at = errors.find(mark);
    if (at == std::string::npos)
        return "";
    return errors.substr(at + mark.size(), errors.find('\n', at) - at - mark.size());
}

} // namespace whichway::testing_support
