// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/handover/trial_table.h"

#include "core/files/csv.h"
#include "tests/support/answered_session.h"
#include "tests/support/small_study.h"

#include <gmock/gmock.h>
#include <gtest/gtest.h>
#include <map>

using namespace whichway;
using ::testing::HasSubstr;
using ::testing::Not;

namespace {

using Row = std::map<std::string, std::string>;

/// Each row by the header's names, as a reader of the file would see it.
std::vector<Row> rowsOf(const std::string& content) {
    const auto table = parseCsv(content, "table.csv");
    EXPECT_TRUE(table.ok()) << describe(table.error());
    std::vector<Row> rows;
    for (const auto& cells : table->rows) {
        Row row;
        for (std::size_t i = 0; i < cells.size(); ++i)
            row[table->header[i].text] = cells[i].text;
        rows.push_back(std::move(row));
    }
    return rows;
}

class Table : public ::testing::Test {
protected:
    AnsweredSession session{[] {
        Protocol protocol = smallStudy().protocol;
        protocol.cannotTell = true;
        return protocol;
    }()};
    std::vector<Row> rows() const { return rowsOf(trialTable(session.state)); }
};

TEST_F(Table, HasOneRowAnAnswerWithSideConfidenceAndTime) {
    session.add(TrialKind::Main, "m003", "m007", 2, 4.25);
    session.add(TrialKind::Main, "m007", "m001", -3, -1);
    session.add(TrialKind::Main, "m002", "m001", 0);
    const auto found = rows();
    ASSERT_EQ(found.size(), 3u);
    EXPECT_EQ(found[0].at("kind"), "main");
    EXPECT_EQ(found[0].at("left"), "m003");
    EXPECT_EQ(found[0].at("choice"), "left");
    EXPECT_EQ(found[0].at("confidence"), "2");
    EXPECT_EQ(found[0].at("response_time_s"), "4.25");
    EXPECT_EQ(found[0].at("information_bit"), "0.75");
    EXPECT_EQ(found[1].at("choice"), "right");
    EXPECT_EQ(found[1].at("confidence"), "3");
    EXPECT_EQ(found[1].at("response_time_s"), "n/a");
    EXPECT_EQ(found[2].at("choice"), "cannot tell");
    EXPECT_EQ(found[2].at("confidence"), "n/a");
}

TEST_F(Table, HasTheFeaturesToTheLastDigit) {
    session.add(TrialKind::Main, "m003", "m007", 2);
    const auto found = rows();
    const FeatureTable& table = session.state.began.protocol.table;
    EXPECT_EQ(std::stod(found[0].at("left_feature2")), table.raw(3, 1));
    EXPECT_EQ(std::stod(found[0].at("right_feature3")), table.raw(7, 2));
}

TEST_F(Table, NamesWhatIsRepeatedAndWhatWasExpected) {
    session.repeat(session.add(TrialKind::HeldOut, "m003", "m007", 2), -2);
    session.addCatch(Side::Right, 1);
    const auto found = rows();
    EXPECT_EQ(found[0].at("repeat_of"), "n/a");
    EXPECT_EQ(found[1].at("kind"), "repeat");
    EXPECT_EQ(found[1].at("repeat_of"), "1");
    EXPECT_EQ(found[1].at("left"), "m007");
    EXPECT_EQ(found[1].at("information_bit"), "n/a");
    EXPECT_EQ(found[2].at("expected"), "right");
    EXPECT_EQ(found[2].at("left_feature1"), "n/a") << "catch motions are not of the main library";
}

TEST_F(Table, OfNoAnswersIsAHeader) {
    EXPECT_TRUE(rows().empty());
}

TEST_F(Table, HasACodebookThatExplainsEveryColumnAndNoOther) {
    session.add(TrialKind::Main, "m003", "m007", 2);
    const auto table = parseCsv(trialTable(session.state), "trials.csv");
    ASSERT_TRUE(table.ok());
    const auto explained = rowsOf(codebook(session.state.began.protocol));
    ASSERT_EQ(explained.size(), table->header.size());
    for (std::size_t i = 0; i < explained.size(); ++i) {
        EXPECT_EQ(explained[i].at("column"), table->header[i].text);
        EXPECT_FALSE(explained[i].at("meaning").empty()) << explained[i].at("column");
    }
    EXPECT_EQ(explained.back().at("unit"), "m");
}

TEST_F(Table, HoldsNoCodeNoteDateSessionOrFreeText) {
    session.state.notes.push_back({.trial = 1, .text = "PLANTED-NOTE", .time = "2026-03-03T14:05:00+01:00"});
    session.state.ended =
        SessionEnded{.how = SessionEnd::Stopped, .by = "experimenter", .reason = "PLANTED-REASON"};
    session.add(TrialKind::Main, "m003", "m007", 2);
    const std::string content = trialTable(session.state) + codebook(session.state.began.protocol);
    for (const std::string& planted :
         {std::string("PLANTED"), std::string("2026"), std::string("14:0"), session.state.began.session})
        EXPECT_THAT(content, Not(HasSubstr(planted)));
}

TEST_F(Table, LetsNoSpreadsheetRunAFeaturesLabel) {
    session.state.began.protocol.features[0].label = "=HYPERLINK(\"x\")";
    EXPECT_THAT(codebook(session.state.began.protocol), Not(HasSubstr(",\"=HYPERLINK")));
}

} // namespace
