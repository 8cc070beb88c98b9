// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/files/csv.h"

#include "core/random.h"

#include <cmath>
#include <gmock/gmock.h>
#include <limits>

using namespace whichway;

namespace {

using Rows = std::vector<std::vector<std::string>>;

/// Header and rows as plain text, or the error.
Rows cellsOf(const std::string& content) {
    const auto table = parseCsv(content, "f.csv");
    EXPECT_TRUE(table.ok()) << (table.ok() ? "" : describe(table.error()));
    Rows rows;
    if (!table)
        return rows;
    const auto take = [&](const std::vector<CsvCell>& cells) {
        rows.emplace_back();
        for (const CsvCell& cell : cells)
            rows.back().push_back(cell.text);
    };
    take(table->header);
    for (const auto& row : table->rows)
        take(row);
    return rows;
}

/// "code line:column"
std::string spot(const Error& error) {
    EXPECT_EQ(error.place.file, "f.csv");
    EXPECT_FALSE(error.message.empty());
    EXPECT_FALSE(error.remedy.empty());
    return error.code + " " + std::to_string(error.place.line) + ":" + std::to_string(error.place.column);
}

std::string faultOf(const std::string& content, const CsvLimits& limits = {}) {
    const auto table = parseCsv(content, "f.csv", limits);
    return table ? "" : spot(table.error());
}

std::string numberFault(const std::string& text) {
    const auto value = numberIn({.text = text, .line = 4, .column = 9}, "f.csv");
    return value ? "" : spot(value.error());
}

} // namespace

// Source: the examples of RFC 4180, section 2, items 1 to 7, led by a header line where the RFC shows none.
TEST(Csv, ReadsTheExamplesOfTheStandard) {
    const Rows plain = {
        {"field_name1", "field_name2", "field_name3"}, {"aaa", "bbb", "ccc"}, {"zzz", "yyy", "xxx"}};
    EXPECT_EQ(cellsOf("field_name1,field_name2,field_name3\r\naaa,bbb,ccc\r\nzzz,yyy,xxx\r\n"), plain);
    EXPECT_EQ(cellsOf("field_name1,field_name2,field_name3\r\naaa,bbb,ccc\r\nzzz,yyy,xxx"), plain);
    EXPECT_EQ(cellsOf("h1,h2,h3\r\n\"aaa\",\"bbb\",\"ccc\"\r\nzzz,yyy,xxx"),
              (Rows{{"h1", "h2", "h3"}, {"aaa", "bbb", "ccc"}, {"zzz", "yyy", "xxx"}}));
    EXPECT_EQ(cellsOf("h1,h2,h3\r\n\"aaa\",\"b\r\nbb\",\"ccc\"\r\nzzz,yyy,xxx"),
              (Rows{{"h1", "h2", "h3"}, {"aaa", "b\r\nbb", "ccc"}, {"zzz", "yyy", "xxx"}}));
    EXPECT_EQ(cellsOf("h1,h2,h3\r\n\"aaa\",\"b\"\"bb\",\"ccc\""),
              (Rows{{"h1", "h2", "h3"}, {"aaa", "b\"bb", "ccc"}}));
}

TEST(Csv, ReadsUnixLinesEmptyCellsBlanksAndAMark) {
    EXPECT_EQ(cellsOf("\xEF\xBB\xBF"
                      "a,b\n1,\n,2\n\"\", x \n"),
              (Rows{{"a", "b"}, {"1", ""}, {"", "2"}, {"", " x "}}));
    EXPECT_EQ(cellsOf("a\n\n1\n\r\n2\n\n"), (Rows{{"a"}, {"1"}, {"2"}}));
    EXPECT_EQ(cellsOf("grüße,\xF0\x9F\x9A\x97\n\"é,\",\"\"\"\"\n"),
              (Rows{{"grüße", "\xF0\x9F\x9A\x97"}, {"é,", "\""}}));
}

