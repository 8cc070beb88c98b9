// SPDX-License-Identifier: GPL-3.0-or-later
#include "tests/support/small_study.h"

#include "core/random.h"

#include <cmath>
#include <string>

namespace whichway {
namespace {

Trajectory run(const std::string& name, double metersPerSecond) {
    Trajectory motion{.name = name};
    for (int i = 0; i <= 20; ++i) {
        motion.time.push_back(0.1 * i);
        motion.x.push_back(0.1 * i * metersPerSecond);
        motion.y.push_back(0);
        motion.heading.push_back(0);
    }
    return motion;
}

} // namespace

Study smallStudy(int motions, int dimension, std::uint64_t seed) {
    Random random(seed);
    Study study{.folder = "study"};
    Protocol& protocol = study.protocol;
    protocol.name = "small";
    protocol.title = "A small study";
    protocol.version = "1";
    protocol.invented = true;
    protocol.hash = std::string(60, '0') + "abcd";
    const auto n = static_cast<std::size_t>(motions), d = static_cast<std::size_t>(dimension);
    protocol.table.raw = Matrix(n, d);
    protocol.table.standardised = Matrix(n, d);
    for (std::size_t i = 0; i < n; ++i) {
        const std::string number = std::to_string(i);
        const std::string name = "m" + std::string(3 - std::min<std::size_t>(3, number.size()), '0') + number;
        protocol.table.motions.push_back(name);
        study.motions.push_back(run(name, 0.5 + 0.01 * static_cast<double>(i)));
    }
    for (std::size_t j = 0; j < d; ++j) {
        const std::string name = "feature" + std::to_string(j + 1);
        protocol.features.push_back({.name = name, .label = name, .unit = "m"});
        double mean = 0, square = 0;
        for (std::size_t i = 0; i < n; ++i) {
            protocol.table.raw(i, j) = 2 + random.normal();
            mean += protocol.table.raw(i, j) / static_cast<double>(n);
        }
        for (std::size_t i = 0; i < n; ++i)
            square += (protocol.table.raw(i, j) - mean) * (protocol.table.raw(i, j) - mean) /
                      static_cast<double>(n);
        const Standardisation standardisation{.mean = mean, .deviation = std::sqrt(square)};
        for (std::size_t i = 0; i < n; ++i)
            protocol.table.standardised(i, j) =
                (protocol.table.raw(i, j) - standardisation.mean) / standardisation.deviation;
        protocol.table.standardisation.push_back(standardisation);
    }
    protocol.numeraire = "feature1";
    protocol.texts = {{.language = "en",
                       .question = "Which would you rather meet?",
                       .instructions = {"Welcome.", "You will see two motions."},
                       .left = "Left",
                       .right = "Right",
                       .sureness = "How sure are you?",
                       .confidence = {"A little", "Fairly", "Very"},
                       .cannotTell = "Cannot tell",
                       .practiceEnds = "Now it counts.",
                       .breakText = "Rest a moment.",
                       .end = "Thank you."}};
    for (int i = 1; i <= 4; ++i)
        study.motions.push_back(run("extra" + std::to_string(i), 0.3 * i));
    protocol.practicePairs = {{"extra1", "extra2"}, {"extra2", "extra3"}, {"extra3", "extra1"}};
    protocol.catchPairs = {{"extra4", "extra1"}, {"extra3", "extra2"}};
    return study;
}

} // namespace whichway
