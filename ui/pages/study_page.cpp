// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/pages/study_page.h"

#include "core/study/library_check.h"
#include "ui/look/key_button.h"
#include "ui/look/numbers.h"
#include "ui/look/style.h"
#include "ui/pages/library_model.h"
#include "ui/pages/page_parts.h"
#include "ui/pages/quiet_page.h"
#include "ui/pages/study_problems.h"

#include <QButtonGroup>
#include <QHBoxLayout>
#include <QHeaderView>
#include <QLabel>
#include <QLineEdit>
#include <QRadioButton>
#include <QRegularExpression>
#include <QSortFilterProxyModel>
#include <QTableView>
#include <QVBoxLayout>
#include <algorithm>

namespace whichway {
namespace {

constexpr std::size_t kSessionsShown = 100;

QString summaryOf(const Study& study) {
    const Protocol& p = study.protocol;
    const auto motions = static_cast<int>(p.table.motions.size());
    QStringList parts{
        countText(motions, StudyPage::tr("motion"), StudyPage::tr("motions")),
        countText(static_cast<int>(p.features.size()), StudyPage::tr("feature"), StudyPage::tr("features")),
        countText(static_cast<int>(p.scenes.size()), StudyPage::tr("scene"), StudyPage::tr("scenes")),
        countText(motions * (motions - 1) / 2, StudyPage::tr("possible pair"),
                  StudyPage::tr("possible pairs"))};
    return parts.join(QStringLiteral(", "));
}

QString trialsOf(const TrialSettings& t) {
    return StudyPage::tr(
               "A session: %1 practice, %2 main, %3 held-out, %4 repeat, %5 catch, %6 identical pairs.")
        .arg(t.practice)
        .arg(t.main)
        .arg(t.heldOut)
        .arg(t.repeat)
        .arg(t.catchTrials)
        .arg(t.identical);
}

/// Narrow columns whose headings break between words, so that as many features as can be stand side by side.
void fitColumns(QTableView& table) {
    const QFontMetrics metrics(fontOf(TextRole::Label));
    table.resizeColumnsToContents();
    for (int column = LibraryModel::kDuration; column < table.model()->columnCount(); ++column) {
        const QString heading = table.model()->headerData(column, Qt::Horizontal).toString();
        int widest = metrics.horizontalAdvance(QStringLiteral("00.00"));
        for (const QString& word : heading.split(QRegularExpression(QStringLiteral("\\s+"))))
            widest = std::max(widest, metrics.horizontalAdvance(word));
        table.setColumnWidth(column, widest + 24);
    }
    table.setColumnWidth(LibraryModel::kPath, 150);
    table.horizontalHeader()->setSectionResizeMode(LibraryModel::kPath, QHeaderView::Stretch);
    int tallest = 0;
    for (int column = 0; column < table.model()->columnCount(); ++column) {
        const QRect room(0, 0, table.columnWidth(column) - 18, 1000);
        const QString heading = table.model()->headerData(column, Qt::Horizontal).toString();
        tallest = std::max(tallest, metrics.boundingRect(room, Qt::TextWordWrap, heading).height());
    }
    table.horizontalHeader()->setFixedHeight(tallest + 20);
}

} // namespace

StudyPage::StudyPage(QWidget* parent) : QStackedWidget(parent) {
    setObjectName(QStringLiteral("study"));
    nothing_ = new QuietPage(QStringLiteral("study.none"), tr("Study"));
    nothing_->setContent(
        tr("No study is open"),
        tr("A study is a folder with study.toml, a library of motions, and the sessions run so far."));
    nothing_->addAction(QStringLiteral("study.open"), tr("Open a study folder"), true,
                        [this] { Q_EMIT openAsked(); });
    problems_ = new StudyProblems;
    connect(problems_, &StudyProblems::readAgainAsked, this, &StudyPage::readAgainAsked);
    connect(problems_, &StudyProblems::openAsked, this, &StudyPage::openAsked);
    addWidget(nothing_);
    addWidget(problems_);
}

void StudyPage::showNothing() {
    setCurrentWidget(nothing_);
}

void StudyPage::showProblems(const QString& folder, const std::vector<Error>& problems) {
    problems_->setProblems(folder, problems);
    setCurrentWidget(problems_);
}

void StudyPage::showStudy(const Study& study) {
    if (view_) {
        removeWidget(view_);
        delete view_; // its models read a study that is about to go
    }
    view_ = makeStudyView(study);
    addWidget(view_);
    setCurrentWidget(view_);
}

QWidget* StudyPage::makeStudyView(const Study& study) {
    auto* content = new QWidget;
    content->setObjectName(QStringLiteral("sheet"));
    auto* page = new QVBoxLayout(content);
    page->setContentsMargins(space::k24, space::k12, space::k24, space::k16);
    page->setSpacing(space::k12);
    auto* head = new QHBoxLayout;
    head->setSpacing(space::k24);
    QLabel* title = makeLabel(QString::fromStdString(study.protocol.title), TextRole::Title);
    title->setObjectName(QStringLiteral("study.title"));
    QLabel* summary = makeLabel(summaryOf(study), TextRole::Text, Ink::Second);
    summary->setWordWrap(false);
    head->addWidget(title, 1);
    head->addWidget(summary);
    page->addLayout(head);
    if (study.protocol.invented)
        page->addWidget(
            makeLabel(tr("Invented motions, for demonstration. Every report of this study says so."),
                      TextRole::Text, Ink::Warn));
    auto* columns = new QHBoxLayout;
    columns->setSpacing(space::k32);
    columns->addWidget(makeLibrary(study), 6);
    columns->addWidget(makeSide(study), 4);
    page->addLayout(columns, 1);
    return content;
}

QWidget* StudyPage::makeLibrary(const Study& study) {
    auto* widget = new QWidget;
    auto* column = new QVBoxLayout(widget);
    column->setContentsMargins(0, 0, 0, 0);
    column->setSpacing(space::k8);
    auto* head = new QHBoxLayout;
    head->addWidget(makeLabel(tr("Library"), TextRole::Heading));
    head->addStretch(1);
    auto* find = new QLineEdit;
    find->setObjectName(QStringLiteral("study.find"));
    find->setAccessibleName(tr("Find a motion"));
    find->setPlaceholderText(tr("Find a motion"));
    find->setMaximumWidth(220);
    find->setClearButtonEnabled(true);
    head->addWidget(find);
    column->addLayout(head);

    auto* table = new QTableView;
    auto* model = new LibraryModel(study, table);
    auto* sorted = new QSortFilterProxyModel(table);
    sorted->setSourceModel(model);
    sorted->setSortRole(Qt::UserRole);
    sorted->setFilterKeyColumn(LibraryModel::kName);
    sorted->setFilterCaseSensitivity(Qt::CaseInsensitive);
    connect(find, &QLineEdit::textChanged, sorted, &QSortFilterProxyModel::setFilterFixedString);
    table->setObjectName(QStringLiteral("study.library"));
    table->setAccessibleName(tr("Library of motions"));
    table->setModel(sorted);
    table->setItemDelegateForColumn(LibraryModel::kPath, new PathDelegate(study, table));
    table->setFont(fontOf(TextRole::Text));
    table->setShowGrid(false);
    table->setAlternatingRowColors(false);
    table->setSelectionBehavior(QAbstractItemView::SelectRows);
    table->setSelectionMode(QAbstractItemView::SingleSelection);
    table->setEditTriggers(QAbstractItemView::NoEditTriggers);
    table->setTabKeyNavigation(false);
    table->setWordWrap(true);
    table->verticalHeader()->hide();
    table->verticalHeader()->setDefaultSectionSize(std::max(space::kRow, table->fontMetrics().height() + 12));
    auto* header = table->horizontalHeader();
    header->setHighlightSections(false);
    header->setFont(fontOf(TextRole::Label));
    header->setMinimumSectionSize(56);
    table->setSortingEnabled(true);
    table->sortByColumn(LibraryModel::kName, Qt::AscendingOrder);
    fitColumns(*table);
    table->setMinimumHeight(240);
    column->addWidget(table, 1);
    return widget;
}

QWidget* StudyPage::makeSide(const Study& study) {
    auto* content = new QWidget;
    auto* side = new QVBoxLayout(content);
    side->setContentsMargins(0, 0, space::k12, 0);
    side->setSpacing(space::k12);
    side->addWidget(makeLabel(tr("Start a session"), TextRole::Heading));
    side->addWidget(makeLabel(trialsOf(study.protocol.trials), TextRole::Text, Ink::Second));
    addStartForm(*side);
    side->addWidget(makePageRule());
    side->addWidget(makeLabel(tr("Sessions"), TextRole::Heading));
    sessions_ = new QVBoxLayout;
    sessions_->setSpacing(space::k4);
    side->addLayout(sessions_);
    side->addWidget(makePageRule());
    addFeatures(*side, study);
    addFindings(*side, study);
    side->addStretch(1);
    return makeScrollingPage(tr("Session, features and findings"), content);
}

void StudyPage::addStartForm(QVBoxLayout& side) {
    auto* row = new QHBoxLayout;
    row->setSpacing(space::k8);
    code_ = new QLineEdit;
    code_->setObjectName(QStringLiteral("study.code"));
    code_->setAccessibleName(tr("Participant code"));
    code_->setPlaceholderText(tr("Participant code, no name"));
    code_->setMaxLength(64);
    code_->setMinimumWidth(190);
    start_ = new KeyButton(QStringLiteral("study.start"), tr("Start a session"), KeyButton::Weight::Main);
    row->addWidget(code_, 1);
    row->addWidget(start_);
    side.addLayout(row);

    auto* kinds = new QHBoxLayout;
    kinds->setSpacing(space::k16);
    auto* participant = new QRadioButton(tr("Participant"));
    participant->setObjectName(QStringLiteral("study.kindParticipant"));
    pilot_ = new QRadioButton(tr("Pilot, kept apart from the data"));
    pilot_->setObjectName(QStringLiteral("study.kindPilot"));
    auto* group = new QButtonGroup(participant);
    group->addButton(participant);
    group->addButton(pilot_);
    participant->setChecked(true);
    kinds->addWidget(participant);
    kinds->addWidget(pilot_);
    kinds->addStretch(1);
    side.addLayout(kinds);

    startProblem_ = makeLabel({}, TextRole::Text, Ink::Bad);
    startProblem_->setObjectName(QStringLiteral("study.startProblem"));
    startProblem_->hide();
    side.addWidget(startProblem_);
    side.addWidget(
        makeLabel(tr("Sessions with people need the approval that your institution asks for, informed "
                     "consent, and the right to stop. Preferences are not a safety case."),
                  TextRole::Label, Ink::Third));
    connect(code_, &QLineEdit::textChanged, this, [this] {
        showStartProblem({});
        updateStart();
    });
    connect(code_, &QLineEdit::returnPressed, start_, [this] { start_->click(); });
    connect(start_, &KeyButton::clicked, this, [this] {
        const auto checked = checkParticipantCode(code_->text().toStdString());
        if (!checked)
            showStartProblem(QString::fromStdString(describe(checked.error())));
        else
            Q_EMIT startAsked(code_->text(), pilot_->isChecked());
    });
    updateStart();
}

void StudyPage::addFeatures(QVBoxLayout& side, const Study& study) {
    side.addWidget(makeLabel(tr("Features"), TextRole::Heading));
    const FeatureSummary summary = summarise(study.protocol.table);
    for (std::size_t j = 0; j < study.protocol.features.size(); ++j) {
        const FeatureDefinition& feature = study.protocol.features[j];
        const FeatureSpread& spread = summary.features[j];
        auto* row = new QHBoxLayout;
        row->setSpacing(space::k12);
        row->addWidget(makeLabel(QString::fromStdString(feature.label), TextRole::Text), 1);
        const QString unit = unitText(feature.unit);
        QString range = tr("%1 to %2").arg(shortNumber(spread.least), shortNumber(spread.greatest));
        if (!unit.isEmpty())
            range += QChar(0x00a0) + unit;
        QLabel* spreadLabel = makeLabel(range + tr(",  median %1").arg(shortNumber(spread.median)),
                                        TextRole::Text, Ink::Second);
        spreadLabel->setWordWrap(false);
        row->addWidget(spreadLabel);
        side.addLayout(row);
    }
}

void StudyPage::addFindings(QVBoxLayout& side, const Study& study) {
    const auto findings = checkLibrary(study, summarise(study.protocol.table));
    int number = 0;
    for (const LibraryFinding& finding : findings) {
        const bool isWarning = finding.weight == LibraryFinding::Weight::Warning;
        auto* panel = makePanel(QStringLiteral("study.finding%1").arg(++number),
                                isWarning ? QStringLiteral("warn") : QStringLiteral("plain"));
        auto* column = new QVBoxLayout(panel);
        column->setContentsMargins(space::k16, space::k12, space::k16, space::k12);
        column->setSpacing(space::k4);
        column->addWidget(makeLabel(QString::fromStdString(finding.message), TextRole::Heading));
        for (const std::string& text : {finding.effect, finding.remedy})
            if (!text.empty())
                column->addWidget(makeLabel(QString::fromStdString(text), TextRole::Text, Ink::Second));
        side.addWidget(panel);
    }
}

void StudyPage::updateStart() {
    if (start_)
        start_->setEnabled(!isRunning_ && !code_->text().isEmpty());
}

void StudyPage::showStartProblem(const QString& text) {
    if (!startProblem_)
        return;
    startProblem_->setText(text);
    startProblem_->setVisible(!text.isEmpty());
}

void StudyPage::showSessions(const std::vector<SessionRow>& sessions, const std::string& running) {
    isRunning_ = !running.empty();
    if (!sessions_)
        return;
    updateStart();
    clearLayout(*sessions_);
    if (sessions.empty())
        sessions_->addWidget(makeLabel(tr("None yet. Try a pilot first: it is kept apart from the data."),
                                       TextRole::Text, Ink::Second));
    for (std::size_t i = 0; i < std::min(sessions.size(), kSessionsShown); ++i) {
        const SessionRow& session = sessions[i];
        auto* rowWidget = new QWidget;
        auto* row = new QHBoxLayout(rowWidget);
        row->setContentsMargins(0, 0, 0, 0);
        row->setSpacing(space::k12);
        QString name = QString::fromStdString(session.folder.code);
        if (session.kind != SessionKind::Participant)
            name += session.kind == SessionKind::Pilot ? tr(" (pilot)") : tr(" (simulated)");
        auto* text = new QVBoxLayout;
        text->setSpacing(0);
        text->addWidget(makeLabel(name, TextRole::Text));
        const bool runs = session.folder.id == running;
        const QString time = sessionTimeText(session);
        QString state = runs ? tr("running now") : sessionStateText(session);
        if (!time.isEmpty())
            state += QStringLiteral(";  ") + time;
        text->addWidget(makeLabel(state, TextRole::Label, Ink::Second));
        row->addLayout(text, 1);
        if (session.state == SessionRow::State::Unfinished && !runs) {
            auto* goOn = new KeyButton(QStringLiteral("study.goOn%1").arg(i + 1), tr("Go on"));
            goOn->setAccessibleName(
                tr("Go on with the session of %1").arg(QString::fromStdString(session.folder.code)));
            goOn->setEnabled(!isRunning_);
            const SessionFolder folder = session.folder;
            connect(goOn, &KeyButton::clicked, this, [this, folder] { Q_EMIT goOnAsked(folder); });
            row->addWidget(goOn);
        }
        sessions_->addWidget(rowWidget);
    }
}

} // namespace whichway
