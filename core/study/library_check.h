// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/study/feature_summary.h"
#include "core/study/study.h"

#include <cstddef>
#include <cstdint>
#include <string>
#include <vector>

namespace whichway {

/// Something about the library that weakens what the study can find out. A study with findings can be run.
struct LibraryFinding {
    enum class Weight {
        Note,   ///< worth knowing
        Warning ///< likely to spoil an answer that the study is run for
    };
    Weight weight = Weight::Warning;
    std::string code = {};                  ///< stable, "library.…"; translations hang on it
    std::string message = {};               ///< what was found, one English sentence
    std::string effect = {};                ///< what it does to the study
    std::string remedy = {};                ///< what would mend it
    std::vector<std::string> features = {}; ///< names of the features it is about
    std::vector<std::string> motions = {};  ///< names of the motions it is about, at most kMotionsNamed
    std::size_t count = 0; ///< how many features, motions or pairs of motions it is about, all counted
    double value = 0;      ///< the number that made it a finding, e.g. the correlation
};

/// Findings name this many motions at most; `count` has the whole number.
inline constexpr std::size_t kMotionsNamed = 10;

/// When something becomes a finding. The defaults are common practice without one source, except where noted.
struct LibraryLimits {
    double correlation = 0.9;        ///< two features move as one above this |r|
    double inflation = 10;           ///< variance inflation factor
    double sharedPart = 0.8;         ///< part of the motions that share one value
    double relativeDeviation = 0.01; ///< s.d. against |mean|, below which nobody sees the difference
    double skewness = 2;             ///< |skew| of z
    double outlier = 4;              ///< |z|
    /// Two motions this close in z are near duplicates. A person of sensitivity 2.45, the prior's typical
    /// one, prefers neither of them more often than 0.56.
    double duplicateDistance = 0.1;
    double lengthDifference = 0.1; ///< s, longest against shortest
    double length = 10;            ///< s
};

/// What is weak about `study`'s main library, by kind and then in the order of features or motions.
/// Codes: library.same-features, library.follows-from-others, library.almost-constant, library.skewed,
/// library.outlier, library.near-duplicates, library.unequal-lengths, library.long-motions,
/// library.unused-motions. Cost: O(n^2 d). @throws std::invalid_argument if the study's table is not whole.
std::vector<LibraryFinding> checkLibrary(const Study& study, const FeatureSummary& summary,
                                         const LibraryLimits& limits = {});

/// What a prior over people implies for this library: how often they would give the same answer twice.
struct SelfAgreement {
    double mean = 0;                   ///< over people, in [0.5, 1]
    double fifth = 0, ninetyFifth = 0; ///< percentiles over people
};

/// The prior whose implication is asked for: w ~ N(0, s^2 e^{2h} I), h ~ N(0, t^2).
struct PriorOfPeople {
    double weightDeviation = 1;     ///< s > 0
    double logScaleDeviation = 0.6; ///< t >= 0; 0: a fixed scale
    double lapse = 0.05;            ///< chance of an answer by coin, in [0, 1)
};

/// Draws people from `prior` and pairs of motions uniformly, and reckons for each person the mean over pairs
/// of p^2 + (1 - p)^2, p = lapse / 2 + (1 - lapse) logistic(w . (z_left - z_right)), the chance of choosing
/// the same side of one pair twice. Same seed, same bits. Cost: O(people pairs d).
/// @throws std::invalid_argument if there are fewer than 2 motions, or a number is out of its range.
SelfAgreement impliedSelfAgreement(const Matrix& standardised, const PriorOfPeople& prior, std::uint64_t seed,
                                   std::size_t people = 2000, std::size_t pairs = 200);

} // namespace whichway
