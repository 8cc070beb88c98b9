// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <QSizeF>
#include <QString>
#include <functional>

class QChart;
class QPainter;

namespace whichway {

/// What `paint` draws into a canvas of `size` px, as one <svg> element that can stand in an HTML or XML page:
/// without prologue, script or reference to anything outside. Text stays text, in the page's own font.
/// @param name what the picture shows, for readers that do not see it
QString vectorImage(const QSizeF& size, const QString& name, const std::function<void(QPainter&)>& paint);

/// The chart at that size. It need not be shown anywhere.
QString vectorImage(QChart& chart, const QSizeF& size, const QString& name);

} // namespace whichway
