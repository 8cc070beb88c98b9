// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/look/icons.h"

#include <QCoreApplication>
#include <QFile>
#include <QPainter>
#include <QPixmap>
#include <QSvgRenderer>

namespace whichway {
namespace {

const char* fileOf(Icon icon) {
    switch (icon) {
    case Icon::Way:
        return "way";
    case Icon::Pause:
        return "pause";
    case Icon::Stop:
        return "stop";
    case Icon::Note:
        return "note";
    case Icon::Replay:
        return "replay";
    case Icon::Undo:
        return "undo";
    case Icon::Eye:
        return "eye";
    case Icon::Shut:
        return "shut";
    case Icon::Warn:
        return "warn";
    case Icon::Bad:
        return "bad";
    case Icon::Ok:
        return "ok";
    case Icon::Lock:
        return "lock";
    case Icon::Person:
        return "person";
    case Icon::More:
        return "more";
    case Icon::File:
        return "file";
    }
    return "bad";
}

} // namespace

void drawIcon(QPainter& painter, const QRectF& rect, Icon icon, const QColor& colour) {
    QFile file(QStringLiteral(":/icons/%1.svg").arg(QLatin1String(fileOf(icon))));
    if (!file.open(QIODevice::ReadOnly))
        return;
    QByteArray drawing = file.readAll();
    drawing.replace("#4A5451",
                    colour.name().toLatin1()); // the one colour of every drawing in resources/icons
    QSvgRenderer renderer(drawing);
    renderer.render(&painter, rect);
}

QIcon iconOf(Icon icon, const QColor& colour) {
    QIcon result;
    for (const int size : {20, 40}) {
        QPixmap pixmap(size, size);
        pixmap.fill(Qt::transparent);
        QPainter painter(&pixmap);
        painter.setRenderHint(QPainter::Antialiasing);
        drawIcon(painter, QRectF(0, 0, size, size), icon, colour);
        painter.end();
        result.addPixmap(pixmap);
    }
    return result;
}

QPainterPath trialMark(TrialKind kind, double size) {
    const double r = size / 2;
    QPainterPath path;
    const auto polygon = [&](std::initializer_list<QPointF> points) {
        path.addPolygon(QPolygonF(QList<QPointF>(points)));
        path.closeSubpath();
    };
    switch (kind) {
    case TrialKind::Practice:
        path.addEllipse(QPointF(0, 0), r * 0.92, r * 0.92);
        break;
    case TrialKind::Main:
        path.addRect(QRectF(-r * 0.86, -r * 0.86, r * 1.72, r * 1.72));
        break;
    case TrialKind::HeldOut:
        polygon({{0, -r * 1.2}, {r * 1.2, 0}, {0, r * 1.2}, {-r * 1.2, 0}});
        break;
    case TrialKind::Repeat:
        polygon({{-r * 1.05, -r * 0.9}, {0, 0}, {-r * 1.05, r * 0.9}});
        polygon({{r * 1.05, -r * 0.9}, {0, 0}, {r * 1.05, r * 0.9}});
        break;
    case TrialKind::Catch:
        polygon({{0, -r * 1.12}, {r * 1.14, r * 0.9}, {-r * 1.14, r * 0.9}});
        break;
    case TrialKind::Identical:
        path.addRect(QRectF(-r, -r * 0.86, 2 * r, r * 0.6));
        path.addRect(QRectF(-r, r * 0.26, 2 * r, r * 0.6));
        break;
    }
    return path;
}

QString trialKindText(TrialKind kind) {
    switch (kind) {
    case TrialKind::Practice:
        return QCoreApplication::translate("trials", "practice");
    case TrialKind::Main:
        return QCoreApplication::translate("trials", "main");
    case TrialKind::HeldOut:
        return QCoreApplication::translate("trials", "held-out");
    case TrialKind::Repeat:
        return QCoreApplication::translate("trials", "repeat");
    case TrialKind::Catch:
        return QCoreApplication::translate("trials", "catch");
    case TrialKind::Identical:
        return QCoreApplication::translate("trials", "identical");
    }
    return {};
}

} // namespace whichway
