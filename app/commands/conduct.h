// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <cstdint>
#include <optional>
#include <string>

namespace whichway {

enum class AnswersFrom { Screen, Simulated, Stdio };

struct ConductOptions {
    std::string study = {};
    std::string participant = {}; ///< "-": the first line of standard input
    AnswersFrom answers = AnswersFrom::Screen;
    std::string language = {};              ///< empty: the study's first
    std::optional<std::uint64_t> seed = {}; ///< none: from the operating system
    double agreement = 0.85;                ///< of a simulated participant with themselves
    std::optional<double> interval = {};    ///< s, for stdio; none: the study's grey interval
    bool pilot = false;
    bool resume = false; ///< take up the newest unfinished session of this participant
    bool anew = false;   ///< begin another session though one is unfinished
};

/// `whichway conduct`. @return the exit code
int conduct(const ConductOptions& options, int argc, char** argv);

} // namespace whichway
