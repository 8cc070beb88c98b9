// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/result.h"

#include <QWidget>
#include <vector>

class QLabel;
class QVBoxLayout;

namespace whichway {

/// What is shown in place of a study that was not opened: every problem with its place and what to do.
class StudyProblems final : public QWidget {
    Q_OBJECT
public:
    explicit StudyProblems(QWidget* parent = nullptr);
    void setProblems(const QString& folder, const std::vector<Error>& problems);

Q_SIGNALS:
    void readAgainAsked();
    void openAsked();

private:
    QLabel* count_;
    QVBoxLayout* list_;
};

} // namespace whichway
