// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/pages/study_problems.h"

#include "ui/look/key_button.h"
#include "ui/look/numbers.h"
#include "ui/look/style.h"
#include "ui/pages/page_parts.h"

#include <QHBoxLayout>
#include <QLabel>
#include <QVBoxLayout>

namespace whichway {
namespace {

constexpr std::size_t kShown = 200; ///< more panels than anybody reads before mending the first

QString placeText(const Place& place) {
    QString text = QString::fromStdString(place.file);
    if (place.line > 0)
        text += QLatin1Char(':') + QString::number(place.line);
    if (place.line > 0 && place.column > 0)
        text += QLatin1Char(':') + QString::number(place.column);
    return text;
}

QWidget* panelOf(const Error& problem, std::size_t number) {
    auto* panel = makePanel(QStringLiteral("study.problem%1").arg(number), QStringLiteral("bad"));
    auto* column = new QVBoxLayout(panel);
    column->setContentsMargins(space::k16, space::k12, space::k16, space::k12);
    column->setSpacing(space::k4);
    if (!problem.place.file.empty()) {
        QLabel* place = makeLabel(placeText(problem.place), TextRole::Heading);
        place->setTextInteractionFlags(Qt::TextSelectableByMouse | Qt::TextSelectableByKeyboard);
        column->addWidget(place);
    }
    column->addWidget(makeLabel(QString::fromStdString(problem.message), TextRole::Text));
    if (!problem.remedy.empty())
        column->addWidget(makeLabel(QString::fromStdString(problem.remedy), TextRole::Text, Ink::Second));
    panel->setAccessibleName(QString::fromStdString(describe(problem)));
    return panel;
}

} // namespace

StudyProblems::StudyProblems(QWidget* parent)
    : QWidget(parent), count_(makeLabel({}, TextRole::Text, Ink::Second)), list_(new QVBoxLayout) {
    setObjectName(QStringLiteral("study.problems"));
    auto* content = new QWidget;
    auto* page = new QVBoxLayout(content);
    page->setContentsMargins(space::k24, space::k16, space::k24, space::k24);
    page->setSpacing(space::k12);
    page->addWidget(makeLabel(tr("The study was not opened"), TextRole::Title));
    count_->setObjectName(QStringLiteral("study.problemCount"));
    page->addWidget(count_);
    auto* actions = new QHBoxLayout;
    auto* again = new KeyButton(QStringLiteral("study.readAgain"), tr("Read again"), KeyButton::Weight::Main,
                                std::nullopt, QKeySequence(Qt::Key_F5));
    auto* open = new KeyButton(QStringLiteral("study.openOther"), tr("Open another study"));
    connect(again, &KeyButton::clicked, this, &StudyProblems::readAgainAsked);
    connect(open, &KeyButton::clicked, this, &StudyProblems::openAsked);
    actions->addWidget(again);
    actions->addWidget(open);
    actions->addStretch(1);
    page->addLayout(actions);
    list_->setSpacing(space::k8);
    page->addLayout(list_);
    page->addStretch(1);
    auto* whole = new QVBoxLayout(this);
    whole->setContentsMargins(0, 0, 0, 0);
    whole->addWidget(makeScrollingPage(tr("Problems of the study"), content));
}

void StudyProblems::setProblems(const QString& folder, const std::vector<Error>& problems) {
    clearLayout(*list_);
    count_->setText(
        tr("%1 in %2. Nothing of the study is used until all are mended.")
            .arg(countText(static_cast<int>(problems.size()), tr("problem"), tr("problems")), folder));
    for (std::size_t i = 0; i < std::min(problems.size(), kShown); ++i)
        list_->addWidget(panelOf(problems[i], i + 1));
    if (problems.size() > kShown)
        list_->addWidget(
            makeLabel(tr("and %1 more").arg(problems.size() - kShown), TextRole::Text, Ink::Second));
}

} // namespace whichway
