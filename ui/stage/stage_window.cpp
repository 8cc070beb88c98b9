// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/stage/stage_window.h"

#include "ui/look/tokens.h"
#include "ui/motion/pair_view.h"
#include "ui/stage/confidence_row.h"
#include "ui/stage/stage_bar.h"
#include "ui/stage/stage_button.h"
#include "ui/stage/stage_label.h"
#include "ui/stage/stage_panel.h"

#include <QCloseEvent>
#include <QKeyEvent>
#include <QPainter>
#include <algorithm>
#include <cstdlib>

namespace whichway {
namespace {

constexpr int kFrameInterval = 16; ///< ms

QString fromUtf8(const std::string& text) {
    return QString::fromStdString(text);
}

} // namespace

StageWindow::StageWindow(SessionController& controller, std::shared_ptr<const MotionPainter> painter,
                         QWidget* parent)
    : QWidget(parent), controller_(controller) {
    setObjectName(QStringLiteral("stage"));
    setWindowTitle(tr("Whichway, stage"));
    setMinimumSize(1024, 700);
    setFocusPolicy(Qt::StrongFocus);
    setLayoutDirection(Qt::LeftToRight); // left stays left in every language
    pair_ = new PairView(
        QStringLiteral("stage.pair"), std::move(painter),
        [this] { return controller_.playback().paintedSeconds(); }, this);
    build();
    connectAll();
    refresh();
}

void StageWindow::build() {
    const Texts& texts = controller_.texts();
    const auto button = [this](const char* name, const QString& text, const QString& key, double pixels,
                               StageButton::Order order) {
        return new StageButton(QString::fromLatin1(name), text, key, pixels, order, this);
    };
    using Order = StageButton::Order;
    question_ = stageLabel(QStringLiteral("stage.question"), 32, this);
    question_->setText(fromUtf8(texts.question));
    bar_ = new StageBar(
        [this] {
            const Playback& playback = controller_.playback();
            return playback.isShown() ? playback.seconds() / playback.duration() : 0.0;
        },
        this);
    pause_ = button("stage.pause", tr("Pause"), tr("P"), 21, Order::WordFirst);
    pause_->setIconKind(Icon::Pause);
    replay_ = button("stage.replay", tr("Replay"), tr("Space"), 21, Order::WordFirst);
    replay_->setIconKind(Icon::Replay);
    left_ = button("stage.chooseLeft", fromUtf8(texts.left), QString(QChar(0x2190)), 26, Order::KeyFirst);
    right_ = button("stage.chooseRight", fromUtf8(texts.right), QString(QChar(0x2192)), 26, Order::KeyLast);
    if (controller_.state().began.protocol.cannotTell)
        cannotTell_ =
            button("stage.cannotTell", fromUtf8(texts.cannotTell), QStringLiteral("0"), 22, Order::KeyFirst);
    hint_ = stageLabel(QStringLiteral("stage.hint"), 22, this);
    sureness_ = stageLabel(QStringLiteral("stage.sureness"), 22, this);
    sureness_->setText(fromUtf8(texts.sureness));
    sureness_->setAlignment(Qt::AlignRight | Qt::AlignVCenter);
    confidence_ = new ConfidenceRow(texts.confidence, this);
    next_ = button("stage.next", tr("Next pair"), tr("Enter"), 21, Order::WordFirst);
    undo_ = button("stage.undo", tr("Undo"), tr("Back"), 21, Order::WordFirst);
    undo_->setIconKind(Icon::Undo);
    progress_ = stageLabel(QStringLiteral("stage.progress"), 21, this);
    stop_ = button("stage.stop", tr("Stop"), tr("Esc"), 21, Order::WordFirst);
    stop_->setIconKind(Icon::Stop);
    page_ = stageLabel(QStringLiteral("stage.page"), 26, this);
    pageButton_ = button("stage.goOn", tr("Go on"), tr("Enter"), 22, Order::WordFirst);

    stopPanel_ = new StagePanel(QStringLiteral("stage.stopQuestion"), this);
    stopPanel_->setText(tr("Do you want to stop?"), tr("You need not say why."));
    stopPanel_->addAction(QStringLiteral("stage.stopNo"), tr("Go on"), tr("Esc"),
                          [this] { closeStopQuestion(); });
    stopPanel_->addAction(QStringLiteral("stage.stopYes"), tr("Stop now"), {}, [this] {
        closeStopQuestion();
        controller_.stop("participant");
    });
    troublePanel_ = new StagePanel(QStringLiteral("stage.trouble"), this);
    troublePanel_->addAction(QStringLiteral("stage.tryAgain"), tr("Try again"), tr("Enter"),
                             [this] { controller_.tryAgain(); });
    troublePanel_->addAction(QStringLiteral("stage.troubleStop"), tr("Stop session"), {},
                             [this] { controller_.stop("participant"); });
}

void StageWindow::connectAll() {
    connect(pause_, &StageButton::clicked, this, [this] { controller_.pause("participant"); });
    connect(replay_, &StageButton::clicked, this, &StageWindow::pressReplay);
    connect(left_, &StageButton::clicked, this, [this] { choose(Side::Left); });
    connect(right_, &StageButton::clicked, this, [this] { choose(Side::Right); });
    if (cannotTell_)
        connect(cannotTell_, &StageButton::clicked, this, [this] { controller_.answer(0); });
    connect(confidence_, &ConfidenceRow::pressed, this, &StageWindow::pressConfidence);
    connect(next_, &StageButton::clicked, this, [this] { controller_.next(); });
    connect(undo_, &StageButton::clicked, this, &StageWindow::pressUndo);
    connect(stop_, &StageButton::clicked, this, &StageWindow::askToStop);
    connect(pageButton_, &StageButton::clicked, this, &StageWindow::pressPageButton);

    connect(&controller_, &SessionController::changed, this, &StageWindow::refresh);
    connect(&controller_, &SessionController::presented, this, [this] {
        chosen_ = Side::None;
        setFocus(Qt::OtherFocusReason);
        if (stopPanel_->isVisible())
            controller_.playback().hold();
    });
    connect(&controller_.playback(), &Playback::opened, this, &StageWindow::refresh);
    connect(&controller_.playback(), &Playback::started, this, [this] {
        pair_->update();
        frames_.start();
    });
    frames_.setInterval(kFrameInterval);
    frames_.setTimerType(Qt::PreciseTimer);
    connect(&frames_, &QTimer::timeout, this, &StageWindow::tick);
    frames_.start();
}

void StageWindow::tick() {
    Playback& playback = controller_.playback();
    if (!playback.isShown()) {
        frames_.stop();
        return;
    }
    const bool wasRunning = playback.isRunning();
    playback.look();
    pair_->update();
    bar_->update();
    if (!wasRunning && !playback.isHeld())
        frames_.stop(); // the last frame has been asked for
}

bool StageWindow::canAnswer() const {
    return !controller_.isBetween() && controller_.prompt().kind == PromptKind::Trial &&
           controller_.playback().seen();
}

void StageWindow::showView(View view) {
    view_ = view;
    const bool isPair = view == View::Pair;
    for (QWidget* part :
         std::initializer_list<QWidget*>{question_, pair_, bar_, pause_, replay_, left_, right_, undo_})
        part->setVisible(isPair);
    if (cannotTell_)
        cannotTell_->setVisible(isPair);
    for (QWidget* part : std::initializer_list<QWidget*>{hint_, sureness_, confidence_, next_})
        part->setVisible(false);
    page_->setVisible(!isPair);
    pageButton_->setVisible(!isPair);
}

void StageWindow::refresh() {
    const Prompt prompt = controller_.prompt();
    const bool isPair = controller_.isBetween() || prompt.kind == PromptKind::Trial ||
                        prompt.kind == PromptKind::Saved || prompt.kind == PromptKind::WaitingForPlan;
    showView(isPair ? View::Pair : View::Page);
    if (isPair)
        refreshPair(prompt);
    else
        refreshPage(prompt);
    stop_->setVisible(prompt.kind != PromptKind::Ended);
    refreshTrouble();
    if (prompt.kind == PromptKind::Ended)
        stopPanel_->hide();
    arrange();
}

void StageWindow::refreshPage(const Prompt& prompt) {
    QString text = fromUtf8(prompt.text);
    QString progress;
    pageButton_->setVisible(prompt.kind != PromptKind::Ended);
    pageButton_->setKey(prompt.kind == PromptKind::Paused ? tr("Space") : tr("Enter"));
    switch (prompt.kind) {
    case PromptKind::Instruction:
        if (prompt.pages > 1)
            progress = tr("Page %1 of %2").arg(prompt.page).arg(prompt.pages);
        break;
    case PromptKind::Paused:
        text = tr("Paused. Press Space to go on, or speak to the experimenter.");
        break;
    default:
        break;
    }
    page_->setText(text);
    progress_->setText(progress);
    if (!stopPanel_->isVisible())
        setFocus(Qt::OtherFocusReason);
}

void StageWindow::refreshPair(const Prompt& prompt) {
    const bool between = controller_.isBetween();
    const bool saved = !between && prompt.kind == PromptKind::Saved;
    const bool open = canAnswer();
    const Study& study = controller_.study();
    if (between || prompt.kind == PromptKind::WaitingForPlan)
        pair_->clear();
    else
        pair_->show(study.motion(prompt.left), study.motion(prompt.right));

    const int answer = saved ? controller_.state().answers.back().answer : 0;
    const Side side = !saved ? chosen_ : answer > 0 ? Side::Left : answer < 0 ? Side::Right : Side::None;
    left_->setEnabled(open);
    right_->setEnabled(open);
    left_->setChosen(!between && side == Side::Left);
    right_->setChosen(!between && side == Side::Right);
    pair_->setChosen(between ? Side::None : side);
    if (cannotTell_) {
        cannotTell_->setEnabled(open);
        cannotTell_->setChosen(saved && answer == 0);
    }
    const bool asked = (open && side != Side::None) || (saved && answer != 0);
    confidence_->setVisible(asked);
    confidence_->setWordsEnabled(open);
    confidence_->setChosenLevel(std::abs(answer));
    sureness_->setVisible(asked);
    next_->setVisible(asked || saved);
    next_->setEnabled(saved);
    replay_->setEnabled(!between && controller_.playback().isShown() && !saved);
    undo_->setEnabled(saved || (open && side != Side::None));

    const bool isWaiting = prompt.kind == PromptKind::Trial && !between && !controller_.playback().seen();
    hint_->setVisible(isWaiting || controller_.isLate());
    hint_->setText(isWaiting ? tr("You can choose once both motions have played to the end.")
                             : tr("The next pair is being prepared."));
    progress_->setText(progressText(prompt));

    if (stopPanel_->isVisible())
        return;
    if (saved)
        next_->setFocus(Qt::OtherFocusReason);
    else if (asked)
        confidence_->setFocus(Qt::OtherFocusReason);
    else if (between)
        setFocus(Qt::OtherFocusReason);
}

QString StageWindow::progressText(const Prompt& prompt) const {
    const auto where = controller_.progress();
    const QString pilot = controller_.state().began.kind == SessionKind::Participant
                              ? QString()
                              : tr("Pilot session.") + QLatin1Char(' ');
    QString text = where.practice ? tr("Practice pair %1 of %2.") : tr("Pair %1 of %2.");
    text = text.arg(where.number).arg(where.total);
    if (prompt.kind == PromptKind::Saved && !controller_.isBetween())
        text += QLatin1Char(' ') + tr("Your answer is saved.");
    else if (where.breakAfter > 0)
        text += QLatin1Char(' ') + tr("A break comes after pair %1.").arg(where.breakAfter);
    return pilot + text;
}

void StageWindow::refreshTrouble() {
    const auto& trouble = controller_.trouble();
    if (!trouble) {
        troublePanel_->hide();
        return;
    }
    const QString reason =
        trouble->error.code == "file.disk-full" ? tr("The disk is full.") : fromUtf8(trouble->error.message);
    const QString remedy = trouble->error.code == "file.disk-full" ? tr("Free some space, then try again.")
                                                                   : fromUtf8(trouble->error.remedy);
    troublePanel_->setText(trouble->text, reason + QLatin1Char(' ') + tr("Nothing given before is lost.") +
                                              QLatin1Char(' ') + remedy + QLatin1Char('\n') +
                                              tr("Speak to the experimenter."));
    stopPanel_->hide();
    troublePanel_->open();
}

void StageWindow::choose(Side side) {
    if (!canAnswer())
        return;
    chosen_ = side;
    refresh();
}

void StageWindow::pressConfidence(int level) {
    if (chosen_ == Side::None || !canAnswer() || level > controller_.state().began.protocol.levels)
        return;
    controller_.answer(chosen_ == Side::Left ? level : -level);
}

void StageWindow::pressUndo() {
    if (controller_.undo())
        return;
    if (chosen_ != Side::None && canAnswer()) {
        chosen_ = Side::None;
        setFocus(Qt::OtherFocusReason);
        refresh();
    }
}

void StageWindow::pressReplay() {
    if (replay_->isEnabled() && view_ == View::Pair)
        controller_.playback().replay();
}

void StageWindow::pressPageButton() {
    if (controller_.prompt().kind == PromptKind::Paused)
        controller_.goOn();
    else
        controller_.next();
}

void StageWindow::askToStop() {
    if (controller_.state().ended || controller_.trouble() || stopPanel_->isVisible())
        return;
    controller_.playback().hold();
    stopPanel_->open();
}

void StageWindow::closeStopQuestion() {
    stopPanel_->hide();
    controller_.playback().release();
    setFocus(Qt::OtherFocusReason);
    frames_.start();
    refresh();
}

bool StageWindow::panelKey(int key) {
    if (troublePanel_->isVisible()) {
        if (key == Qt::Key_Return || key == Qt::Key_Enter)
            controller_.tryAgain();
        return true;
    }
    if (stopPanel_->isVisible()) {
        if (key == Qt::Key_Escape)
            closeStopQuestion();
        return true;
    }
    return false;
}

void StageWindow::keyPressEvent(QKeyEvent* event) {
    const int key = event->key();
    if (event->isAutoRepeat() || panelKey(key))
        return;
    if (key == Qt::Key_Escape) {
        askToStop();
        return;
    }
    if (view_ == View::Pair) {
        pairKey(key);
        return;
    }
    const bool isPaused = controller_.prompt().kind == PromptKind::Paused;
    const bool isEnter = key == Qt::Key_Return || key == Qt::Key_Enter;
    if (isPaused ? key == Qt::Key_Space || isEnter : isEnter)
        pressPageButton();
}

void StageWindow::pairKey(int key) {
    switch (key) {
    case Qt::Key_Space:
    case Qt::Key_R:
        pressReplay();
        break;
    case Qt::Key_P:
        controller_.pause("participant");
        break;
    case Qt::Key_Left:
        choose(Side::Left);
        break;
    case Qt::Key_Right:
        choose(Side::Right);
        break;
    case Qt::Key_0:
        if (cannotTell_ && canAnswer())
            controller_.answer(0);
        break;
    case Qt::Key_Return:
    case Qt::Key_Enter:
        controller_.next();
        break;
    case Qt::Key_Backspace:
        pressUndo();
        break;
    default:
        if (key > Qt::Key_0 && key <= Qt::Key_9)
            pressConfidence(key - Qt::Key_0);
    }
}

void StageWindow::resizeEvent(QResizeEvent*) {
    arrange();
}

void StageWindow::paintEvent(QPaintEvent*) {
    QPainter painter(this);
    painter.fillRect(rect(), QColor::fromRgb(stage_grey::kGround));
}

void StageWindow::closeEvent(QCloseEvent* event) {
    if (controller_.state().ended) {
        event->accept();
        return;
    }
    // Closing the window would leave the participant before nothing: it asks instead.
    event->ignore();
    askToStop();
}

} // namespace whichway
