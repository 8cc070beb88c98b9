// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/files/csv.h"

#include <algorithm>
#include <charconv>
#include <cmath>
#include <cstdint>
#include <optional>
#include <set>
#include <stdexcept>
#include <system_error>

namespace whichway {
namespace {

struct Position {
    int line = 1;
    int column = 1;
};

Position positionOf(std::string_view content, std::size_t offset) {
    Position position;
    for (std::size_t i = 0; i < offset && i < content.size(); ++i) {
        if (content[i] == '\n')
            position = {position.line + 1, 1};
        else
            ++position.column;
    }
    return position;
}

Error errorAt(const std::string& code, const std::string& file, int line, int column, std::string message,
              std::string remedy, std::vector<std::string> values = {}) {
    return {.code = code,
            .place = {.file = file, .line = line, .column = column},
            .message = std::move(message),
            .remedy = std::move(remedy),
            .values = std::move(values)};
}

/// Offset of the first byte that is not UTF-8 (RFC 3629) or is a NUL.
std::optional<std::size_t> firstBadByte(std::string_view text) {
    for (std::size_t i = 0; i < text.size();) {
        const auto byte = [&](std::size_t k) {
            return k < text.size() ? static_cast<std::uint8_t>(text[k]) : std::uint8_t{0};
        };
        const std::uint8_t lead = byte(i);
        std::size_t length = 1;
        std::uint32_t value = lead;
        if (lead == 0)
            return i;
        if (lead >= 0xF5 || (lead >= 0x80 && lead < 0xC2))
            return i;
        if (lead >= 0xF0) {
            length = 4;
            value = lead & 0x07u;
        } else if (lead >= 0xE0) {
            length = 3;
            value = lead & 0x0Fu;
        } else if (lead >= 0xC2) {
            length = 2;
            value = lead & 0x1Fu;
        }
        for (std::size_t k = 1; k < length; ++k) {
            if ((byte(i + k) & 0xC0u) != 0x80u)
                return i;
            value = (value << 6) | (byte(i + k) & 0x3Fu);
        }
        const bool overlong = (length == 3 && value < 0x800) || (length == 4 && value < 0x10000);
        const bool surrogate = value >= 0xD800 && value <= 0xDFFF;
        if (overlong || surrogate || value > 0x10FFFF)
            return i;
        i += length;
    }
    return std::nullopt;
}

/// Walks over the content cell by cell.
class Scanner {
public:
    Scanner(std::string_view content, const std::string& file) : content_(content), file_(file) {}

    bool atEnd() const { return offset_ >= content_.size(); }

    /// The cells of the next line that is not empty; none at the end.
    Result<std::vector<CsvCell>> row(std::size_t columnLimit) {
        std::vector<CsvCell> cells;
        while (!atEnd() && (content_[offset_] == '\n' || content_[offset_] == '\r'))
            step();
        if (atEnd())
            return cells;
        for (;;) {
            if (cells.size() >= columnLimit)
                return errorAt("csv.too-large", file_, line_, column_,
                               "The line has more than " + std::to_string(columnLimit) + " cells.",
                               "Split the file.");
            auto cell = next();
            if (!cell)
                return cell.error();
            cells.push_back(std::move(*cell));
            if (atEnd() || content_[offset_] != ',')
                break;
            step();
        }
        if (!atEnd() && content_[offset_] == '\r')
            step();
        if (!atEnd() && content_[offset_] == '\n')
            step();
        return cells;
    }

private:
    void step() {
        if (content_[offset_] == '\n') {
            ++line_;
            column_ = 1;
        } else {
            ++column_;
        }
        ++offset_;
    }

    bool endsCell() const {
        return atEnd() || content_[offset_] == ',' || content_[offset_] == '\n' ||
               (content_[offset_] == '\r' &&
                (offset_ + 1 == content_.size() || content_[offset_ + 1] == '\n'));
    }

    Result<CsvCell> next() {
        CsvCell cell{.text = "", .line = line_, .column = column_};
        if (atEnd() || content_[offset_] != '"') {
            while (!endsCell()) {
                if (content_[offset_] == '"')
                    return errorAt("csv.quote", file_, line_, column_,
                                   "A quote stands inside a cell without quotes.",
                                   "Put the whole cell in quotes and double the quotes inside.");
                cell.text += content_[offset_];
                step();
            }
            return cell;
        }
        step();
        for (;;) {
            if (atEnd())
                return errorAt("csv.quote", file_, cell.line, cell.column,
                               "The quote that opens here is never closed.", "Close it with \".");
            if (content_[offset_] == '"') {
                step();
                if (atEnd() || content_[offset_] != '"')
                    break;
            }
            cell.text += content_[offset_];
            step();
        }
        if (!endsCell())
            return errorAt("csv.quote", file_, line_, column_, "Text follows the closing quote of a cell.",
                           "End the cell after its quote.");
        return cell;
    }

