// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/look/numbers.h"

#include <QCoreApplication>
#include <QLocale>
#include <QRegularExpression>
#include <algorithm>
#include <cmath>

namespace whichway {
namespace {

const QChar kMinus(0x2212);
const QChar kUnitSpace(0x00a0);

} // namespace

QString numberText(double value, int decimals) {
    if (!std::isfinite(value))
        return QStringLiteral("n/a");
    QString text = QLocale::c().toString(std::fabs(value), 'f', decimals);
    text.remove(QLatin1Char(','));
    const bool isZero = std::all_of(text.cbegin(), text.cend(),
                                    [](QChar c) { return c == QLatin1Char('0') || c == QLatin1Char('.'); });
    return value < 0 && !isZero ? kMinus + text : text;
}

QString shortNumber(double value) {
    const double size = std::fabs(value);
    const int digitsBefore = size >= 1 ? static_cast<int>(std::floor(std::log10(size))) + 1 : 0;
    return numberText(value, std::clamp(3 - digitsBefore, 0, 3));
}

QString withUnit(double value, int decimals, const QString& unit) {
    const QString number = numberText(value, decimals);
    return unit.isEmpty() || unit == QLatin1String("1") ? number : number + kUnitSpace + unit;
}

QString unitText(const std::string& unit) {
    if (unit == "1")
        return {};
    QString text = QString::fromStdString(unit);
    static const QRegularExpression kPower(QStringLiteral("([A-Za-z])\\^?([23])"));
    for (auto found = kPower.match(text); found.hasMatch(); found = kPower.match(text)) {
        const QChar power(found.captured(2) == QLatin1String("2") ? 0x00b2 : 0x00b3);
        text.replace(found.capturedStart(), found.capturedLength(), found.captured(1) + power);
    }
    return text;
}

QString intervalText(double low, double high, int decimals, const QString& unit, int percent) {
    return QCoreApplication::translate("numbers", "%1 % interval %2 to %3")
        .arg(QString::number(percent), numberText(low, decimals), withUnit(high, decimals, unit));
}

QString spanText(double seconds) {
    const auto whole = static_cast<long long>(std::max(0.0, seconds));
    const auto padded = [](long long n) { return QStringLiteral("%1").arg(n, 2, 10, QLatin1Char('0')); };
    if (whole >= 3600)
        return QCoreApplication::translate("numbers", "%1 h %2 min")
            .arg(whole / 3600)
            .arg(padded(whole / 60 % 60));
    if (whole >= 60)
        return QCoreApplication::translate("numbers", "%1 min %2 s").arg(whole / 60).arg(padded(whole % 60));
    return QCoreApplication::translate("numbers", "%1 s").arg(whole);
}

QString countText(int count, const QString& one, const QString& many) {
    return QString::number(count) + QLatin1Char(' ') + (count == 1 ? one : many);
}

} // namespace whichway