TEST(Csv, TellsTheLineAndByteOfEachCell) {
    const auto table = parseCsv("ä,b\r\n\"x\ny\",2\r\n\r\n3,\"4\"\r\n", "f.csv");
    ASSERT_TRUE(table.ok());
    const auto at = [](const CsvCell& cell) { return std::pair(cell.line, cell.column); };
    EXPECT_EQ(at(table->header[1]), std::pair(1, 4)); // ä is two bytes
    EXPECT_EQ(at(table->rows[0][0]), std::pair(2, 1));
    EXPECT_EQ(at(table->rows[0][1]), std::pair(3, 4)); // behind a line break inside quotes
    EXPECT_EQ(at(table->rows[1][1]), std::pair(5, 3));
}

TEST(Csv, RefusesEachFaultAtItsPlace) {
    EXPECT_EQ(faultOf(""), "csv.empty 1:1");
    EXPECT_EQ(faultOf("\n\r\n"), "csv.empty 1:1");
    EXPECT_EQ(faultOf("\xEF\xBB\xBF"), "csv.empty 1:1");
    EXPECT_EQ(faultOf("a,b\nx,\xFC\n"), "csv.encoding 2:3"); // ü in Latin-1
    EXPECT_EQ(faultOf(std::string("a,b\n1,2\0\n", 9)), "csv.encoding 2:4");
    EXPECT_EQ(faultOf("\xFF\xFE"
                      "a"),
              "csv.encoding 1:1"); // UTF-16
    EXPECT_EQ(faultOf("a;b;c\n1;2;3\n"), "csv.semicolons 1:2");
    EXPECT_EQ(faultOf("a,b\n1,2\n1\n"), "csv.cells 3:1");
    EXPECT_EQ(faultOf("a,b\n1,2\n1,2,3\n"), "csv.cells 3:5");
    EXPECT_EQ(faultOf("a,b\n0,5,0,7\n"), "csv.cells 2:5"); // decimal commas
    EXPECT_EQ(faultOf("a,b\n1,x\"y\n"), "csv.quote 2:4");
    EXPECT_EQ(faultOf("a,b\n1,\"y\nz\n"), "csv.quote 2:3"); // never closed
    EXPECT_EQ(faultOf("a,b\n\"1\"2,3\n"), "csv.quote 2:4");
    EXPECT_EQ(faultOf("a,b,a\n1,2,3\n"), "csv.duplicate-column 1:5");
    EXPECT_EQ(faultOf("a\n1\n2\n3\n", {.rows = 2}), "csv.too-large 4:1");
    EXPECT_EQ(faultOf("a\n1\n2\n", {.rows = 2}), "");
    EXPECT_EQ(faultOf("a,b,c\n", {.columns = 2}), "csv.too-large 1:5");
    EXPECT_EQ(faultOf("a,b\n", {.columns = 2}), "");
}

// Source: RFC 3629, section 3 (well-formed sequences) and section 10 (overlong forms, surrogates).
TEST(Csv, KnowsWellFormedUtf8) {
    for (const char* good : {"\x7F", "\xC2\x80", "\xDF\xBF", "\xE0\xA0\x80", "\xED\x9F\xBF", "\xEE\x80\x80",
                             "\xEF\xBF\xBF", "\xF0\x90\x80\x80", "\xF4\x8F\xBF\xBF"})
        EXPECT_EQ(faultOf(std::string("a") + good + "\n"), "");
    for (const char* bad :
         {"\x80", "\xC0\x80", "\xC1\xBF", "\xE0\x9F\xBF", "\xED\xA0\x80", "\xED\xBF\xBF", "\xF0\x8F\xBF\xBF",
          "\xF4\x90\x80\x80", "\xF5\x80\x80\x80", "\xC3", "\xE2\x82", "\xE2(\xA1"})
        EXPECT_EQ(faultOf(std::string("a") + bad), "csv.encoding 1:2");
}

TEST(Csv, ReadsWholeFiniteNumbers) {
    const auto number = [](const std::string& text) {
        const auto value = numberIn({.text = text}, "f.csv");
        return value ? *value : std::numeric_limits<double>::quiet_NaN();
    };
    EXPECT_EQ(number("0.1"), 0.1);
    EXPECT_EQ(number("-3"), -3);
    EXPECT_EQ(number(".5"), 0.5);
    EXPECT_EQ(number("5."), 5);
    EXPECT_EQ(number("1e-3"), 1e-3);
    EXPECT_EQ(number("1.7976931348623157e308"), std::numeric_limits<double>::max());
}

