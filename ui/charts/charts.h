// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "ui/look/tokens.h"

#include <QByteArray>
#include <QSizeF>
#include <QString>
#include <QtCharts/QChart>
#include <memory>
#include <vector>

namespace whichway {

// Charts that pages and the report share. Each is made as a value of the caller's; ownership of the parts is
// the chart's.

/// One estimate: a dimension line from `low` to `high` with a dot at `median`; hollow and grey where not
/// determined.
struct IntervalRow {
    QString label = {};
    double low = 0, median = 0, high = 0;
    bool determined = true;
};

struct IntervalAxis {
    double least = -1, greatest = 1;
    bool logarithmic = false;
    double reference = 0;                 ///< drawn as an edge-coloured line, unless logarithmic
    QString lessWord = {}, moreWord = {}; ///< beside the reference, at the top
};

std::unique_ptr<QChart> intervalsChart(const std::vector<IntervalRow>& rows, const IntervalAxis& axis,
                                       const Colours& colours);

/// A curve over a count, with its band.
struct CurvePoint {
    double at = 0, low = 0, median = 0, high = 0;
};
struct Curve {
    QString label = {}; ///< stands at the line's end
    std::vector<CurvePoint> points = {};
};

/// At most four curves: beyond, use small multiples.
std::unique_ptr<QChart> curvesChart(const std::vector<Curve>& curves, double least, double greatest,
                                    const QString& acrossLabel, const Colours& colours);

/// The chart drawn as SVG, ready to stand inside an HTML page (no XML prologue).
QByteArray chartSvg(std::unique_ptr<QChart> chart, const QSizeF& size, const QString& description);

} // namespace whichway
