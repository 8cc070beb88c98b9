// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/look/icons.h"
#include "ui/look/tokens.h"

#include <QImage>
#include <QPainter>
#include <cmath>
#include <gtest/gtest.h>
#include <set>

using namespace whichway;

namespace {

/// Relative luminance and contrast ratio as WCAG 2.2 defines them.
double luminance(const QColor& colour) {
    const auto linear = [](double c) {
        return c <= 0.04045 ? c / 12.92 : std::pow((c + 0.055) / 1.055, 2.4);
    };
    return 0.2126 * linear(colour.redF()) + 0.7152 * linear(colour.greenF()) +
           0.0722 * linear(colour.blueF());
}

double contrast(const QColor& a, const QColor& b) {
    const double la = luminance(a), lb = luminance(b);
    return (std::max(la, lb) + 0.05) / (std::min(la, lb) + 0.05);
}

class Tokens : public ::testing::TestWithParam<Theme> {};

} // namespace

// WCAG 2.2: 1.4.3 asks 4.5 for text, 1.4.11 asks 3 for the outlines of controls and for marks.
TEST_P(Tokens, TextAndOutlinesStandOutFromEveryGroundTheyAreUsedOn) {
    const Colours& c = coloursOf(GetParam());
    for (const QColor& ground : {c.ground, c.sheet, c.raised}) {
        for (const QColor& text : {c.ink, c.ink2, c.ink3, c.accent, c.warn, c.bad})
            EXPECT_GE(contrast(text, ground), 4.5)
                << text.name().toStdString() << " on " << ground.name().toStdString();
        for (const QColor& outline : {c.edge, c.series2, c.series3, c.series4})
            EXPECT_GE(contrast(outline, ground), 3.0) << outline.name().toStdString();
    }
    EXPECT_GE(contrast(c.onAccent, c.accent), 4.5);
    EXPECT_GE(contrast(c.ink, c.soft), 4.5);
    EXPECT_GE(contrast(c.ink2, c.warnSoft), 4.5);
    EXPECT_GE(contrast(c.ink2, c.badSoft), 4.5);
    EXPECT_GE(contrast(c.warn, c.warnSoft), 4.5);
}

TEST_P(Tokens, AreFoundAgainByTheirPalette) {
    EXPECT_EQ(coloursOf(paletteOf(GetParam())).ink, coloursOf(GetParam()).ink);
}

INSTANTIATE_TEST_SUITE_P(BothThemes, Tokens, ::testing::Values(Theme::Light, Theme::Dark));

TEST(StageGreys, AreGreyAndReadable) {
    using namespace stage_grey;
    for (const QRgb grey : {kGround, kButton, kFloor, kRoom, kWall, kPerson, kTrail, kPersonTrail, kRobot,
                            kEdge, kText, kDisabledText, kDisabledEdge, kTrack, kFurniture, kFurnitureEdge}) {
        EXPECT_EQ(qRed(grey), qGreen(grey));
        EXPECT_EQ(qGreen(grey), qBlue(grey));
    }
    const auto ratio = [](QRgb a, QRgb b) { return contrast(QColor::fromRgb(a), QColor::fromRgb(b)); };
    EXPECT_GE(ratio(kText, kGround), 7);
    EXPECT_GE(ratio(kText, kButton), 7);
    EXPECT_GE(ratio(kDisabledText, kGround), 4.5);
    for (const QRgb mark : {kWall, kPerson, kTrail, kPersonTrail, kEdge})
        EXPECT_GE(ratio(mark, kFloor), 3);
}

TEST(StageType, IsNeverBelowNineteenPixels) {
    EXPECT_GE(stageFont(8).pixelSize(), 19);
    EXPECT_GE(stageFont(32).pixelSize(), 32);
}

TEST(Icons, AreAllThereAndTakeTheirColour) {
    for (int i = 0; i <= static_cast<int>(Icon::File); ++i) {
        QImage image(40, 40, QImage::Format_ARGB32);
        image.fill(Qt::white);
        QPainter painter(&image);
        drawIcon(painter, QRectF(0, 0, 40, 40), static_cast<Icon>(i), QColor(200, 0, 0));
        painter.end();
        int red = 0;
        for (int y = 0; y < 40; ++y)
            for (int x = 0; x < 40; ++x)
                red += qRed(image.pixel(x, y)) > 150 && qBlue(image.pixel(x, y)) < 100;
        EXPECT_GT(red, 10) << i;
    }
}

TEST(TrialMarks, DifferInShapeAndFitTheirSquare) {
    std::set<std::string> drawn;
    for (int i = 0; i <= static_cast<int>(TrialKind::Identical); ++i) {
        const QPainterPath path = trialMark(static_cast<TrialKind>(i), 20);
        EXPECT_TRUE(QRectF(-13, -13, 26, 26).contains(path.boundingRect())) << i;
        QImage image(32, 32, QImage::Format_Grayscale8);
        image.fill(255);
        QPainter painter(&image);
        painter.translate(16, 16);
        painter.fillPath(path, Qt::black);
        painter.end();
        drawn.insert(std::string(reinterpret_cast<const char*>(image.constBits()),
                                 static_cast<std::size_t>(image.sizeInBytes())));
        EXPECT_FALSE(trialKindText(static_cast<TrialKind>(i)).isEmpty());
    }
    EXPECT_EQ(drawn.size(), 6u);
}
