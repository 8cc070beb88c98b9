// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/bench/bench_page.h"

#include "ui/bench/bench_parts.h"
#include "ui/bench/session_line.h"
#include "ui/look/key_button.h"
#include "ui/look/numbers.h"
#include "ui/look/style.h"
#include "ui/motion/pair_view.h"

#include <QHBoxLayout>
#include <QLabel>
#include <QLineEdit>
#include <QScrollArea>
#include <QVBoxLayout>
#include <algorithm>

namespace whichway {
namespace {

constexpr int kFrameInterval = 33; ///< ms; the stage has its own, faster timer

/// A panel of two motions that keeps the panes' shape as the page is resized.
class SmallPair final : public PairView {
public:
    using PairView::PairView;
    bool hasHeightForWidth() const override { return true; }
    int heightForWidth(int width) const override { return heightFor(width); }
    QSize sizeHint() const override { return {460, heightFor(460)}; }
};

QVBoxLayout* columnOf(QWidget* widget, const QString& heading) {
    auto* column = new QVBoxLayout(widget);
    column->setContentsMargins(0, 0, 0, 0);
    column->setSpacing(space::k8);
    column->addWidget(makeLabel(heading, TextRole::Heading));
    return column;
}

/// "14:02:11" of "2026-03-03T14:02:11.250+01:00".
QString timeOfDay(const std::string& time) {
    return time.size() >= 19 ? QString::fromStdString(time.substr(11, 8)) : QString::fromStdString(time);
}

} // namespace

BenchPage::BenchPage(SessionController& controller, std::shared_ptr<const MotionPainter> painter,
                     QWidget* parent)
    : QWidget(parent), controller_(controller) {
    setObjectName(QStringLiteral("bench"));
    auto* content = new QWidget;
    content->setObjectName(QStringLiteral("sheet"));
    auto* page = new QVBoxLayout(content);
    page->setContentsMargins(space::k24, space::k12, space::k24, space::k16);
    page->setSpacing(space::k12);
    page->addWidget(makeHead());
    paused_ = new NoticeStrip(QStringLiteral("bench.paused"), QStringLiteral("warn"));
    trouble_ = new NoticeStrip(QStringLiteral("bench.trouble"), QStringLiteral("bad"));
    trouble_->addAction(QStringLiteral("bench.tryAgain"), tr("Try again"),
                        [this] { controller_.tryAgain(); });
    page->addWidget(paused_);
    page->addWidget(trouble_);
    line_ = new SessionLine;
    page->addWidget(line_);
    page->addWidget(makeRule());
    auto* columns = new QHBoxLayout;
    columns->setSpacing(space::k32);
    columns->addWidget(makeStageColumn(std::move(painter)), 5);
    columns->addWidget(makePlannerColumn(), 3);
    columns->addWidget(makeNotesColumn(), 4);
    page->addLayout(columns);
    page->addStretch(1);

    auto* scroll = new QScrollArea;
    scroll->setObjectName(QStringLiteral("sheet"));
    scroll->setFrameShape(QFrame::NoFrame);
    scroll->setWidgetResizable(true);
    scroll->setHorizontalScrollBarPolicy(Qt::ScrollBarAlwaysOff);
    scroll->setWidget(content);
    auto* whole = new QVBoxLayout(this);
    whole->setContentsMargins(0, 0, 0, 0);
    whole->setSpacing(0);
    whole->addWidget(scroll, 1);
    whole->addWidget(makeRule());
    whole->addWidget(makeActionBar());

    connect(&controller_, &SessionController::changed, this, &BenchPage::refresh);
    connect(&controller_.playback(), &Playback::opened, this, &BenchPage::refreshStage);
    connect(&controller_.playback(), &Playback::started, this, &BenchPage::refreshStage);
    frames_.setInterval(kFrameInterval);
    connect(&frames_, &QTimer::timeout, this, &BenchPage::tick);
    frames_.start();
    refresh();
}

QWidget* BenchPage::makeHead() {
    auto* head = new QWidget;
    auto* row = new QHBoxLayout(head);
    row->setContentsMargins(0, 0, 0, 0);
    row->setSpacing(space::k24);
    code_ = makeLabel(QString::fromStdString(controller_.folder().code), TextRole::Title);
    code_->setObjectName(QStringLiteral("bench.code"));
    code_->setWordWrap(false);
    where_ = makeLabel({}, TextRole::Text, Ink::Second);
    where_->setObjectName(QStringLiteral("bench.where"));
    running_ = makeLabel({}, TextRole::Text, Ink::Second);
    running_->setObjectName(QStringLiteral("bench.running"));
    journal_ = makeLabel({}, TextRole::Text, Ink::Second);
    journal_->setObjectName(QStringLiteral("bench.journal"));
    for (QLabel* label : {where_, running_, journal_})
        label->setWordWrap(false);
    row->addWidget(code_);
    row->addWidget(where_);
    row->addWidget(running_);
    row->addStretch(1);
    row->addWidget(journal_);
    return head;
}

QWidget* BenchPage::makeStageColumn(std::shared_ptr<const MotionPainter> painter) {
    auto* widget = new QWidget;
    auto* column = columnOf(widget, tr("On the stage now"));
    pair_ = new SmallPair(QStringLiteral("bench.pair"), std::move(painter),
                          [this] { return controller_.playback().seconds(); });
    QSizePolicy policy(QSizePolicy::Expanding, QSizePolicy::Preferred);
    policy.setHeightForWidth(true);
    pair_->setSizePolicy(policy);
    column->addWidget(pair_);
    auto* facts = new FactTable(QStringLiteral("bench.stageFacts"));
    left_ = facts->addRow(tr("Left"));
    right_ = facts->addRow(tr("Right"));
    played_ = facts->addRow(tr("Playback"));
    answer_ = facts->addRow(tr("Answer"));
    column->addWidget(facts);
    column->addStretch(1);
    return widget;
}

QWidget* BenchPage::makePlannerColumn() {
    auto* widget = new QWidget;
    auto* column = columnOf(widget, tr("Planner"));
    plan_ = makeLabel({}, TextRole::Statement);
    plan_->setObjectName(QStringLiteral("bench.plan"));
    column->addWidget(plan_);
    auto* facts = new FactTable(QStringLiteral("bench.plannerFacts"));
    queue_ = facts->addRow(tr("Queue"));
    known_ = facts->addRow(tr("Planned from"));
    thread_ = facts->addRow(tr("Thread time"));
    wait_ = facts->addRow(tr("Longest wait"));
    column->addWidget(facts);
    planTrouble_ = makeLabel({}, TextRole::Label, Ink::Warn);
    planTrouble_->setObjectName(QStringLiteral("bench.planTrouble"));
    column->addWidget(planTrouble_);
    column->addSpacing(space::k8);
    column->addWidget(makeLabel(tr("Choices and the estimate stay hidden while the session runs."),
                                TextRole::Label, Ink::Third));
    column->addStretch(1);
    return widget;
}

QWidget* BenchPage::makeNotesColumn() {
    auto* widget = new QWidget;
    auto* column = columnOf(widget, tr("Notes"));
    notes_ = new QVBoxLayout;
    notes_->setSpacing(space::k8);
    column->addLayout(notes_);
    noteText_ = new QLineEdit;
    noteText_->setObjectName(QStringLiteral("bench.noteText"));
    noteText_->setAccessibleName(tr("Note"));
    noteText_->setMaxLength(2000);
    noteText_->setPlaceholderText(tr("A note, saved with Enter"));
    connect(noteText_, &QLineEdit::returnPressed, this, &BenchPage::takeNote);
    column->addWidget(noteText_);
    column->addWidget(
        makeLabel(tr("Kept with the trial they were made in. Name nobody."), TextRole::Label, Ink::Third));
    column->addStretch(1);
    return widget;
}

QWidget* BenchPage::makeActionBar() {
    auto* bar = new QWidget;
    bar->setObjectName(QStringLiteral("bench.actions"));
    bar->setMinimumHeight(space::kActionBar);
    auto* row = new QHBoxLayout(bar);
    row->setContentsMargins(space::k24 - 4, space::k8, space::k24 - 4, space::k8);
    row->setSpacing(space::k4);
    using Weight = KeyButton::Weight;
    pause_ = new KeyButton(QStringLiteral("bench.pause"), tr("Pause"), Weight::Usual, Icon::Pause,
                           QKeySequence(Qt::CTRL | Qt::Key_P));
    note_ = new KeyButton(QStringLiteral("bench.note"), tr("Note"), Weight::Usual, Icon::Note,
                          QKeySequence(Qt::CTRL | Qt::Key_N));
    stop_ = new KeyButton(QStringLiteral("bench.stop"), tr("Stop session"), Weight::Usual, Icon::Stop,
                          QKeySequence(Qt::CTRL | Qt::Key_Period));
    close_ = new KeyButton(QStringLiteral("bench.close"), tr("Close the bench"), Weight::Main);
    stopping_ = new NoticeStrip(QStringLiteral("bench.stopQuestion"), QStringLiteral("warn"));
    stopping_->setText(tr("Stop this session now? All answers are kept; it cannot be taken up again."));
    stopping_->addAction(QStringLiteral("bench.stopNo"), tr("Go on"), [this] {
        stopping_->hide();
        stop_->setEnabled(true);
    });
    stopping_->addAction(QStringLiteral("bench.stopYes"), tr("Stop now"), [this] {
        stopping_->hide();
        controller_.stop("experimenter");
    });
    connect(pause_, &KeyButton::clicked, this, &BenchPage::togglePause);
    connect(note_, &KeyButton::clicked, this, [this] { noteText_->setFocus(Qt::ShortcutFocusReason); });
    connect(stop_, &KeyButton::clicked, this, [this] {
        stop_->setEnabled(false);
        stopping_->show();
        if (auto* stay = stopping_->findChild<KeyButton*>(QStringLiteral("bench.stopNo")))
            stay->setFocus(Qt::OtherFocusReason);
    });
    connect(close_, &KeyButton::clicked, this, &BenchPage::closeAsked);
    row->addWidget(pause_);
    row->addWidget(note_);
    row->addSpacing(space::k48);
    row->addWidget(stop_);
    row->addWidget(stopping_);
    row->addStretch(1);
    row->addWidget(close_);
    return bar;
}

void BenchPage::refresh() {
    line_->setState(controller_.state());
    refreshHead();
    refreshStage();
    refreshPlanner();
    refreshNotes();
    refreshStrips();
    const bool over = controller_.state().ended.has_value();
    const bool isPaused = controller_.state().paused.has_value();
    pause_->setText(isPaused ? tr("Go on") : tr("Pause"));
    pause_->setAccessibleName(pause_->text());
    pause_->updateGeometry();
    pause_->setEnabled(!over && !controller_.trouble());
    note_->setEnabled(!over);
    noteText_->setEnabled(!over);
    stop_->setEnabled(!over && !stopping_->isVisible());
    close_->setVisible(over);
    if (over)
        stopping_->hide();
}

void BenchPage::refreshHead() {
    const auto where = controller_.progress();
    const Prompt prompt = controller_.prompt();
    const SessionState& state = controller_.state();
    QStringList parts;
    if (state.began.kind == SessionKind::Pilot)
        parts << tr("pilot");
    if (state.ended)
        parts << (state.ended->how == SessionEnd::Finished
                      ? tr("finished")
                      : tr("stopped by the %1").arg(QString::fromStdString(state.ended->by)));
    else if (prompt.kind == PromptKind::Instruction)
        parts << tr("instructions, page %1 of %2").arg(prompt.page).arg(prompt.pages);
    else if (where.practice)
        parts << tr("practice pair %1 of %2").arg(where.number).arg(where.total);
    else
        parts << tr("pair %1 of %2").arg(where.number).arg(where.total);
    if (!state.ended && state.onStage && !where.practice)
        parts << trialKindText(state.onStage->kind);
    if (!state.ended && where.breakAfter > 0)
        parts << tr("break after pair %1").arg(where.breakAfter);
    where_->setText(parts.join(QStringLiteral("   ")));
    journal_->setText(tr("Journal on disk, %1 events").arg(state.events));
}

void BenchPage::refreshStage() {
    const Prompt prompt = controller_.prompt();
    const Playback& playback = controller_.playback();
    const bool shown = !controller_.isBetween() && playback.isShown() &&
                       (prompt.kind == PromptKind::Trial || prompt.kind == PromptKind::Saved);
    const auto* left = shown ? controller_.study().motion(prompt.left) : nullptr;
    const auto* right = shown ? controller_.study().motion(prompt.right) : nullptr;
    pair_->show(left, right);
    const auto describeMotion = [](const Trajectory* motion) {
        return motion ? QString::fromStdString(motion->name) + QStringLiteral(",  ") +
                            withUnit(motion->duration(), 1, QStringLiteral("s"))
                      : QStringLiteral("–");
    };
    left_->setText(describeMotion(left));
    right_->setText(describeMotion(right));
    if (!shown)
        played_->setText(QStringLiteral("–"));
    if (prompt.kind == PromptKind::Saved && !controller_.isBetween())
        answer_->setText(tr("on disk; may still be taken back"));
    else if (!shown)
        answer_->setText(controller_.isBetween() ? tr("between two pairs") : tr("no pair on the stage"));
    else
        answer_->setText(playback.seen() ? tr("open, both were seen to the end")
                                         : tr("opens when both were seen to the end"));
    tick();
}

void BenchPage::tick() {
    if (!controller_.state().ended)
        running_->setText(tr("running %1").arg(spanText(controller_.secondsRunning())));
    const Playback& playback = controller_.playback();
    if (!playback.isShown() || controller_.isBetween())
        return;
    const QString replays = countText(playback.replays(), tr("replay"), tr("replays"));
    const QString unit = QStringLiteral("s");
    const QString played =
        tr("%1 of %2,  %3")
            .arg(withUnit(playback.seconds(), 1, unit), withUnit(playback.duration(), 1, unit), replays);
    if (played == played_->text())
        return;
    played_->setText(played);
    pair_->update();
}

void BenchPage::refreshPlanner() {
    const auto status = controller_.plannerStatus();
    const SessionState& state = controller_.state();
    const bool allShown = std::none_of(state.began.schedule.begin(), state.began.schedule.end(),
                                       [&, i = 0](const ScheduledTrial& trial) mutable {
                                           ++i;
                                           return trial.kind == TrialKind::Main && !state.isAnswered(i) &&
                                                  !(state.onStage && state.onStage->trial == i);
                                       });
    plan_->setText(state.ended           ? tr("Session over")
                   : allShown            ? tr("Nothing left to plan")
                   : status.planReady    ? tr("Next pairs ready")
                   : state.plans.empty() ? tr("First plan is asked for")
                                         : tr("Planning"));
    queue_->setText(countText(status.queued, tr("pair"), tr("pairs")));
    known_->setText(state.plans.empty() ? tr("no plan yet")
                                        : countText(status.knownAnswers, tr("answer"), tr("answers")));
    thread_->setText(state.plans.empty() ? QStringLiteral("–")
                                         : withUnit(status.lastSeconds, 3, QStringLiteral("s")));
    wait_->setText(withUnit(state.longestWait, 2, QStringLiteral("s")));
    QStringList troubles;
    if (!status.lastProblem.empty())
        troubles << QString::fromStdString(status.lastProblem);
    for (const std::string& rule : status.relaxed)
        troubles << tr("Relaxed: %1").arg(QString::fromStdString(rule));
    planTrouble_->setText(troubles.join(QLatin1Char('\n')));
    planTrouble_->setVisible(!troubles.isEmpty());
}

void BenchPage::refreshNotes() {
    const auto& notes = controller_.state().notes;
    for (; notesShown_ < notes.size(); ++notesShown_) {
        const Note& note = notes[notesShown_];
        auto* row = new QHBoxLayout;
        row->setSpacing(space::k12);
        QString when = timeOfDay(note.time);
        if (note.trial > 0)
            when += QLatin1Char(' ') + tr("trial %1").arg(note.trial);
        QLabel* stamp = makeLabel(when, TextRole::Label, Ink::Second);
        stamp->setWordWrap(false);
        stamp->setAlignment(Qt::AlignTop);
        stamp->setFixedWidth(stamp->fontMetrics().averageCharWidth() * 19);
        QLabel* text = makeLabel(QString::fromStdString(note.text), TextRole::Text);
        text->setObjectName(QStringLiteral("bench.note%1").arg(notesShown_ + 1));
        row->addWidget(stamp);
        row->addWidget(text, 1);
        notes_->addLayout(row);
    }
}

void BenchPage::refreshStrips() {
    const SessionState& state = controller_.state();
    paused_->setVisible(state.paused.has_value() && !state.ended);
    if (state.paused)
        paused_->setText(
            tr("Paused by the %1. The stage says so; Ctrl+P or the participant's space bar goes on.")
                .arg(QString::fromStdString(state.paused->reason)));
    const auto& trouble = controller_.trouble();
    trouble_->setVisible(trouble.has_value());
    if (trouble)
        trouble_->setText(trouble->text + QLatin1Char(' ') +
                          QString::fromStdString(describe(trouble->error)) + QLatin1Char(' ') +
                          tr("Nothing given before is lost."));
}

void BenchPage::togglePause() {
    if (controller_.state().paused)
        controller_.goOn();
    else
        controller_.pause("experimenter");
}

void BenchPage::takeNote() {
    if (controller_.note(noteText_->text()))
        noteText_->clear();
}

} // namespace whichway
