// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <QWidget>
#include <functional>

class QHBoxLayout;
class QLabel;

namespace whichway {

class KeyButton;

/// A page with a title, a sentence on what it is for, a panel that says what is the case, and what to do
/// next.
class QuietPage final : public QWidget {
    Q_OBJECT
public:
    QuietPage(const QString& name, const QString& title, QWidget* parent = nullptr);
    /// @param heading what is the case; @param text what that means
    void setContent(const QString& heading, const QString& text);
    KeyButton* addAction(const QString& name, const QString& text, bool isMain,
                         const std::function<void()>& action);

private:
    QLabel* heading_;
    QLabel* text_;
    QHBoxLayout* actions_ = nullptr;
};

} // namespace whichway
