// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <filesystem>
#include <fmt/format.h>
#include <fstream>
#include <map>
#include <stdexcept>
#include <string>

namespace whichway {

/// A sound little study folder as values, to be spoilt by tests and written into a temporary folder: six main
/// motions, two for practice, two for catch trials; the feature "duration" measured, "effort" given.
struct TinyStudy {
    std::map<std::string, std::string> files = {}; ///< content by path within the folder
    std::map<std::string, std::string> links =
        {}; ///< targets of symbolic links by path, made after the files

    TinyStudy() {
        files["study.toml"] = R"(format = 1
name = "tiny"
title = "A tiny study"
version = "1"
invented = true
numeraire = "duration"

[answers]
levels = 2
cannot_tell = true

[texts.en]
question = "Which motion would you rather have?"
instructions = ["Watch both motions.", "Then choose."]
left = "Left"
right = "Right"
sureness = "How sure are you?"
confidence = ["A little", "Very"]
cannot_tell = "I cannot tell"
practice_ends = "From now on it counts."
break = "Time for a break."
end = "Thank you."

[features.duration]
label = "Duration"
unit = "s"
measure = "travel time"
speak_per = 1

[features.effort]
label = "Effort"
unit = "J"
scale = "log"

[model]
lapse = 0.05
scale = "hierarchical"
side_bias = true

[planning]
schedule = "rolling"
batch = 2
choose = "jointly informative"
worth = "information"

[trials]
practice = 1
main = 4
held_out = 2
repeat = 1
catch = 1
identical = 1
break_after = 3
grey_interval_s = 0.5

[[practice_pair]]
left = "p1"
right = "p2"

[[catch_pair]]
better = "c1"
worse = "c2"
)";
        files["library.csv"] = "trajectory,role\nm1,main\nm2,main\nm3,main\nm4,main\nm5,main\nm6,main\n"
                               "p1,practice\np2,practice\nc1,catch\nc2,catch\n";
        files["features.csv"] = "trajectory,effort\nm1,12.5\nm2,3.5\nm3,1.75\nm4,0.5\nm5,40\nm6,7\n";
        int samples = 3;
        for (const char* name : {"c1", "c2", "m1", "m2", "m3", "m4", "m5", "m6", "p1", "p2"})
            files[fmt::format("trajectories/{}.csv", name)] = trajectory(samples++);
    }

    /// A straight line at 0.5 m/s, two samples a second.
    static std::string trajectory(int samples) {
        std::string text = "time_s,x_m,y_m,heading_rad\n";
        for (int i = 0; i < samples; ++i)
            text += fmt::format("{},{},0,0\n", 0.5 * i, 0.25 * i);
        return text;
    }

    /// @throws std::logic_error unless `from` stands exactly once in the file.
    void replace(const std::string& file, const std::string& from, const std::string& to) {
        std::string& text = files.at(file);
        const std::size_t at = text.find(from);
        if (at == std::string::npos || text.find(from, at + 1) != std::string::npos)
            throw std::logic_error("“" + from + "” does not stand once in " + file);
        text.replace(at, from.size(), to);
    }

    void writeTo(const std::filesystem::path& folder) const {
        std::filesystem::create_directories(folder);
        for (const auto& [path, content] : files) {
            std::filesystem::create_directories((folder / path).parent_path());
            std::ofstream(folder / path, std::ios::binary) << content;
        }
        for (const auto& [path, target] : links) {
            std::filesystem::create_directories((folder / path).parent_path());
            std::filesystem::create_symlink(target, folder / path);
        }
    }
};

} // namespace whichway
