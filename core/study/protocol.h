// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/motion/scene.h"
#include "core/numbers/linear_algebra.h"

#include <cstdint>
#include <map>
#include <string>
#include <vector>

namespace whichway {

/// How a feature is transformed before it is standardised (design: section "Features" of DEVELOPERS.md).
enum class FeatureScale {
    Plain,
    Log,   ///< natural logarithm; values must be positive; trade-offs are then "per doubling"
    Capped ///< values are moved into the 5th to 95th percentile of the main library
};

struct FeatureDefinition {
    std::string name = {};    ///< [a-z0-9_]{1,64}
    std::string label = {};   ///< as people read it: "Travel time"
    std::string unit = {};    ///< "s", "m", "m/s", "1" for none
    std::string measure = {}; ///< phrase naming a measure of core/motion; empty: given in features.csv
    std::map<std::string, double> settings = {}; ///< of the measure, SI units
    FeatureScale scale = FeatureScale::Plain;
    double speakPer = 1; ///< trade-offs are said "per speakPer unit", > 0
    bool operator==(const FeatureDefinition&) const = default;
};

/// z = (transform(value) - mean) / deviation, frozen over the main library (divisor n).
struct Standardisation {
    double mean = 0;
    double deviation = 1;     ///< > 0
    double low = 0, high = 0; ///< the caps of FeatureScale::Capped, in the feature's unit
    bool operator==(const Standardisation&) const = default;
};

/// The features of the main library. Rows are motions in the order of `motions`, columns the features.
struct FeatureTable {
    std::vector<std::string> motions = {};
    Matrix raw = {};                                   ///< n x d, in the features' units
    Matrix standardised = {};                          ///< n x d, dimensionless
    std::vector<Standardisation> standardisation = {}; ///< d
    bool operator==(const FeatureTable&) const = default;
};

/// What the participant reads, in one language.
struct Texts {
    std::string language = {}; ///< BCP 47, e.g. "en"
    std::string question = {};
    std::vector<std::string> instructions = {}; ///< pages, shown before practice
    std::string left = {}, right = {};
    std::string sureness = {};                ///< "How sure are you?"
    std::vector<std::string> confidence = {}; ///< words from least to most sure, one per level
    std::string cannotTell = {};
    std::string practiceEnds = {}; ///< shown between practice and the first trial that counts
    std::string breakText = {};
    std::string end = {};
    bool operator==(const Texts&) const = default;
};

enum class WeightScale { Hierarchical, Fixed };

struct ModelSettings {
    double lapse = 0.05; ///< in [0, 0.2]
    WeightScale scale = WeightScale::Hierarchical;
    bool sideBias = true;
    bool operator==(const ModelSettings&) const = default;
};

enum class PlanSchedule { Rolling, Fixed };

struct PlanningSettings {
    PlanSchedule schedule = PlanSchedule::Rolling;
    int batch = 5;                              ///< pairs planned together, 1 to 50
    std::string choose = "jointly informative"; ///< or "at random"
    std::string worth = "information";
    bool operator==(const PlanningSettings&) const = default;
};

/// How many trials of each kind, and when breaks come.
struct TrialSettings {
    int practice = 3, main = 40, heldOut = 10, repeat = 4, catchTrials = 2, identical = 1;
    int breakAfter = 20;       ///< trials that count between breaks; 0: no breaks
    double greyInterval = 0.5; ///< s between two pairs
    bool operator==(const TrialSettings&) const = default;
};

/// A pair in which one motion is better on every count the experimenter cares about, by motion name.
struct CatchPair {
    std::string better = {}, worse = {};
    bool operator==(const CatchPair&) const = default;
};

struct PracticePair {
    std::string left = {}, right = {};
    bool operator==(const PracticePair&) const = default;
};

/// Everything that is fixed before the first participant except the motions' states: enough to analyse a
/// session again without the study folder. A value.
struct Protocol {
    std::string name = {}; ///< [A-Za-z0-9_-]{1,64}
    std::string title = {};
    std::string version = {}; ///< the experimenter's own
    bool invented = false;    ///< demonstration data; printed on every report
    std::string hash = {}; ///< SHA-256 (hex) over the study file, texts, feature table and trajectory bytes
    std::vector<FeatureDefinition> features = {};
    FeatureTable table = {};
    std::string numeraire = {}; ///< name of the feature that trade-offs are paid in
    int levels = 3;             ///< K, 1 to 7
    bool cannotTell = false;
    std::vector<Texts> texts = {}; ///< at least one; the first is the default
    ModelSettings model = {};
    PlanningSettings planning = {};
    TrialSettings trials = {};
    std::vector<PracticePair> practicePairs = {};
    std::vector<CatchPair> catchPairs = {};
    std::vector<Scene> scenes = {};
    bool operator==(const Protocol&) const = default;
};

} // namespace whichway
