// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/files/toml_nesting.h"
#include "core/files/toml_table.h"
#include "core/files/toml_tree.h"

#include <gmock/gmock.h>

namespace whichway {
namespace {

std::string faultOf(const std::string& content) {
    const Result<TomlNode> root = parseToml(content, "f.toml");
    return root
               ? ""
               : root.error().code + " " + describe({.code = "", .place = root.error().place, .message = ""});
}

TEST(TomlTree, KeepsTheOrderOfTheFile) {
    const Result<TomlNode> root = parseToml("zebra = 1\n[table]\nb = 2\na = 3\n[alpha]\n", "f.toml");
    ASSERT_TRUE(root.ok());
    std::vector<std::string> keys;
    for (const auto& [key, node] : root->members)
        keys.push_back(key);
    EXPECT_THAT(keys, testing::ElementsAre("zebra", "table", "alpha"));
    EXPECT_EQ(root->member("table")->members.front().first, "b");
    EXPECT_EQ(root->member("nothing"), nullptr);
}

TEST(TomlTree, KnowsEveryKindOfValue) {
    const Result<TomlNode> root = parseToml(
        "a = \"x\"\nb = 2\nc = 2.5\nd = true\ne = [1, 2]\nf = {}\ng = 2026-01-01\nh = nan\n", "f.toml");
    ASSERT_TRUE(root.ok());
    std::vector<TomlNode::Kind> kinds;
    for (const auto& [key, node] : root->members)
        kinds.push_back(node.kind);
    using Kind = TomlNode::Kind;
    EXPECT_THAT(kinds, testing::ElementsAre(Kind::Text, Kind::Integer, Kind::Number, Kind::Flag, Kind::Array,
                                            Kind::Table, Kind::Moment, Kind::Number));
    EXPECT_EQ(root->member("b")->number, 2);
    EXPECT_EQ(root->member("e")->items.size(), 2u);
}

TEST(TomlTree, CountsColumnsInBytes) {
    // "ä" and "’" take two and three bytes.
    const Result<TomlNode> root = parseToml("t = { \"ä’\" = 1, b = 2 }\n", "f.toml");
    ASSERT_TRUE(root.ok());
    const TomlNode* b = root->member("t")->member("b");
    EXPECT_EQ(b->keyPlace, (Place{"f.toml", 1, 20}));
    EXPECT_EQ(b->place, (Place{"f.toml", 1, 24}));
}

TEST(TomlTree, PassesOverAByteOrderMark) {
    const Result<TomlNode> root = parseToml("\xEF\xBB\xBF"
                                            "a = 1\r\nb = 2\r\n",
                                            "f.toml");
    ASSERT_TRUE(root.ok());
    EXPECT_EQ(root->member("a")->place, (Place{"f.toml", 1, 5}));
    EXPECT_EQ(root->member("b")->place, (Place{"f.toml", 2, 5}));
}

// What RFC 3629 forbids: stray and missing continuation bytes, overlong forms, surrogates, beyond U+10FFFF.
TEST(TomlTree, PlacesTheFirstByteThatIsNotUtf8) {
    for (const char* bad :
         {"\x80", "\xC3", "\xC0\xAF", "\xE0\x80\x80", "\xED\xA0\x80", "\xF4\x90\x80\x80", "\xF5", "\xE2\x82"})
        EXPECT_EQ(faultOf("a = 1\nb = \"é" + std::string(bad) + "\"\n"), "toml.encoding f.toml:2:8: ") << bad;
}

TEST(TomlTree, PlacesASyntaxFault) {
    EXPECT_EQ(faultOf("a = 1\nb = = 2\n"), "toml.syntax f.toml:2:5: ");
}

TEST(TomlNesting, BoundsBracketsAndDottedKeysButNotTexts) {
    const auto nested = [](int depth) {
        return "a = " + std::string(static_cast<std::size_t>(depth), '[') +
               std::string(static_cast<std::size_t>(depth), ']') + "\n";
    };
    EXPECT_TRUE(checkTomlNesting(nested(kTomlNesting), "f").ok());
    EXPECT_EQ(checkTomlNesting(nested(kTomlNesting + 1), "f").error().place,
              (Place{"f", 1, 5 + kTomlNesting}));
    std::string key;
    for (int i = 1; i < kTomlNesting; ++i)
        key += "a.";
    EXPECT_TRUE(checkTomlNesting(key + "a = 1.5\n[" + key + "b]\n", "f").ok());
    EXPECT_EQ(checkTomlNesting("x = 1\n" + key + "a.a = 1\n", "f").error().place,
              (Place{"f", 2, 2 * kTomlNesting}));
    // Quotes hide dots and brackets only as far as the text goes.
    const std::string dots(100, '.'), brackets(100, '[');
    EXPECT_TRUE(
        checkTomlNesting("a = \"" + dots + brackets + "\\\"" + dots + "\" # " + dots + "\n", "f").ok());
    EXPECT_TRUE(checkTomlNesting("a = '" + dots + "\\'\nb = '''" + dots + "\n''" + dots + "'''\n", "f").ok());
    EXPECT_TRUE(checkTomlNesting("a = \"\"\"\n" + dots + "\\\"\"\"" + brackets + "\"\"\"\"\"\n", "f").ok());
    EXPECT_EQ(checkTomlNesting("a = \"\"\"\n\"\"\"\nb = " + brackets, "f").error().place,
              (Place{"f", 3, 5 + kTomlNesting}));
}

TEST(TomlNesting, StopsBeforeTheParserWouldExhaustTheStack) {
    std::string deep;
    for (int i = 0; i < 500000; ++i)
        deep += "a.";
    EXPECT_EQ(parseToml(deep + "a = 1", "f.toml").error().code, "toml.nesting");
    EXPECT_EQ(parseToml("[" + deep + "a]", "f.toml").error().code, "toml.nesting");
    EXPECT_EQ(parseToml("a = " + std::string(500000, '['), "f.toml").error().code, "toml.nesting");
    std::vector<Error> problems;
    EXPECT_FALSE(TomlTable::parse(deep + "a = 1", "f.toml", problems).has_value());
    EXPECT_EQ(problems.front().code, "toml.nesting");
}

} // namespace
} // namespace whichway
