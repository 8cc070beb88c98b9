// SPDX-License-Identifier: GPL-3.0-or-later
// Writes the files of sample_studies/given_features, but for study.toml, into the folder that is named.
#include "tests/support/window_passes.h"

#include <cstdio>
#include <filesystem>
#include <fstream>

int main(int count, char** arguments) {
    if (count != 2) {
        std::fputs("usage: make_given_features FOLDER\n", stderr);
        return 2;
    }
    const std::filesystem::path folder = arguments[1];
    for (const auto& [path, content] : whichway::windowPassFiles()) {
        std::filesystem::create_directories((folder / path).parent_path());
        std::ofstream file(folder / path, std::ios::binary);
        file << content;
        if (!file.flush()) {
            std::fprintf(stderr, "cannot write %s\n", (folder / path).c_str());
            return 1;
        }
    }
    return 0;
}
