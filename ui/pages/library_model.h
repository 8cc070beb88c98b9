// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/study/study.h"

#include <QAbstractTableModel>
#include <QStyledItemDelegate>

namespace whichway {

/// The main library as a table: a row a motion; its name, its path, its length in time, and its features in
/// their units. `study` must outlive it.
class LibraryModel final : public QAbstractTableModel {
    Q_OBJECT
public:
    static constexpr int kName = 0, kPath = 1, kDuration = 2, kFirstFeature = 3;

    explicit LibraryModel(const Study& study, QObject* parent = nullptr);

    int rowCount(const QModelIndex& parent = {}) const override;
    int columnCount(const QModelIndex& parent = {}) const override;
    /// Numbers as they are written for display, as they are under Qt::UserRole (for sorting).
    QVariant data(const QModelIndex& index, int role = Qt::DisplayRole) const override;
    QVariant headerData(int section, Qt::Orientation orientation, int role = Qt::DisplayRole) const override;

    const Trajectory* motionAt(int row) const;

private:
    const Study& study_;
};

/// Draws a motion's path from above into a cell, all paths of a table at one scale.
class PathDelegate final : public QStyledItemDelegate {
    Q_OBJECT
public:
    PathDelegate(const Study& study, QObject* parent);
    void paint(QPainter* painter, const QStyleOptionViewItem& option,
               const QModelIndex& index) const override;
    QSize sizeHint(const QStyleOptionViewItem& option, const QModelIndex& index) const override;

private:
    const Study& study_;
    double left_ = 0, width_ = 1, middle_ = 0; ///< m, of what a cell shows
};

} // namespace whichway
