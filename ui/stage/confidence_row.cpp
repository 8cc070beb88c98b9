// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/stage/confidence_row.h"

#include "ui/look/tokens.h"

#include <QPainter>
#include <algorithm>

namespace whichway {
namespace {

constexpr int kRing = 8;
constexpr int kLeastWordWidth = 236;
constexpr std::size_t kWordsBesideKeys = 4; ///< more words than this stand below their keys

} // namespace

ConfidenceRow::ConfidenceRow(const std::vector<std::string>& words, QWidget* parent) : QWidget(parent) {
    setObjectName(QStringLiteral("stage.confidence"));
    setAccessibleName(tr("How sure"));
    setFocusPolicy(Qt::StrongFocus);
    const auto order =
        words.size() > kWordsBesideKeys ? StageButton::Order::KeyAbove : StageButton::Order::KeyFirst;
    for (std::size_t i = 0; i < words.size(); ++i) {
        const int level = static_cast<int>(i) + 1;
        auto* word =
            new StageButton(QStringLiteral("stage.confidence%1").arg(level), QString::fromStdString(words[i]),
                            QString::number(level), 21, order, this);
        word->setFocusPolicy(Qt::NoFocus);
        connect(word, &StageButton::clicked, this, [this, level] { Q_EMIT pressed(level); });
        words_.push_back(word);
    }
}

void ConfidenceRow::setChosenLevel(int level) {
    for (std::size_t i = 0; i < words_.size(); ++i)
        words_[i]->setChosen(static_cast<int>(i) + 1 == level);
}

void ConfidenceRow::setWordsEnabled(bool enabled) {
    for (StageButton* word : words_)
        word->setEnabled(enabled);
    setFocusPolicy(enabled ? Qt::StrongFocus : Qt::NoFocus);
}

bool ConfidenceRow::isWide() const {
    return words_.size() > kWordsBesideKeys;
}

QSize ConfidenceRow::sizeHint() const {
    int width = isWide() ? 120 : kLeastWordWidth;
    int height = isWide() ? 112 : 72;
    for (const StageButton* word : words_) {
        if (!isWide()) {
            width = std::max(width, word->sizeHint().width());
            height = std::max(height, word->sizeHint().height());
            continue;
        }
        const QFontMetrics metrics(word->font());
        for (const QString& part : word->text().split(QLatin1Char(' ')))
            width = std::max(width, metrics.horizontalAdvance(part) + 2 * kRing + 20);
    }
    return {width * static_cast<int>(words_.size()), height};
}

void ConfidenceRow::resizeEvent(QResizeEvent*) {
    const int count = static_cast<int>(words_.size());
    const int each = width() / std::max(1, count);
    const int left = (width() - each * count) / 2;
    for (int i = 0; i < count; ++i)
        words_[static_cast<std::size_t>(i)]->setGeometry(left + i * each, 0, each, height());
}

void ConfidenceRow::paintEvent(QPaintEvent*) {
    if (!hasFocus())
        return;
    QPainter painter(this);
    painter.setRenderHint(QPainter::Antialiasing);
    painter.setPen(QPen(QColor::fromRgb(stage_grey::kText), 4));
    painter.drawRoundedRect(QRectF(rect()).adjusted(2, kRing - 6, -2, 6 - kRing), 6, 6);
}

} // namespace whichway
