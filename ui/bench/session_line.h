// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/journal/session_state.h"

#include <QWidget>

namespace whichway {

/// The whole session along one axis: a mark per trial, the response times, and the waits before the pairs.
/// Blind: it knows neither what was chosen nor how sure.
class SessionLine final : public QWidget {
    Q_OBJECT
public:
    explicit SessionLine(QWidget* parent = nullptr);

    void setState(const SessionState& state);
    QSize sizeHint() const override;

protected:
    void paintEvent(QPaintEvent* event) override;

private:
    enum class Stage { Answered, OnStage, Planned, NotPlanned };
    struct Mark {
        TrialKind kind = TrialKind::Main;
        Stage stage = Stage::NotPlanned;
        double responseTime = -1; ///< s, negative: none
        double wait = -1;         ///< s, negative: none
    };

    double columnX(int column) const;
    void paintMarks(QPainter& painter) const;
    void paintTimes(QPainter& painter) const;
    void paintWaits(QPainter& painter) const;
    void paintKey(QPainter& painter) const;

    std::vector<Mark> marks_; ///< in the order of the schedule
    double longestWait_ = 0;
};

} // namespace whichway
