// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/study/protocol_hash.h"

#include "core/files/sha256.h"

#include <charconv>
#include <fmt/format.h>
#include <iterator>
#include <stdexcept>

namespace whichway {

namespace {

void appendNumber(std::string& text, double value) {
    char digits[32];
    const auto [end, error] = std::to_chars(digits, digits + sizeof digits, value);
    text += ' ';
    text.append(digits, error == std::errc() ? end : digits);
}

const char* phrase(FeatureScale scale) {
    switch (scale) {
    case FeatureScale::Plain:
        return "plain";
    case FeatureScale::Log:
        return "log";
    case FeatureScale::Capped:
        return "capped";
    }
    return "plain";
}

} // namespace

void ProtocolHash::addFile(std::string_view name, std::string_view bytes) {
    records_[std::string(name)] = fmt::format("file {} {} {}\n", name, bytes.size(), sha256(bytes));
}

std::string ProtocolHash::of(const FeatureTable& table,
                             const std::vector<FeatureDefinition>& features) const {
    if (table.raw.columns != features.size() || table.standardisation.size() != features.size() ||
        table.raw.rows != table.motions.size())
        throw std::invalid_argument("the feature table does not fit the features");
    std::string text = "whichway protocol 1\n";
    for (const auto& [name, record] : records_)
        text += record;
    for (std::size_t j = 0; j < features.size(); ++j) {
        const Standardisation& s = table.standardisation[j];
        text += fmt::format("feature {} {}", features[j].name, phrase(features[j].scale));
        for (const double value : {s.mean, s.deviation, s.low, s.high})
            appendNumber(text, value);
        text += '\n';
    }
    for (std::size_t i = 0; i < table.motions.size(); ++i) {
        text += "motion " + table.motions[i];
        for (const Matrix* matrix : {&table.raw, &table.standardised})
            for (const double value : matrix->row(i))
                appendNumber(text, value);
        text += '\n';
    }
    return sha256(text);
}

} // namespace whichway
