// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/result.h"
#include "core/study/protocol.h"

#include <map>
#include <string>
#include <string_view>
#include <vector>

namespace whichway {

/// Where things stand in study.toml: the place of the value of each key, by its dotted path
/// ("trials.repeat", "features.effort.unit", "texts.en", "catch_pair.0.better").
class StudyPlaces {
public:
    void set(const std::string& path, const Place& place) { places_[path] = place; }
    /// The place of the key, or of the nearest table around it that is there, or of the file.
    Place of(const std::string& path) const;

private:
    std::map<std::string, Place> places_ = {};
};

/// What study.toml says, before motions and tables are looked at.
struct StudyFile {
    bool isToml = false;      ///< false: nothing could be read
    bool scenesKnown = false; ///< false: some scene path is at fault and not in `scenePaths`
    /// All but `hash`, `table` and `scenes`.
    Protocol protocol = {};
    std::vector<std::string> scenePaths = {}; ///< as written, checked to be plain relative paths
    StudyPlaces places = {};
};

/// study.toml, format 1 (TOML 1.0, UTF-8). Keys marked * are required; the others have the default shown.
///
///     format = 1                        # * of this file
///     name = "ward_cart"                # * [A-Za-z0-9_-]{1,64}
///     title = "A cart on a ward"        # *
///     version = "1"                     # * the experimenter's own
///     invented = false                  # true: demonstration data, said on every report
///     numeraire = "travel_time"         # * the feature that trade-offs are paid in
///     scenes = []                       # scene files, e.g. ["scenes/ward.toml"]
///
///     [answers]                         # *
///     levels = 3                        # * confidence levels, 1 to 7; 1: only the choice is asked
///     cannot_tell = false               # whether people may say so; needs levels >= 2
///
///     [texts.en]                        # * one table a language (BCP 47); the first is the default
///     question = "…"                    # *
///     instructions = ["…"]              # * pages, 1 to 20
///     left = "Left"                     # *
///     right = "Right"                   # *
///     sureness = "How sure are you?"    # * with levels >= 2
///     confidence = ["A little", "Very"] # * with levels >= 2: one word a level, from least to most sure
///     cannot_tell = "…"                 # * with cannot_tell = true
///     practice_ends = "…"               # * with practice > 0
///     break = "…"                       # * with break_after > 0
///     end = "…"                         # *
///
///     [features.travel_time]            # * 1 to 32 tables; [a-z0-9_]{1,64}; their order is kept
///     label = "Travel time"             # *
///     unit = "s"                        # * see units.h; that of the measure where there is one
///     measure = "travel time"           # a measure of core/motion; without: given in features.csv
///     settings = { }                    # numbers that the measure asks for
///     scale = "plain"                   # "plain", "log" or "capped"
///     speak_per = 1                     # > 0: trade-offs are said per so many units; not with scale = "log"
///
///     [model]
///     lapse = 0.05                      # 0 to 0.2
///     scale = "hierarchical"            # or "fixed"
///     side_bias = true
///
///     [planning]
///     schedule = "rolling"              # or "fixed"
///     batch = 5                         # 1 to 50
///     choose = "jointly informative"    # or "at random"
///     worth = "information"
///
///     [trials]
///     practice = 3                      # 0 to 50
///     main = 40                         # 1 to 1000
///     held_out = 10                     # 0 to 500
///     repeat = 4                        # 0 to held_out
///     catch = 2                         # 0 to 50
///     identical = 1                     # 0 to 50
///     break_after = 20                  # trials that count between breaks, 0 to 1000; 0: no breaks
///     grey_interval_s = 0.5             # 0 to 10
///
///     [[practice_pair]]                 # at least `practice` of them
///     left = "p1"                       # *
///     right = "p2"                      # *
///
///     [[catch_pair]]                    # at least `catch` of them
///     better = "c1"                     # *
///     worse = "c2"                      # *
///
/// Reads and checks what can be checked without the other files, and appends every problem to `problems`: the
/// codes of toml_table.h, "study.format", "study.name", "study.text", "study.language", "study.choice",
/// "study.range", "study.words", "study.unit", "study.unknown-measure", "study.unit-of-measure",
/// "study.unknown-setting", "study.missing-setting", "study.speak-per", "study.cannot-tell",
/// "study.numeraire", "study.path", "study.too-few-pairs", "study.repeats", "study.same-motion",
/// "study.too-many".
/// @param file the name for places, "study.toml"
StudyFile parseStudyFile(std::string_view content, const std::string& file, std::vector<Error>& problems);

} // namespace whichway
