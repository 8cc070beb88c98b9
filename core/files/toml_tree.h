// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/result.h"

#include <cstdint>
#include <string>
#include <string_view>
#include <utility>
#include <vector>

namespace whichway {

/// What a TOML file says, as plain values with places. Keys keep the order of the file.
struct TomlNode {
    enum class Kind { Table, Array, Text, Integer, Number, Flag, Moment };
    Kind kind = Kind::Table;
    Place place = {};    ///< of the value; of a table with a header, of its name there
    Place keyPlace = {}; ///< of its key, where it has one
    std::string text = {};
    std::int64_t integer = 0;
    double number = 0; ///< of Integer as well
    bool flag = false;
    std::vector<std::pair<std::string, TomlNode>> members = {}; ///< of a table, in the order of the file
    std::vector<TomlNode> items = {};                           ///< of an array

    /// The member called `key` of a table, or nullptr.
    const TomlNode* member(std::string_view key) const;
};

/// "a table", "an array", "a text", …
const char* kindInWords(TomlNode::Kind kind);

/// Reads a whole TOML 1.0 file (with or without a byte order mark). Columns count bytes.
/// @return "toml.encoding" (not UTF-8), "toml.syntax" or "toml.nesting" (see toml_nesting.h), with place.
Result<TomlNode> parseToml(std::string_view content, const std::string& file);

} // namespace whichway
