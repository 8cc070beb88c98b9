// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/pages/route.h"

#include "ui/look/tokens.h"

#include <QKeyEvent>
#include <QPainter>
#include <QShortcut>
#include <algorithm>

namespace whichway {
namespace {

constexpr int kPointY = 18;

} // namespace

RouteStop::RouteStop(const QString& name, const QString& text, const QKeySequence& key, QWidget* parent)
    : QAbstractButton(parent) {
    setObjectName(name);
    setText(text);
    setAccessibleName(text);
    setToolTip(key.toString(QKeySequence::NativeText));
    auto* shortcut = new QShortcut(key, this);
    connect(shortcut, &QShortcut::activated, this, &QAbstractButton::click);
    setCheckable(true);
    setAutoExclusive(true);
    setFocusPolicy(Qt::TabFocus);
    setAttribute(Qt::WA_Hover);
}

void RouteStop::setRunning(bool running) {
    running_ = running;
    setAccessibleDescription(running ? tr("a session is running") : QString());
    update();
}

QSize RouteStop::sizeHint() const {
    QFont bold = fontOf(TextRole::Text);
    bold.setBold(true);
    return {std::max(112, QFontMetrics(bold).horizontalAdvance(text()) + 24), space::kRoute};
}

void RouteStop::keyPressEvent(QKeyEvent* event) {
    if (event->key() == Qt::Key_Return || event->key() == Qt::Key_Enter)
        click();
    else
        QAbstractButton::keyPressEvent(event);
}

void RouteStop::paintEvent(QPaintEvent*) {
    const Colours& c = coloursOf(palette());
    QPainter painter(this);
    painter.setRenderHint(QPainter::Antialiasing);
    const QPointF point(width() / 2.0, kPointY);
    const QColor dot = isChecked() || underMouse() ? c.accent : c.edge;
    painter.setPen(QPen(dot, 1.5));
    painter.setBrush(isChecked() ? c.accent : c.ground);
    painter.drawEllipse(point, isChecked() ? 6 : 4.5, isChecked() ? 6 : 4.5);
    if (running_) {
        painter.setPen(QPen(c.accent, 1.5));
        painter.setBrush(Qt::NoBrush);
        painter.drawEllipse(point, 10, 10);
    }
    QFont font = fontOf(TextRole::Text);
    font.setBold(isChecked());
    painter.setFont(font);
    painter.setPen(isChecked() ? c.ink : c.ink2);
    painter.drawText(QRectF(0, kPointY + 10, width(), height() - kPointY - 12),
                     Qt::AlignHCenter | Qt::AlignTop, text());
    if (hasFocus()) {
        painter.setPen(QPen(c.accent, 2));
        painter.setBrush(Qt::NoBrush);
        painter.drawRoundedRect(QRectF(rect()).adjusted(2, 2, -2, -2), space::kRadius, space::kRadius);
    }
}

Route::Route(QWidget* parent) : QWidget(parent) {
    setObjectName(QStringLiteral("route"));
    setAccessibleName(tr("Pages"));
    const struct {
        const char* name;
        QString text;
    } stops[kStops] = {{"route.study", tr("Study")},
                       {"route.rehearsal", tr("Rehearsal")},
                       {"route.bench", tr("Bench")},
                       {"route.review", tr("Review")},
                       {"route.cohort", tr("Cohort")}};
    for (int i = 0; i < kStops; ++i) {
        auto* stop = new RouteStop(QString::fromLatin1(stops[i].name), stops[i].text,
                                   QKeySequence(static_cast<int>(Qt::CTRL) | (Qt::Key_1 + i)), this);
        connect(stop, &RouteStop::clicked, this, [this, i] { Q_EMIT stopChosen(static_cast<Stop>(i)); });
        stops_[static_cast<std::size_t>(i)] = stop;
    }
    setSizePolicy(QSizePolicy::Fixed, QSizePolicy::Fixed);
    setCurrent(Stop::Study);
}

void Route::setCurrent(Stop stop) {
    stops_[static_cast<std::size_t>(stop)]->setChecked(true);
}

void Route::setRunning(bool running) {
    stops_[static_cast<std::size_t>(Stop::Bench)]->setRunning(running);
}

QSize Route::sizeHint() const {
    int width = 0;
    for (const RouteStop* stop : stops_)
        width = std::max(width, stop->sizeHint().width());
    return {width * kStops, space::kRoute};
}

void Route::resizeEvent(QResizeEvent*) {
    const int each = width() / kStops;
    for (int i = 0; i < kStops; ++i)
        stops_[static_cast<std::size_t>(i)]->setGeometry(i * each, 0, each, height());
}

void Route::paintEvent(QPaintEvent*) {
    QPainter painter(this);
    painter.setPen(QPen(coloursOf(palette()).edge, 1.5));
    const int each = width() / kStops;
    painter.drawLine(each / 2, kPointY, width() - each / 2, kPointY);
}

} // namespace whichway
