// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <QWidget>
#include <functional>

namespace whichway {

/// The thin bar under both panes: how far the two motions have played.
class StageBar final : public QWidget {
public:
    /// @param share how far, 0 to 1; asked at each painting
    StageBar(std::function<double()> share, QWidget* parent);

protected:
    void paintEvent(QPaintEvent* event) override;

private:
    std::function<double()> share_;
};

} // namespace whichway
