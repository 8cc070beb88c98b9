// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/files/toml_nesting.h"

#include <algorithm>
#include <cstddef>

namespace whichway {

namespace {

/// Index just behind the string that opens at `start`, or the end of `content` where it never closes.
std::size_t endOfString(std::string_view content, std::size_t start) {
    const char quote = content[start];
    const bool escapes = quote == '"';
    const std::string three(3, quote);
    const bool manyLines = content.substr(start, 3) == three;
    std::size_t i = start + (manyLines ? 3 : 1);
    while (i < content.size()) {
        if (escapes && content[i] == '\\') {
            i += 2;
        } else if (manyLines ? content.substr(i, 3) == three : content[i] == quote) {
            i += manyLines ? 3 : 1;
            // Up to two more quotes may stand before the closing three.
            while (manyLines && i < content.size() && content[i] == quote)
                ++i;
            return i;
        } else if (!manyLines && content[i] == '\n') {
            return i; // a syntax error that the parser will name
        } else {
            ++i;
        }
    }
    return content.size();
}

} // namespace

Result<void> checkTomlNesting(std::string_view content, const std::string& file) {
    int line = 1;
    std::size_t lineStart = 0;
    int brackets = 0;
    int parts = 0;
    for (std::size_t i = 0; i < content.size();) {
        const char c = content[i];
        if (c == '#') {
            i = std::min(content.find('\n', i), content.size());
            continue;
        }
        if (c == '"' || c == '\'') {
            const std::size_t end = endOfString(content, i);
            for (; i < end && i < content.size(); ++i)
                if (content[i] == '\n') {
                    ++line;
                    lineStart = i + 1;
                }
            continue;
        }
        if (c == '[' || c == '{')
            ++brackets;
        else if (c == ']' || c == '}')
            brackets = std::max(0, brackets - 1);
        else if (c == '.')
            ++parts;
        if (c != '.' && std::string_view("[]{}=,\n").find(c) != std::string_view::npos)
            parts = 0;
        if (brackets > kTomlNesting || parts >= kTomlNesting) {
            Error error;
            error.code = "toml.nesting";
            error.place = {file, line, static_cast<int>(i - lineStart) + 1};
            error.message =
                "Tables or arrays are nested more than " + std::to_string(kTomlNesting) + " deep.";
            error.remedy = "No key of ours lies that deep: take this out.";
            error.values = {std::to_string(kTomlNesting)};
            return error;
        }
        ++i;
        if (c == '\n') {
            ++line;
            lineStart = i;
        }
    }
    return {};
}

} // namespace whichway
