// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <QAbstractButton>
#include <QWidget>
#include <array>

namespace whichway {

enum class Stop { Study, Rehearsal, Bench, Review, Cohort };
inline constexpr int kStops = 5;

/// One stop of the route: a point on the line and its name. Filled: you are here.
class RouteStop final : public QAbstractButton {
    Q_OBJECT
public:
    RouteStop(const QString& name, const QString& text, const QKeySequence& key, QWidget* parent);
    void setRunning(bool running); ///< a still ring: a session runs here
    QSize sizeHint() const override;

protected:
    void paintEvent(QPaintEvent* event) override;
    void keyPressEvent(QKeyEvent* event) override;

private:
    bool running_ = false;
};

/// The way from a study folder to its results, and the navigation of the main window: five stops, always in
/// this order, Ctrl+1 to Ctrl+5.
class Route final : public QWidget {
    Q_OBJECT
public:
    explicit Route(QWidget* parent = nullptr);
    void setCurrent(Stop stop);
    void setRunning(bool running); ///< marks the bench
    QSize sizeHint() const override;

Q_SIGNALS:
    void stopChosen(whichway::Stop stop);

protected:
    void paintEvent(QPaintEvent* event) override;
    void resizeEvent(QResizeEvent* event) override;

private:
    std::array<RouteStop*, kStops> stops_ = {};
};

} // namespace whichway