TEST(Csv, RefusesWhatIsNoNumberAtItsPlace) {
    EXPECT_EQ(numberFault(""), "csv.missing 4:9");
    EXPECT_EQ(numberFault("1,5"), "csv.decimal-comma 4:9");
    for (const char* text : {"nan", "-nan", "inf", "-inf", "infinity", "1e400"})
        EXPECT_EQ(numberFault(text), "csv.not-finite 4:9") << text;
    for (const char* text : {"x", "1x", " 1", "1 ", "+1", "--1", "0x10", "1.2.3", "1e", "٣"})
        EXPECT_EQ(numberFault(text), "csv.not-a-number 4:9") << text;
}

TEST(CsvBuilder, QuotesWhereNeededAndDisarmsFormulas) {
    CsvBuilder csv({"text", "number", "count"});
    csv.text("plain").number(0.1).integer(-7).endRow();
    csv.text("a,\"b\"\nc").number(std::numeric_limits<double>::quiet_NaN()).integer(0).endRow();
    csv.text("=1+1").number(-2).integer(1).endRow();
    csv.text("").number(1e300).integer(1).endRow();
    EXPECT_EQ(csv.content(),
              "text,number,count\nplain,0.1,-7\n\"a,\"\"b\"\"\nc\",n/a,0\n'=1+1,-2,1\n,1e+300,1\n");
    for (const char* text : {"+1", "-1", "@f", "\tx"}) {
        CsvBuilder one({"a"});
        one.text(text).endRow();
        EXPECT_EQ(one.content(), std::string("a\n'") + text + "\n");
    }
}

TEST(CsvBuilder, RefusesAnIncompleteRow) {
    CsvBuilder csv({"a", "b"});
    csv.text("x");
    EXPECT_THROW(csv.endRow(), std::logic_error);
}

class CsvSeed : public ::testing::TestWithParam<std::uint64_t> {};

TEST_P(CsvSeed, ReadsBackWhatTheBuilderWrote) {
    Random random(GetParam());
    const std::vector<std::string> pieces = {"a", ",", "\"", "\n", "\r\n", "é", " ", ";", "'", "0"};
    CsvBuilder csv({"text", "number"});
    Rows texts = {};
    std::vector<double> numbers;
    for (int row = 0; row < 30; ++row) {
        std::string text = "t"; // neither empty nor a formula, so nothing is put before it
        for (std::size_t n = random.below(8); n > 0; --n)
            text += pieces[random.below(pieces.size())];
        double number = random.normal() * std::pow(10.0, static_cast<double>(random.below(600)) - 300);
        csv.text(text).number(number).endRow();
        texts.push_back({text});
        numbers.push_back(number);
    }
    const auto table = parseCsv(csv.content(), "f.csv");
    ASSERT_TRUE(table.ok()) << describe(table.error());
    ASSERT_EQ(table->rows.size(), texts.size());
    for (std::size_t i = 0; i < texts.size(); ++i) {
        EXPECT_EQ(table->rows[i][0].text, texts[i][0]);
        const auto number = numberIn(table->rows[i][1], "f.csv");
        ASSERT_TRUE(number.ok());
        EXPECT_EQ(*number, numbers[i]);
    }
}

// Whatever the bytes, the reader gives a table whose rows are as long as its header, or an error with a
// place.
TEST_P(CsvSeed, ReadsOrRefusesAnyBytes) {
    Random random(GetParam());
    const std::string alphabet("ab01,,\"\"\n\n\r;.\xC3\xA9\xFF\0", 19);
    for (int i = 0; i < 200; ++i) {
        std::string content = i % 2 ? "" : "a,b\n";
        for (std::size_t n = random.below(40); n > 0; --n)
            content += alphabet[random.below(alphabet.size())];
        const auto table = parseCsv(content, "f.csv");
        if (!table) {
            EXPECT_GE(table.error().place.line, 1);
            EXPECT_GE(table.error().place.column, 1);
            continue;
        }
        for (const auto& row : table->rows)
            EXPECT_EQ(row.size(), table->header.size());
    }
}

INSTANTIATE_TEST_SUITE_P(Seeds, CsvSeed, ::testing::Range<std::uint64_t>(1, 21));
