// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/study/protocol.h"

#include <map>
#include <string>
#include <string_view>

namespace whichway {

/// Gathers what the hash of a protocol stands for: SHA-256 (hex) over the text
///     whichway protocol 1\n
/// then one record a file, in the order of their names as byte strings,
///     file NAME LENGTH SHA-256\n
/// (study.toml, library.csv and features.csv where they are, the scenes named in study.toml, every
/// trajectory; names are relative to the study folder; a table given in place of features.csv counts under
/// that name; SHA-256 is that of the file's bytes, so a changed comment or line ending is another protocol),
/// and then the main library's feature table, so that another measure in another program version is another
/// protocol too:
///     feature NAME SCALE MEAN DEVIATION LOW HIGH\n     one a feature
///     motion NAME RAW… STANDARDISED…\n                 one a motion
/// with SCALE one of plain, log, capped and each number in the shortest decimal form that reads back to the
/// same double.
class ProtocolHash {
public:
    void addFile(std::string_view name, std::string_view bytes);
    /// @throws std::invalid_argument if table and features disagree in number.
    std::string of(const FeatureTable& table, const std::vector<FeatureDefinition>& features) const;

private:
    std::map<std::string, std::string> records_ = {}; ///< by name
};

} // namespace whichway
