// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/session/planning_request.h"
#include "tests/support/manual_clock.h"
#include "tests/support/memory_file_system.h"
#include "tests/support/small_study.h"
#include "ui/bench/bench_page.h"
#include "ui/session/session_controller.h"
#include "ui/stage/stage_window.h"

#include <QCoreApplication>
#include <QTest>
#include <gtest/gtest.h>
#include <memory>

namespace whichway {

/// A session in real windows: the stage and the bench over a real conductor, with a clock that moves only
/// when told to, plans made at once, and a file system in memory. Keys and clicks go where a person's would.
class WindowSession : public ::testing::Test {
protected:
    Study study = smallStudy();
    MemoryFileSystem files;
    ManualClock clock;
    std::unique_ptr<SessionController> controller;
    std::unique_ptr<StageWindow> stage;
    std::unique_ptr<BenchPage> bench;

    SessionParts parts() {
        return {.study = study,
                .files = files,
                .clock = clock,
                .planner = std::make_unique<ImmediatePlanner>(planningProblemOf(study.protocol)),
                .program = "test"};
    }

    void begin(std::uint64_t seed = 5) {
        close();
        auto begun =
            SessionController::begin(parts(), {.kind = SessionKind::Pilot, .code = "K7", .seed = seed});
        ASSERT_TRUE(begun.ok()) << describe(begun.error());
        controller = std::move(*begun);
        openWindows();
    }

    void openWindows() {
        const auto painter = std::make_shared<const MotionPainter>(study);
        stage = std::make_unique<StageWindow>(*controller, painter);
        stage->resize(1280, 720);
        stage->show();
        bench = std::make_unique<BenchPage>(*controller, painter);
        bench->resize(1280, 720);
        bench->show();
        QCoreApplication::processEvents();
    }

    void close() {
        bench.reset();
        stage.reset();
        controller.reset();
    }

    void TearDown() override { close(); }

    PromptKind kind() const { return controller->prompt().kind; }

    /// Presses a key where the stage's focus is.
    void key(Qt::Key key) {
        QWidget* focused = stage->focusWidget();
        QTest::keyClick(focused ? focused : stage.get(), key);
    }
    template <typename Widget = QWidget>
    Widget* part(QWidget& window, const char* name) {
        auto* found = window.findChild<Widget*>(QString::fromLatin1(name));
        EXPECT_NE(found, nullptr) << name;
        return found;
    }
    void click(const char* name) { QTest::mouseClick(part(*stage, name), Qt::LeftButton); }
    void benchClick(const char* name) { QTest::mouseClick(part(*bench, name), Qt::LeftButton); }

    /// Lets the clock run in steps of a tenth of a second, a frame after each.
    void run(double seconds) {
        for (int i = 0; i < static_cast<int>(seconds * 10 + 0.5); ++i) {
            clock.advance(std::chrono::milliseconds(100));
            stage->tick();
        }
    }
    void playToEnd() {
        stage->repaint();
        stage->grab(); // the first frame, which starts the clock
        run(controller->playback().duration() + 0.1);
        ASSERT_TRUE(controller->playback().seen());
    }
    void passGreyInterval() {
        ASSERT_TRUE(controller->isBetween());
        clock.advance(std::chrono::milliseconds(500));
        controller->poll();
    }
    /// Enter, and the grey interval where one follows.
    void goOn() {
        key(Qt::Key_Return);
        if (controller->isBetween())
            passGreyInterval();
    }
    void toTrial() {
        for (int i = 0; i < 10 && kind() != PromptKind::Trial; ++i)
            goOn();
        ASSERT_EQ(kind(), PromptKind::Trial);
    }
    /// Answers the pair on the stage by keys, once both were seen.
    void answerByKeys(int answer) {
        if (!controller->playback().seen())
            playToEnd();
        key(answer > 0 ? Qt::Key_Left : Qt::Key_Right);
        key(static_cast<Qt::Key>(Qt::Key_0 + std::abs(answer)));
    }
    void answerByMouse(int answer) {
        if (!controller->playback().seen())
            playToEnd();
        click(answer > 0 ? "stage.chooseLeft" : "stage.chooseRight");
        click(("stage.confidence" + std::to_string(std::abs(answer))).c_str());
    }

    /// What the disk holds.
    SessionState onDisk() {
        const auto reading = readJournal(files, controller->folder().journal());
        EXPECT_TRUE(reading.ok());
        const auto state = replayRecords(reading->records);
        EXPECT_TRUE(state.ok());
        return *state;
    }
};

} // namespace whichway
