// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/pages/study_page.h"

#include "tests/support/small_study.h"
#include "ui/pages/library_model.h"

#include <QAbstractButton>
#include <QAbstractItemModelTester>
#include <QLabel>
#include <QLineEdit>
#include <QRadioButton>
#include <QSignalSpy>
#include <QTableView>
#include <QTest>
#include <gtest/gtest.h>

using namespace whichway;

namespace {

class StudyShown : public ::testing::Test {
protected:
    Study study = smallStudy();
    StudyPage page;

    StudyShown() {
        page.resize(1280, 700);
        page.showStudy(study);
        page.show();
    }
    template <typename Widget = QWidget>
    Widget* part(const char* name) {
        auto* found = page.findChild<Widget*>(QString::fromLatin1(name));
        EXPECT_NE(found, nullptr) << name;
        return found;
    }
    std::string allText() {
        QCoreApplication::processEvents(); // new rows are shown with the next layout
        std::string text;
        for (const auto* label : page.findChildren<QLabel*>())
            if (label->isVisible())
                text += label->text().toStdString() + "\n";
        return text;
    }
};

SessionRow row(SessionRow::State state, const std::string& code, const std::string& id) {
    return {.folder = {.path = "study/sessions/" + id, .id = id, .code = code},
            .state = state,
            .answered = 17,
            .total = 60,
            .began = "2026-03-03T14:02:11.250+01:00"};
}

} // namespace

TEST_F(StudyShown, ListsTheLibraryInItsUnits) {
    const auto* table = part<QTableView>("study.library");
    ASSERT_EQ(table->model()->rowCount(), 30);
    ASSERT_EQ(table->model()->columnCount(), LibraryModel::kFirstFeature + 3);
    EXPECT_EQ(table->model()->index(0, 0).data().toString().toStdString(), "m000");
    EXPECT_EQ(
        table->model()->headerData(LibraryModel::kFirstFeature, Qt::Horizontal).toString().toStdString(),
        "feature1\nm");
    EXPECT_DOUBLE_EQ(table->model()->index(4, LibraryModel::kFirstFeature + 1).data(Qt::UserRole).toDouble(),
                     study.protocol.table.raw(4, 1));
    EXPECT_NE(allText().find("30 motions, 3 features"), std::string::npos);
    EXPECT_NE(allText().find("Invented motions"), std::string::npos);
}

TEST_F(StudyShown, SortsAndFindsMotions) {
    auto* table = part<QTableView>("study.library");
    const int column = LibraryModel::kFirstFeature;
    table->sortByColumn(column, Qt::AscendingOrder);
    for (int i = 1; i < table->model()->rowCount(); ++i)
        EXPECT_LE(table->model()->index(i - 1, column).data(Qt::UserRole).toDouble(),
                  table->model()->index(i, column).data(Qt::UserRole).toDouble());
    QTest::keyClicks(part<QLineEdit>("study.find"), "m01");
    EXPECT_EQ(table->model()->rowCount(), 10);
}

TEST_F(StudyShown, ModelKeepsTheRulesOfModels) {
    LibraryModel model(study);
    QAbstractItemModelTester tester(&model, QAbstractItemModelTester::FailureReportingMode::Fatal);
    EXPECT_EQ(model.rowCount(), 30);
}

TEST_F(StudyShown, StartsASessionWithACodeAndAKind) {
    QSignalSpy asked(&page, &StudyPage::startAsked);
    page.showSessions({}, {});
    EXPECT_FALSE(part("study.start")->isEnabled());
    QTest::keyClicks(part<QLineEdit>("study.code"), "K7-4821");
    QTest::mouseClick(part("study.start"), Qt::LeftButton);
    ASSERT_EQ(asked.count(), 1);
    EXPECT_EQ(asked[0][0].toString().toStdString(), "K7-4821");
    EXPECT_FALSE(asked[0][1].toBool());
    part<QRadioButton>("study.kindPilot")->click();
    QTest::keyClick(part<QLineEdit>("study.code"), Qt::Key_Return);
    ASSERT_EQ(asked.count(), 2);
    EXPECT_TRUE(asked[1][1].toBool());
}

TEST_F(StudyShown, RefusesACodeThatCouldNotNameASession) {
    QSignalSpy asked(&page, &StudyPage::startAsked);
    QTest::keyClicks(part<QLineEdit>("study.code"), "Anna Berg");
    QTest::mouseClick(part("study.start"), Qt::LeftButton);
    EXPECT_EQ(asked.count(), 0);
    EXPECT_TRUE(part("study.startProblem")->isVisible());
    EXPECT_FALSE(part<QLabel>("study.startProblem")->text().isEmpty());
}

TEST_F(StudyShown, OffersToGoOnWithWhatHasNotEnded) {
    QSignalSpy asked(&page, &StudyPage::goOnAsked);
    page.showSessions(
        {row(SessionRow::State::Unfinished, "K7", "aa"), row(SessionRow::State::Finished, "A2", "bb")}, "");
    EXPECT_NE(allText().find("not ended, 17 of 60 trials are safe;  3 March 2026, 14:02"), std::string::npos);
    EXPECT_EQ(page.findChild<QWidget*>("study.goOn2"), nullptr);
    QTest::mouseClick(part("study.goOn1"), Qt::LeftButton);
    ASSERT_EQ(asked.count(), 1);
    EXPECT_EQ(asked[0][0].value<SessionFolder>().id, "aa");
}

TEST_F(StudyShown, StartsNoSecondSessionWhileOneRuns) {
    QTest::keyClicks(part<QLineEdit>("study.code"), "K8");
    page.showSessions(
        {row(SessionRow::State::Unfinished, "K7", "aa"), row(SessionRow::State::Unfinished, "A2", "bb")},
        "aa");
    EXPECT_FALSE(part("study.start")->isEnabled());
    EXPECT_NE(allText().find("running now"), std::string::npos);
    EXPECT_EQ(page.findChild<QWidget*>("study.goOn1"), nullptr);
    EXPECT_FALSE(part("study.goOn2")->isEnabled());
}

TEST(StudyNotOpened, SaysEveryProblemWithItsPlaceAndWhatToDo) {
    StudyPage page;
    page.show();
    page.showProblems("ward", {{.code = "study.unknown-key",
                                .place = {"study.toml", 41, 12},
                                .message = "“travl_time” is not a feature of this library.",
                                .remedy = "Did you mean “travel_time”?"},
                               {.code = "csv.decimal-comma",
                                .place = {"trajectories/m017.csv", 3, 8},
                                .message = "“1,25” has a decimal comma.",
                                .remedy = "Write 1.25."}});
    std::string text;
    for (const auto* label : page.findChildren<QLabel*>())
        if (label->isVisible())
            text += label->text().toStdString() + "\n";
    for (const char* expected : {"2 problems in ward", "study.toml:41:12", "“travl_time” is not",
                                 "Did you mean", "trajectories/m017.csv:3:8", "Write 1.25."})
        EXPECT_NE(text.find(expected), std::string::npos) << expected;
    QSignalSpy again(&page, &StudyPage::readAgainAsked);
    QTest::mouseClick(page.findChild<QWidget*>("study.readAgain"), Qt::LeftButton);
    EXPECT_EQ(again.count(), 1);
}

TEST(StudyText, IsNeverReadAsHtml) {
    Study study = smallStudy();
    study.protocol.title = "<b>bold</b>";
    StudyPage page;
    page.showStudy(study);
    for (const auto* label : page.findChildren<QLabel*>())
        EXPECT_EQ(label->textFormat(), Qt::PlainText) << label->text().toStdString();
}
