// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/pages/review_page.h"

#include "ui/look/key_button.h"
#include "ui/look/style.h"
#include "ui/pages/page_parts.h"

#include <QHBoxLayout>
#include <QLabel>
#include <QTimer>
#include <QVBoxLayout>

namespace whichway {

ReviewPage::ReviewPage(QWidget* parent)
    : QWidget(parent), outcome_(makeLabel({}, TextRole::Text)), list_(new QVBoxLayout) {
    setObjectName(QStringLiteral("review"));
    auto* content = new QWidget;
    auto* page = new QVBoxLayout(content);
    page->setContentsMargins(space::k24, space::k16, space::k24, space::k24);
    page->setSpacing(space::k12);
    page->addWidget(makeLabel(tr("Review"), TextRole::Title));
    outcome_->setObjectName(QStringLiteral("review.outcome"));
    outcome_->setTextInteractionFlags(Qt::TextSelectableByMouse | Qt::TextSelectableByKeyboard);
    outcome_->hide();
    page->addWidget(outcome_);
    list_->setSpacing(space::k4);
    page->addLayout(list_);
    page->addStretch(1);
    auto* whole = new QVBoxLayout(this);
    whole->setContentsMargins(0, 0, 0, 0);
    whole->addWidget(makeScrollingPage(tr("Sessions that have ended"), content));
    showSessions({});
}

void ReviewPage::showSessions(const std::vector<SessionRow>& sessions) {
    clearLayout(*list_);
    int number = 0;
    for (const SessionRow& session : sessions) {
        if (session.state != SessionRow::State::Finished && session.state != SessionRow::State::Stopped)
            continue;
        ++number;
        if (number > 1)
            list_->addWidget(makePageRule());
        auto* rowWidget = new QWidget;
        rowWidget->setMaximumWidth(900);
        auto* row = new QHBoxLayout(rowWidget);
        row->setContentsMargins(0, space::k4, 0, space::k4);
        row->setSpacing(space::k24);
        QString name = QString::fromStdString(session.folder.code);
        if (session.kind != SessionKind::Participant)
            name += session.kind == SessionKind::Pilot ? tr(" (pilot)") : tr(" (simulated)");
        QLabel* code = makeLabel(name, TextRole::Text);
        code->setFixedWidth(220);
        row->addWidget(code);
        row->addWidget(makeLabel(sessionStateText(session), TextRole::Text, Ink::Second), 1);
        QLabel* time = makeLabel(sessionTimeText(session), TextRole::Text, Ink::Second);
        time->setWordWrap(false);
        row->addWidget(time);
        auto* report = new KeyButton(QStringLiteral("review.report%1").arg(number), tr("Write report"),
                                     KeyButton::Weight::Usual, Icon::File);
        report->setAccessibleName(tr("Write the report of %1").arg(name));
        const SessionFolder folder = session.folder;
        connect(report, &KeyButton::clicked, this, [this, folder] { writeReport(folder); });
        row->addWidget(report);
        list_->addWidget(rowWidget);
    }
    if (number > 0)
        return;
    auto* panel = makePanel(QStringLiteral("review.empty"), QStringLiteral("empty"));
    panel->setMaximumWidth(760);
    auto* inside = new QVBoxLayout(panel);
    inside->setContentsMargins(space::k24, space::k24, space::k24, space::k24);
    inside->setSpacing(space::k12);
    inside->addWidget(makeLabel(tr("No session has ended yet"), TextRole::Statement));
    inside->addWidget(
        makeLabel(tr("Sessions are started on the Study page, run at the bench, and reported here."),
                  TextRole::Text, Ink::Second));
    auto* start =
        new KeyButton(QStringLiteral("review.toStudy"), tr("Go to the study"), KeyButton::Weight::Main);
    connect(start, &KeyButton::clicked, this, &ReviewPage::studyAsked);
    auto* row = new QHBoxLayout;
    row->addWidget(start);
    row->addStretch(1);
    inside->addLayout(row);
    list_->addWidget(panel);
}

void ReviewPage::writeReport(const SessionFolder& folder) {
    if (!write_)
        return;
    setInk(*outcome_, Ink::Second);
    outcome_->setText(tr("Writing the report of %1.").arg(QString::fromStdString(folder.code)));
    outcome_->show();
    // The sentence is painted before the work begins.
    QTimer::singleShot(50, this, [this, folder] {
        const auto written = write_(folder);
        setInk(*outcome_, written ? Ink::Usual : Ink::Bad);
        outcome_->setText(
            written ? tr("The report of %1 is in %2")
                          .arg(QString::fromStdString(folder.code), QString::fromStdString(*written))
                    : QString::fromStdString(describe(written.error())));
    });
}

} // namespace whichway
