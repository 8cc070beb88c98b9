// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/journal/events.h"
#include "ui/motion/motion_painter.h"

#include <QWidget>
#include <functional>
#include <memory>

namespace whichway {

/// Two equal panes side by side. One paint event draws both sides for one instant, so they cannot drift
/// apart.
class PairView : public QWidget {
    Q_OBJECT
public:
    /// @param instant the seconds into both motions; asked once per painting
    PairView(const QString& name, std::shared_ptr<const MotionPainter> painter,
             std::function<double()> instant, QWidget* parent = nullptr);

    /// Both motions must outlive their showing.
    void show(const Trajectory* left, const Trajectory* right);
    /// Two blank panes.
    void clear();
    void setGap(int pixels);
    /// Room around each pane for the frame of the chosen side.
    void setFrameRoom(int pixels);
    void setChosen(Side side);
    /// The largest height that a view of `width` makes use of.
    int heightFor(int width) const;

    QRect leftPane() const { return pane(0); }
    QRect rightPane() const { return pane(1); }

protected:
    void paintEvent(QPaintEvent* event) override;

private:
    QRect pane(int side) const;

    std::shared_ptr<const MotionPainter> painter_;
    std::function<double()> instant_;
    const Trajectory* left_ = nullptr;
    const Trajectory* right_ = nullptr;
    int gap_ = 12;
    int frameRoom_ = 0;
    Side chosen_ = Side::None;
};

} // namespace whichway
