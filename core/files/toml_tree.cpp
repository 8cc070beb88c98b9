// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/files/toml_tree.h"

#include "core/files/toml_nesting.h"

#include <algorithm>
#include <toml++/toml.h>
#include <tuple>

namespace whichway {

namespace {

/// Turns the parser's places, which count code points, into bytes.
class Places {
public:
    Places(std::string_view content, const std::string& file) : content_(content), file_(file), lines_{0} {
        for (std::size_t i = 0; i < content.size(); ++i)
            if (content[i] == '\n')
                lines_.push_back(i + 1);
    }

    Place of(const toml::source_position& position) const {
        if (position.line == 0)
            return {file_, 1, 1};
        const std::size_t line = std::min<std::size_t>(position.line, lines_.size());
        const std::size_t start = lines_[line - 1];
        std::size_t byte = start;
        for (unsigned codePoints = 1; codePoints < position.column && byte < content_.size(); ++codePoints)
            do
                ++byte;
            while (byte < content_.size() && (static_cast<unsigned char>(content_[byte]) & 0xC0) == 0x80);
        return {file_, static_cast<int>(line), static_cast<int>(byte - start) + 1};
    }

private:
    std::string_view content_;
    const std::string& file_;
    std::vector<std::size_t> lines_;
};

/// Index of the first byte that is not UTF-8 (RFC 3629), or the length.
std::size_t firstNotUtf8(std::string_view text) {
    const auto byte = [&](std::size_t i) -> unsigned {
        return i < text.size() ? static_cast<unsigned char>(text[i]) : 0;
    };
    for (std::size_t i = 0; i < text.size();) {
        const unsigned lead = byte(i);
        std::size_t length = 1;
        unsigned low = 0x80, high = 0xBF; // of the second byte
        if (lead >= 0xC2 && lead <= 0xDF)
            length = 2;
        else if (lead >= 0xE0 && lead <= 0xEF) {
            length = 3;
            low = lead == 0xE0 ? 0xA0 : low;
            high = lead == 0xED ? 0x9F : high;
        } else if (lead >= 0xF0 && lead <= 0xF4) {
            length = 4;
            low = lead == 0xF0 ? 0x90 : low;
            high = lead == 0xF4 ? 0x8F : high;
        } else if (lead >= 0x80)
            return i;
        if (length > 1 && (byte(i + 1) < low || byte(i + 1) > high))
            return i;
        for (std::size_t k = 2; k < length; ++k)
            if ((byte(i + k) & 0xC0) != 0x80)
                return i;
        i += length;
    }
    return text.size();
}

TomlNode nodeOf(const toml::node& source, const Places& places) {
    TomlNode node;
    node.place = places.of(source.source().begin);
    if (const toml::table* table = source.as_table()) {
        for (const auto& [key, value] : *table) {
            node.members.emplace_back(std::string(key.str()), nodeOf(value, places));
            TomlNode& member = node.members.back().second;
            member.keyPlace = places.of(key.source().begin);
            if (value.is_table() && !value.as_table()->is_inline())
                member.place = member.keyPlace;
        }
        std::stable_sort(node.members.begin(), node.members.end(), [](const auto& a, const auto& b) {
            return std::tie(a.second.keyPlace.line, a.second.keyPlace.column) <
                   std::tie(b.second.keyPlace.line, b.second.keyPlace.column);
        });
    } else if (const toml::array* array = source.as_array()) {
        node.kind = TomlNode::Kind::Array;
        for (const toml::node& item : *array)
            node.items.push_back(nodeOf(item, places));
    } else if (const auto* text = source.as_string()) {
        node.kind = TomlNode::Kind::Text;
        node.text = text->get();
    } else if (const auto* integer = source.as_integer()) {
        node.kind = TomlNode::Kind::Integer;
        node.integer = integer->get();
        node.number = static_cast<double>(node.integer);
    } else if (const auto* number = source.as_floating_point()) {
        node.kind = TomlNode::Kind::Number;
        node.number = number->get();
    } else if (const auto* flag = source.as_boolean()) {
        node.kind = TomlNode::Kind::Flag;
        node.flag = flag->get();
    } else {
        node.kind = TomlNode::Kind::Moment;
    }
    return node;
}

} // namespace

const TomlNode* TomlNode::member(std::string_view key) const {
    const auto found =
        std::find_if(members.begin(), members.end(), [&](const auto& entry) { return entry.first == key; });
    return found == members.end() ? nullptr : &found->second;
}

const char* kindInWords(TomlNode::Kind kind) {
    switch (kind) {
    case TomlNode::Kind::Table:
        return "a table";
    case TomlNode::Kind::Array:
        return "an array";
    case TomlNode::Kind::Text:
        return "a text";
    case TomlNode::Kind::Integer:
        return "a whole number";
    case TomlNode::Kind::Number:
        return "a number";
    case TomlNode::Kind::Flag:
        return "true or false";
    case TomlNode::Kind::Moment:
        return "a date or time";
    }
    return "something else";
}

Result<TomlNode> parseToml(std::string_view content, const std::string& file) {
    constexpr std::string_view kByteOrderMark = "\xEF\xBB\xBF";
    if (const std::size_t bad = firstNotUtf8(content); bad < content.size()) {
        const std::string_view before = content.substr(0, bad);
        const auto line = static_cast<int>(std::count(before.begin(), before.end(), '\n')) + 1;
        const std::size_t start = before.rfind('\n') + 1; // npos + 1 is 0
        return Error{"toml.encoding",
                     {file, line, static_cast<int>(bad - start) + 1},
                     "This byte is not UTF-8.",
                     "Save the file as UTF-8.",
                     {}};
    }
    if (content.starts_with(kByteOrderMark))
        content.remove_prefix(kByteOrderMark.size());
    if (const Result<void> nesting = checkTomlNesting(content, file); !nesting)
        return nesting.error();
    const Places places(content, file);
    try {
        const toml::table table = toml::parse(content, std::string_view(file));
        return nodeOf(table, places);
    } catch (const toml::parse_error& fault) {
        return Error{"toml.syntax",
                     places.of(fault.source().begin),
                     std::string(fault.description()) + ".",
                     "Correct the TOML here; texts stand in quotes, numbers have a decimal point.",
                     {}};
    }
}

} // namespace whichway