    std::string_view content_;
    const std::string& file_;
    std::size_t offset_ = 0;
    int line_ = 1;
    int column_ = 1;
};

} // namespace

Result<CsvTable> parseCsv(std::string_view content, const std::string& file, const CsvLimits& limits) {
    if (const auto bad = firstBadByte(content)) {
        const Position at = positionOf(content, *bad);
        return errorAt("csv.encoding", file, at.line, at.column, "The file is not UTF-8 text here.",
                       "Save it as UTF-8.");
    }
    if (content.substr(0, 3) == "\xEF\xBB\xBF")
        content.remove_prefix(3);
    Scanner scanner(content, file);
    CsvTable table{.file = file};
    auto header = scanner.row(limits.columns);
    if (!header)
        return header.error();
    table.header = std::move(*header);
    if (table.header.empty())
        return errorAt("csv.empty", file, 1, 1, "The file has no header line.",
                       "Name the columns in the first line.");
    if (table.header.size() == 1 && table.header[0].text.find(';') != std::string::npos)
        return errorAt("csv.semicolons", file, table.header[0].line,
                       table.header[0].column + static_cast<int>(table.header[0].text.find(';')),
                       "The cells are separated by semicolons.",
                       "Save the file with commas between cells and points in decimals.");
    std::set<std::string> names;
    for (const CsvCell& cell : table.header)
        if (!names.insert(cell.text).second)
            return errorAt("csv.duplicate-column", file, cell.line, cell.column,
                           "The column “" + cell.text + "” stands in the header twice.",
                           "Remove or rename one.", {cell.text});
    for (;;) {
        auto row = scanner.row(limits.columns);
        if (!row)
            return row.error();
        if (row->empty())
            return table;
        if (table.rows.size() >= limits.rows)
            return errorAt("csv.too-large", file, row->front().line, 1,
                           "The file has more than " + std::to_string(limits.rows) + " rows.", "Split it.");
        if (row->size() != table.header.size()) {
            const std::size_t at = std::min(row->size(), table.header.size() + 1) - 1;
            return errorAt("csv.cells", file, (*row)[at].line, (*row)[at].column,
                           "The row has " + std::to_string(row->size()) + " cells, the header " +
                               std::to_string(table.header.size()) + ".",
                           row->size() > table.header.size() ? "Decimals need a point, not a comma."
                                                             : "Fill the missing cells in.",
                           {std::to_string(row->size()), std::to_string(table.header.size())});
        }
        table.rows.push_back(std::move(*row));
    }
}

Result<double> numberIn(const CsvCell& cell, const std::string& file) {
    const auto fail = [&](const std::string& code, const std::string& message, const std::string& remedy) {
        return errorAt(code, file, cell.line, cell.column, message, remedy, {cell.text});
    };
    if (cell.text.empty())
        return fail("csv.missing", "The cell is empty.", "Every cell needs a number.");
    double value = 0;
    const char* const end = cell.text.data() + cell.text.size();
    const auto [stopped, status] = std::from_chars(cell.text.data(), end, value);
    if (status == std::errc() && stopped == end)
        return std::isfinite(value) ? Result<double>(value)
                                    : fail("csv.not-finite", "“" + cell.text + "” is not a finite number.",
                                           "Remove the sample or the motion.");
    if (status == std::errc::result_out_of_range)
        return fail("csv.not-finite", "“" + cell.text + "” is beyond the range of numbers.",
                    "Check the value.");
    if (cell.text.find(',') != std::string::npos)
        return fail("csv.decimal-comma", "“" + cell.text + "” has a decimal comma.",
                    "Write decimals with a point.");
    return fail("csv.not-a-number", "“" + cell.text + "” is not a number.",
                "Write it as digits with a decimal point, without blanks and without a plus sign.");
}

CsvBuilder::CsvBuilder(const std::vector<std::string>& header) : columns_(header.size()) {
    for (const std::string& name : header)
        text(name);
    endRow();
}

void CsvBuilder::separate() {
    if (filled_++ > 0)
        content_ += ',';
}

CsvBuilder& CsvBuilder::text(std::string_view value) {
    separate();
    std::string safe(value);
    if (!safe.empty() && std::string_view("=+-@\t\r").find(safe.front()) != std::string_view::npos)
        safe.insert(safe.begin(), '\'');
    if (safe.find_first_of(",\"\r\n") == std::string::npos) {
        content_ += safe;
        return *this;
    }
    content_ += '"';
    for (const char c : safe) {
        if (c == '"')
            content_ += '"';
        content_ += c;
    }
    content_ += '"';
    return *this;
}

CsvBuilder& CsvBuilder::number(double value) {
    separate();
    if (std::isnan(value)) {
        content_ += "n/a";
        return *this;
    }
    char buffer[32];
    const auto [end, status] = std::to_chars(buffer, buffer + sizeof buffer, value);
    content_.append(buffer, end);
    return *this;
}

CsvBuilder& CsvBuilder::integer(long long value) {
    separate();
    content_ += std::to_string(value);
    return *this;
}

CsvBuilder& CsvBuilder::endRow() {
    if (filled_ != columns_)
        throw std::logic_error("CsvBuilder: the row has not as many cells as the header");
    filled_ = 0;
    content_ += '\n';
    return *this;
}

} // namespace whichway
