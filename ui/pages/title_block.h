// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <QList>
#include <QPair>
#include <QWidget>

namespace whichway {

/// The strip at the foot of a page that says where its numbers come from, as on a drawing.
class TitleBlock final : public QWidget {
    Q_OBJECT
public:
    explicit TitleBlock(QWidget* parent = nullptr);
    /// Pairs of a name and what it is.
    void setEntries(const QList<QPair<QString, QString>>& entries);
    QSize sizeHint() const override;

protected:
    void paintEvent(QPaintEvent* event) override;

private:
    QList<QPair<QString, QString>> entries_;
};

} // namespace whichway
