// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/files/csv.h"
#include "core/preference/response_model.h"

#include <fstream>
#include <map>
#include <nlohmann/json.hpp>
#include <sstream>
#include <stdexcept>
#include <string>
#include <vector>

namespace whichway::reference {

/// The content of tests/reference/NAME.
inline std::string content(const std::string& name) {
    std::ifstream stream(std::string(WHICHWAY_SOURCE_DIR) + "/tests/reference/" + name, std::ios::binary);
    if (!stream)
        throw std::runtime_error("tests/reference/" + name + " is missing");
    std::ostringstream text;
    text << stream.rdbuf();
    return text.str();
}

inline nlohmann::json fits(const std::string& name) {
    return nlohmann::json::parse(content(name));
}

inline std::vector<double> numbers(const nlohmann::json& list) {
    return list.get<std::vector<double>>();
}

/// A CSV file by column name.
class Table {
public:
    explicit Table(const std::string& name) {
        Result<CsvTable> table = parseCsv(content(name), name);
        if (!table)
            throw std::runtime_error(describe(table.error()));
        table_ = *table;
        for (std::size_t c = 0; c < table_.header.size(); ++c)
            column_[table_.header[c].text] = c;
    }
    std::size_t rows() const { return table_.rows.size(); }
    std::size_t columns() const { return table_.header.size(); }
    std::string text(std::size_t row, const std::string& column) const {
        return table_.rows.at(row)[column_.at(column)].text;
    }
    double number(std::size_t row, const std::string& column) const {
        return number(row, column_.at(column));
    }
    double number(std::size_t row, std::size_t column) const {
        const Result<double> value = numberIn(table_.rows.at(row)[column], table_.file);
        if (!value)
            throw std::runtime_error(describe(value.error()));
        return *value;
    }

private:
    CsvTable table_;
    std::map<std::string, std::size_t> column_;
};

/// +1 at the left item, -1 at the right one; items are counted without the reference item, which has no
/// feature.
inline std::vector<double> itemDifference(const std::vector<std::string>& items, const std::string& left,
                                          const std::string& right) {
    std::vector<double> difference;
    for (const std::string& item : items)
        difference.push_back((item == left ? 1.0 : 0.0) - (item == right ? 1.0 : 0.0));
    return difference;
}

inline void repeat(std::vector<Response>& responses, const std::vector<double>& difference, int answer,
                   double times) {
    for (int i = 0; i < static_cast<int>(times); ++i)
        responses.push_back({.difference = difference, .answer = answer});
}

} // namespace whichway::reference
