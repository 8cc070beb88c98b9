// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/bench/session_line.h"

#include "ui/look/icons.h"
#include "ui/look/numbers.h"
#include "ui/look/tokens.h"

#include <QPainter>
#include <algorithm>
#include <cmath>

namespace whichway {
namespace {

constexpr int kLabels = 124; ///< width of the row headings
constexpr int kRight = 16;
constexpr int kMarksY = 22, kTimesTop = 52, kTimesBottom = 128, kWaitsTop = 148, kWaitsBottom = 186,
              kKeyY = 214;
constexpr double kLeastTime = 0.3, kMostTime = 30, kMostWait = 1; ///< s

void drawMark(QPainter& painter, const QPointF& centre, TrialKind kind, double size, const QPen& pen,
              const QBrush& brush) {
    painter.save();
    painter.translate(centre);
    painter.setPen(pen);
    painter.setBrush(brush);
    painter.drawPath(trialMark(kind, size));
    painter.restore();
}

double timeY(double seconds) {
    const double share =
        std::log(std::clamp(seconds, kLeastTime, kMostTime) / kLeastTime) / std::log(kMostTime / kLeastTime);
    return kTimesBottom - share * (kTimesBottom - kTimesTop);
}

} // namespace

SessionLine::SessionLine(QWidget* parent) : QWidget(parent) {
    setObjectName(QStringLiteral("bench.sessionLine"));
    setAccessibleName(tr("Trials of the session"));
    setSizePolicy(QSizePolicy::Expanding, QSizePolicy::Fixed);
}

QSize SessionLine::sizeHint() const {
    return {900, kKeyY + 16};
}

void SessionLine::setState(const SessionState& state) {
    marks_.clear();
    std::size_t queued = state.queue.size();
    for (std::size_t i = 0; i < state.began.schedule.size(); ++i) {
        const int number = static_cast<int>(i) + 1;
        Mark mark{.kind = state.began.schedule[i].kind};
        const auto answer = std::find_if(state.answers.begin(), state.answers.end(),
                                         [&](const AnsweredTrial& one) { return one.trial == number; });
        if (answer != state.answers.end()) {
            mark.stage = Stage::Answered;
            mark.responseTime = answer->responseTime;
            mark.wait = answer->wait;
        } else if (state.onStage && state.onStage->trial == number) {
            mark.stage = Stage::OnStage;
            mark.wait = state.onStage->wait;
        } else if (mark.kind != TrialKind::Main) {
            mark.stage = Stage::Planned;
        } else if (queued > 0) {
            mark.stage = Stage::Planned;
            --queued;
        }
        marks_.push_back(mark);
    }
    longestWait_ = state.longestWait;
    setAccessibleDescription(tr("%1 of %2 trials answered").arg(state.answers.size()).arg(marks_.size()));
    update();
}

double SessionLine::columnX(int column) const {
    const double columns = std::max<double>(1, static_cast<double>(marks_.size()));
    return kLabels + (column + 0.5) * (width() - kLabels - kRight) / columns;
}

void SessionLine::paintEvent(QPaintEvent*) {
    QPainter painter(this);
    painter.setRenderHint(QPainter::Antialiasing);
    const Colours& c = coloursOf(palette());
    const double half =
        (width() - kLabels - kRight) / std::max<double>(1, static_cast<double>(marks_.size())) / 2;
    for (std::size_t i = 0; i < marks_.size(); ++i)
        if (marks_[i].stage == Stage::OnStage)
            painter.fillRect(QRectF(columnX(static_cast<int>(i)) - half, 4, 2 * half, kWaitsBottom - 4),
                             c.soft);
    paintTimes(painter);
    paintWaits(painter);
    paintMarks(painter);
    paintKey(painter);
}

void SessionLine::paintMarks(QPainter& painter) const {
    const Colours& c = coloursOf(palette());
    painter.setFont(fontOf(TextRole::Heading));
    painter.setPen(c.ink);
    painter.drawText(QRectF(0, kMarksY - 14, kLabels, 28), Qt::AlignVCenter, tr("Trials"));
    const double room =
        (width() - kLabels - kRight) / std::max<double>(1, static_cast<double>(marks_.size()));
    const double size = std::clamp(room * 0.62, 5.0, 12.0);
    for (std::size_t i = 0; i < marks_.size(); ++i) {
        const QPointF centre(columnX(static_cast<int>(i)), kMarksY);
        switch (marks_[i].stage) {
        case Stage::Answered:
            drawMark(painter, centre, marks_[i].kind, size, Qt::NoPen, c.ink2);
            break;
        case Stage::OnStage:
            drawMark(painter, centre, marks_[i].kind, size * 1.3, Qt::NoPen, c.accent);
            break;
        case Stage::Planned:
            drawMark(painter, centre, marks_[i].kind, size, QPen(c.ink2, 1.4), Qt::NoBrush);
            break;
        case Stage::NotPlanned:
            drawMark(painter, centre, marks_[i].kind, size, QPen(c.ink3, 1, Qt::DotLine), Qt::NoBrush);
            break;
        }
    }
}

void SessionLine::paintTimes(QPainter& painter) const {
    const Colours& c = coloursOf(palette());
    painter.setFont(fontOf(TextRole::Heading));
    painter.setPen(c.ink);
    painter.drawText(QRectF(0, 74, kLabels, 20), Qt::AlignVCenter, tr("Response"));
    painter.setFont(fontOf(TextRole::Label));
    painter.setPen(c.ink2);
    painter.drawText(QRectF(0, 92, kLabels, 20), Qt::AlignVCenter, tr("time, s"));
    for (const double tick : {0.3, 1.0, 3.0, 10.0, 30.0}) {
        const double y = std::round(timeY(tick)) + 0.5;
        painter.setPen(QPen(c.line, 1));
        painter.drawLine(QPointF(kLabels, y), QPointF(width() - kRight, y));
        painter.setPen(c.ink3);
        painter.drawText(QRectF(kLabels - 48, y - 10, 40, 20), Qt::AlignRight | Qt::AlignVCenter,
                         tick < 1 ? numberText(tick, 1) : numberText(tick, 0));
    }
    QPolygonF course;
    for (std::size_t i = 0; i < marks_.size(); ++i)
        if (marks_[i].responseTime >= 0)
            course << QPointF(columnX(static_cast<int>(i)), timeY(marks_[i].responseTime));
    painter.setPen(QPen(c.edge, 1));
    painter.setBrush(Qt::NoBrush);
    painter.drawPolyline(course);
    for (std::size_t i = 0; i < marks_.size(); ++i)
        if (marks_[i].responseTime >= 0)
            drawMark(painter, {columnX(static_cast<int>(i)), timeY(marks_[i].responseTime)}, marks_[i].kind,
                     7, Qt::NoPen, c.ink2);
}

void SessionLine::paintWaits(QPainter& painter) const {
    const Colours& c = coloursOf(palette());
    painter.setFont(fontOf(TextRole::Heading));
    painter.setPen(c.ink);
    painter.drawText(QRectF(0, kWaitsTop - 4, kLabels, 20), Qt::AlignVCenter, tr("Wait before"));
    painter.setFont(fontOf(TextRole::Label));
    painter.setPen(c.ink2);
    painter.drawText(QRectF(0, kWaitsTop + 14, kLabels, 20), Qt::AlignVCenter, tr("pair, s"));
    for (const double tick : {0.0, 1.0}) {
        const double y = std::round(kWaitsBottom - tick / kMostWait * (kWaitsBottom - kWaitsTop)) + 0.5;
        painter.setPen(QPen(tick == 0 ? c.edge : c.line, 1));
        painter.drawLine(QPointF(kLabels, y), QPointF(width() - kRight, y));
        painter.setPen(c.ink3);
        painter.drawText(QRectF(kLabels - 48, y - 10, 40, 20), Qt::AlignRight | Qt::AlignVCenter,
                         numberText(tick, 0));
    }
    for (std::size_t i = 0; i < marks_.size(); ++i) {
        if (marks_[i].wait < 0)
            continue;
        const double height =
            std::max(2.0, std::min(marks_[i].wait, kMostWait) / kMostWait * (kWaitsBottom - kWaitsTop));
        painter.fillRect(QRectF(columnX(static_cast<int>(i)) - 3, kWaitsBottom - height, 6, height), c.ink2);
    }
}

void SessionLine::paintKey(QPainter& painter) const {
    const Colours& c = coloursOf(palette());
    painter.setFont(fontOf(TextRole::Label));
    const QFontMetrics metrics(painter.font());
    double x = kLabels + 8;
    const auto entry = [&](TrialKind kind, const QPen& pen, const QBrush& brush, const QString& word) {
        drawMark(painter, {x, kKeyY}, kind, 10, pen, brush);
        painter.setPen(c.ink2);
        const double wide = metrics.horizontalAdvance(word);
        painter.drawText(QRectF(x + 13, kKeyY - 10, wide + 2, 20), Qt::AlignVCenter, word);
        x += 13 + wide + 26;
    };
    for (const auto kind : {TrialKind::Practice, TrialKind::Main, TrialKind::HeldOut, TrialKind::Repeat,
                            TrialKind::Catch, TrialKind::Identical})
        entry(kind, Qt::NoPen, c.ink2, trialKindText(kind));
    x += 24;
    entry(TrialKind::Main, Qt::NoPen, c.ink2, tr("answered"));
    entry(TrialKind::Main, Qt::NoPen, c.accent, tr("on the stage"));
    entry(TrialKind::Main, QPen(c.ink2, 1.4), Qt::NoBrush, tr("planned"));
    entry(TrialKind::Main, QPen(c.ink3, 1, Qt::DotLine), Qt::NoBrush, tr("not yet planned"));
}

} // namespace whichway
