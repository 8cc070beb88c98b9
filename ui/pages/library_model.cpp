// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/pages/library_model.h"

#include "ui/look/numbers.h"
#include "ui/look/tokens.h"

#include <QPainter>
#include <QPainterPath>
#include <algorithm>
#include <cmath>

namespace whichway {
namespace {

constexpr int kSketchWidth = 170, kSketchMargin = 8;

} // namespace

LibraryModel::LibraryModel(const Study& study, QObject* parent)
    : QAbstractTableModel(parent), study_(study) {}

int LibraryModel::rowCount(const QModelIndex& parent) const {
    return parent.isValid() ? 0 : static_cast<int>(study_.protocol.table.motions.size());
}

int LibraryModel::columnCount(const QModelIndex& parent) const {
    return parent.isValid() ? 0 : kFirstFeature + static_cast<int>(study_.protocol.features.size());
}

const Trajectory* LibraryModel::motionAt(int row) const {
    return study_.motion(study_.protocol.table.motions[static_cast<std::size_t>(row)]);
}

QVariant LibraryModel::data(const QModelIndex& index, int role) const {
    if (!index.isValid())
        return {};
    if (role == Qt::TextAlignmentRole)
        return static_cast<int>((index.column() < kDuration ? Qt::AlignLeft : Qt::AlignRight) |
                                Qt::AlignVCenter);
    if (role != Qt::DisplayRole && role != Qt::UserRole)
        return {};
    const auto row = static_cast<std::size_t>(index.row());
    const bool shown = role == Qt::DisplayRole;
    const auto number = [&](double value) { return shown ? QVariant(shortNumber(value)) : QVariant(value); };
    if (index.column() == kName)
        return QString::fromStdString(study_.protocol.table.motions[row]);
    if (index.column() == kPath)
        return {};
    if (index.column() == kDuration) {
        const Trajectory* motion = motionAt(index.row());
        return motion ? number(motion->duration()) : QVariant();
    }
    return number(study_.protocol.table.raw(row, static_cast<std::size_t>(index.column() - kFirstFeature)));
}

QVariant LibraryModel::headerData(int section, Qt::Orientation orientation, int role) const {
    if (orientation != Qt::Horizontal || section < 0 || section >= columnCount())
        return {};
    if (role == Qt::TextAlignmentRole)
        return static_cast<int>((section < kDuration ? Qt::AlignLeft : Qt::AlignRight) | Qt::AlignBottom |
                                static_cast<int>(Qt::TextWordWrap));
    if (role != Qt::DisplayRole && role != Qt::ToolTipRole)
        return {};
    switch (section) {
    case kName:
        return tr("Motion");
    case kPath:
        return tr("Path");
    case kDuration:
        return tr("Length\ns");
    default:
        break;
    }
    const FeatureDefinition& feature =
        study_.protocol.features[static_cast<std::size_t>(section - kFirstFeature)];
    const QString label = QString::fromStdString(feature.label);
    const QString unit = feature.unit == "1" ? tr("ratio") : unitText(feature.unit);
    return label + QLatin1Char('\n') + unit;
}

PathDelegate::PathDelegate(const Study& study, QObject* parent) : QStyledItemDelegate(parent), study_(study) {
    double low = INFINITY, high = -INFINITY, bottom = INFINITY, top = -INFINITY;
    for (const Trajectory& motion : study.motions)
        for (std::size_t i = 0; i < motion.x.size(); ++i) {
            low = std::min(low, motion.x[i]), high = std::max(high, motion.x[i]);
            bottom = std::min(bottom, motion.y[i]), top = std::max(top, motion.y[i]);
        }
    if (low <= high) {
        left_ = low;
        width_ = std::max({high - low, (top - bottom) * 5, 1e-6});
        middle_ = (bottom + top) / 2;
    }
}

QSize PathDelegate::sizeHint(const QStyleOptionViewItem&, const QModelIndex&) const {
    return {kSketchWidth + 2 * kSketchMargin, space::kRow};
}

void PathDelegate::paint(QPainter* painter, const QStyleOptionViewItem& option,
                         const QModelIndex& index) const {
    const Colours& c = coloursOf(option.palette);
    if (option.state & QStyle::State_Selected)
        painter->fillRect(option.rect, c.soft);
    const auto name = index.siblingAtColumn(LibraryModel::kName).data().toString().toStdString();
    const Trajectory* motion = study_.motion(name);
    if (!motion)
        return;
    painter->save();
    painter->setClipRect(option.rect);
    painter->setRenderHint(QPainter::Antialiasing);
    const double scale = (option.rect.width() - 2.0 * kSketchMargin) / width_;
    const auto place = [&](double x, double y) {
        return QPointF(option.rect.left() + kSketchMargin + (x - left_) * scale,
                       option.rect.center().y() - (y - middle_) * scale);
    };
    QPolygonF path;
    for (std::size_t i = 0; i < motion->x.size(); ++i)
        path << place(motion->x[i], motion->y[i]);
    painter->setPen(QPen(c.ink2, 1.2));
    painter->setBrush(Qt::NoBrush);
    painter->drawPolyline(path);
    painter->setPen(Qt::NoPen);
    painter->setBrush(c.ink2);
    for (int i = 0; i * 0.5 <= motion->duration() + 1e-9; ++i) {
        const Instant dot = instantAt(*motion, i * 0.5);
        painter->drawEllipse(place(dot.x, dot.y), 1.6, 1.6);
    }
    painter->restore();
}

} // namespace whichway
