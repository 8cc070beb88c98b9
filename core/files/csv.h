// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/result.h"

#include <cstddef>
#include <string>
#include <string_view>
#include <vector>

namespace whichway {

struct CsvCell {
    std::string text = {};
    int line = 0;   ///< from 1
    int column = 0; ///< byte in its line, from 1
};

/// A CSV file (RFC 4180) with a header line. Every row has as many cells as the header.
struct CsvTable {
    std::string file = {};
    std::vector<CsvCell> header = {};
    std::vector<std::vector<CsvCell>> rows = {};
};

struct CsvLimits {
    std::size_t rows = 200000;
    std::size_t columns = 256;
};

/// Reads commas, double quotes, LF or CR LF; UTF-8 without or with a byte order mark (which is skipped).
/// Empty lines are skipped; blanks belong to their cell.
/// @return "csv.encoding" (not UTF-8, or a NUL), "csv.semicolons" (separated by ';'), "csv.cells" (a row with
/// too many or too few cells), "csv.quote", "csv.empty" (no header), "csv.duplicate-column", "csv.too-large".
Result<CsvTable> parseCsv(std::string_view content, const std::string& file, const CsvLimits& limits = {});

/// The whole cell as a finite number with a decimal point.
/// @return "csv.decimal-comma", "csv.missing" (an empty cell), "csv.not-finite" or "csv.not-a-number", with
/// place.
Result<double> numberIn(const CsvCell& cell, const std::string& file);

/// Builds CSV (RFC 4180, LF): quotes where needed, numbers in the shortest form that reads back to the same
/// double.
class CsvBuilder {
public:
    explicit CsvBuilder(const std::vector<std::string>& header);
    /// A text cell. One that begins with = + - @, tab or CR is led by an apostrophe, so that no spreadsheet
    /// runs it.
    CsvBuilder& text(std::string_view value);
    CsvBuilder& number(double value); ///< NaN becomes "n/a", infinities "inf" and "-inf"
    CsvBuilder& integer(long long value);
    /// @throws std::logic_error if the row has not as many cells as the header.
    CsvBuilder& endRow();
    const std::string& content() const { return content_; }

private:
    void separate();

    std::size_t columns_ = 0;
    std::size_t filled_ = 0;
    std::string content_;
};

} // namespace whichway
