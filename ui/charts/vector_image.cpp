// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/charts/vector_image.h"

#include <QBuffer>
#include <QChart>
#include <QCoreApplication>
#include <QGraphicsLayout>
#include <QGraphicsScene>
#include <QPainter>
#include <QRegularExpression>
#include <QSvgGenerator>

namespace whichway {
namespace {

/// Characters that XML 1.0 does not allow at all (section 2.2) become U+FFFD.
QString allowedInXml(QString text) {
    for (QChar& c : text)
        if ((c < QLatin1Char(' ') && c != QLatin1Char('\n') && c != QLatin1Char('\r') &&
             c != QLatin1Char('\t')) ||
            c == QChar(0xfffe) || c == QChar(0xffff))
            c = QChar(0xfffd);
    return text;
}

/// The generator's own head holds a prologue, a size in millimetres and a comment; this leaves the drawing.
QString drawingOf(const QByteArray& document) {
    const QString text = QString::fromUtf8(document);
    const auto element = text.indexOf(QLatin1String("<svg"));
    const auto begin = text.indexOf(QLatin1Char('>'), element) + 1;
    QString drawing = text.mid(begin, text.lastIndexOf(QLatin1String("</svg>")) - begin);
    static const QRegularExpression kHead(QStringLiteral("<(title|desc)>.*?</\\1>"),
                                          QRegularExpression::DotMatchesEverythingOption);
    drawing.remove(kHead);
    // The page's font is as good as the machine's that drew it, and there for sure.
    static const QRegularExpression kFamily(QStringLiteral("\\sfont-family=\"[^\"]*\""));
    drawing.remove(kFamily);
    // A true minus may come from another font than the digits behind it; placed apart they would gape.
    static const QRegularExpression kApart(QStringLiteral("\u2212</text>\\s*<text[^>]*>"));
    drawing.replace(kApart, QString(QChar(0x2212)));
    return allowedInXml(drawing.trimmed());
}

} // namespace

QString vectorImage(const QSizeF& size, const QString& name, const std::function<void(QPainter&)>& paint) {
    QByteArray document;
    QBuffer buffer(&document);
    QSvgGenerator generator;
    generator.setOutputDevice(&buffer);
    generator.setResolution(96);
    generator.setSize(size.toSize());
    generator.setViewBox(QRectF(QPointF(0, 0), size));
    QPainter painter(&generator);
    painter.setRenderHint(QPainter::Antialiasing);
    paint(painter);
    painter.end();
    return QStringLiteral("<svg xmlns=\"http://www.w3.org/2000/svg\" viewBox=\"0 0 %1 %2\" width=\"%1\" "
                          "height=\"%2\" role=\"img\" aria-label=\"%3\">%4</svg>")
        .arg(QString::number(size.width()), QString::number(size.height()),
             allowedInXml(name).toHtmlEscaped(), drawingOf(document));
}

QString vectorImage(QChart& chart, const QSizeF& size, const QString& name) {
    QGraphicsScene scene(QRectF(QPointF(0, 0), size));
    scene.addItem(&chart);
    chart.resize(size);
    chart.layout()->activate();
    QCoreApplication::sendPostedEvents(nullptr, QEvent::LayoutRequest);
    QString image = vectorImage(
        size, name, [&](QPainter& painter) { scene.render(&painter, QRectF(), scene.sceneRect()); });
    scene.removeItem(&chart);
    return image;
}

} // namespace whichway
