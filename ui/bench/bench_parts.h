// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <QFrame>
#include <QString>
#include <functional>

class QHBoxLayout;
class QLabel;
class QVBoxLayout;

namespace whichway {

class KeyButton;

/// A thin rule between two parts of a page.
QFrame* makeRule();

/// Rows of a name and what is the case, a rule under each.
class FactTable final : public QWidget {
    Q_OBJECT
public:
    explicit FactTable(const QString& name, QWidget* parent = nullptr);
    /// Adds a row. @return the label of its content
    QLabel* addRow(const QString& name);

private:
    QVBoxLayout* rows_;
    int count_ = 0;
};

/// A strip across the page that says what stands in the way and offers what to do.
class NoticeStrip final : public QFrame {
    Q_OBJECT
public:
    /// @param tone "warn" or "bad"
    NoticeStrip(const QString& name, const QString& tone, QWidget* parent = nullptr);
    void setText(const QString& text);
    KeyButton* addAction(const QString& name, const QString& text, const std::function<void()>& action);

private:
    QHBoxLayout* row_;
    QLabel* text_;
};

} // namespace whichway
