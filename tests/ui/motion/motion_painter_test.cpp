// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/motion/motion_painter.h"
#include "ui/motion/pair_view.h"

#include "tests/support/small_study.h"

#include <QImage>
#include <QPainter>
#include <cmath>
#include <gtest/gtest.h>

using namespace whichway;

namespace {

/// A short corridor with a wall, a door, a bed and somebody who walks.
Study corridor() {
    Study study = smallStudy();
    study.protocol.scenes = {{.name = "corridor",
                              .bounds = {-1, -2, 6, 4},
                              .floor = {{-1, -1, 6, 2}},
                              .walls = {{-1, 1, 2, 1}, {3, 1, 5, 1}, {-1, -1, 5, -1}},
                              .doors = {{2, 1, 1, 0, 1.57}},
                              .furniture = {{0, 1.2, 0.8, 0.6}},
                              .goal = {4.5, 0},
                              .robotLength = 0.9,
                              .robotWidth = 0.6,
                              .personRadius = 0.25}};
    for (Trajectory& motion : study.motions) {
        motion.scene = "corridor";
        PersonTrack walker;
        for (const double t : motion.time) {
            walker.x.push_back(4 - t);
            walker.y.push_back(0.5);
        }
        motion.people = {walker};
    }
    return study;
}

QImage drawn(const MotionPainter& painter, const Trajectory& motion, double seconds, QRect pane, double scale,
             MotionPainter::Scenery scenery = MotionPainter::Scenery::Kept) {
    QImage image(900, 400, QImage::Format_RGB32);
    image.fill(Qt::white);
    QPainter onImage(&image);
    painter.paint(onImage, pane, motion, seconds, scale, scenery);
    onImage.end();
    return image.copy(pane);
}

class Painting : public ::testing::Test {
protected:
    Study study = corridor();
    MotionPainter painter{study};
    const Trajectory& motion = study.motions[3];
    const QRect left{11, 20, 400, 300}, right{473, 20, 400, 300};
    double scale = painter.pixelsPerMeter(left.size(), {&motion});
};

} // namespace

TEST_F(Painting, GivesTheSamePixelsOnBothSides) {
    for (const double seconds : {0.0, 0.31, 1.0, 1.97, 5.0})
        EXPECT_EQ(drawn(painter, motion, seconds, left, scale), drawn(painter, motion, seconds, right, scale))
            << seconds;
}

TEST_F(Painting, DiffersFromInstantToInstantAndStandsStillAtTheEnd) {
    EXPECT_NE(drawn(painter, motion, 0.5, left, scale), drawn(painter, motion, 0.6, left, scale));
    EXPECT_EQ(drawn(painter, motion, motion.duration(), left, scale),
              drawn(painter, motion, 99, left, scale));
    EXPECT_EQ(drawn(painter, motion, 0, left, scale), drawn(painter, motion, -1, left, scale));
}

TEST_F(Painting, DrawsTheKeptSceneryAsItWouldAnew) {
    const QImage kept = drawn(painter, motion, 1, left, scale);
    EXPECT_EQ(kept, drawn(painter, motion, 1, left, scale));
    EXPECT_EQ(kept, drawn(painter, motion, 1, left, scale, MotionPainter::Scenery::Drawn));
}

TEST_F(Painting, StaysInsideItsPane) {
    QImage image(900, 400, QImage::Format_RGB32);
    image.fill(Qt::white);
    QPainter onImage(&image);
    painter.paint(onImage, left, motion, 1, scale * 3); // far too large
    onImage.end();
    for (int y = 0; y < image.height(); ++y)
        for (int x = 0; x < image.width(); ++x)
            if (!left.contains(x, y))
                ASSERT_EQ(image.pixel(x, y), qRgb(255, 255, 255)) << x << ' ' << y;
}

TEST_F(Painting, PutsTheRobotWhereItsStatesSay) {
    // The outline is the only white thing on the floor near the robot: its centre of mass is the robot's
    // place.
    const double seconds = 1.0;
    const Instant now = instantAt(motion, seconds);
    const QImage image = drawn(painter, motion, seconds, left, scale);
    double sumX = 0, sumY = 0, count = 0;
    const Rectangle& b = study.protocol.scenes[0].bounds;
    for (int y = 0; y < image.height(); ++y)
        for (int x = 0; x < image.width(); ++x) {
            const double mx = b.x + b.width / 2 + (x + 0.5 - image.width() / 2.0) / scale;
            const double my = b.y + b.height / 2 - (y + 0.5 - image.height() / 2.0) / scale;
            if (qRed(image.pixel(x, y)) > 245 && std::fabs(mx - now.x) < 0.6 && std::fabs(my - now.y) < 0.4) {
                sumX += mx, sumY += my;
                ++count;
            }
        }
    ASSERT_GT(count, 0.4 * 0.9 * 0.6 * scale * scale);
    EXPECT_NEAR(sumX / count, now.x, 0.08); // the mark of its front takes a little white away
    EXPECT_NEAR(sumY / count, now.y, 0.02);
}

TEST_F(Painting, UsesGreysOnly) {
    const QImage image = drawn(painter, motion, 1.2, left, scale);
    for (int y = 0; y < image.height(); ++y)
        for (int x = 0; x < image.width(); ++x) {
            const QRgb pixel = image.pixel(x, y);
            ASSERT_LE(std::max({qRed(pixel), qGreen(pixel), qBlue(pixel)}) -
                          std::min({qRed(pixel), qGreen(pixel), qBlue(pixel)}),
                      1);
        }
}

TEST(PaintingWithoutAScene, DrawsTheStatesWithinTheirExtent) {
    const Study study = smallStudy();
    const MotionPainter painter(study);
    const Trajectory& slow = study.motions[0];
    const Trajectory& fast = study.motions[29];
    const double scale = painter.pixelsPerMeter({400, 300}, {&slow, &fast});
    EXPECT_DOUBLE_EQ(scale, painter.pixelsPerMeter({400, 300}, {&slow})); // one extent for the whole study
    const QRect pane(0, 0, 400, 300);
    EXPECT_NE(drawn(painter, slow, 1.5, pane, scale), drawn(painter, slow, 0, pane, scale));
    EXPECT_NE(drawn(painter, slow, 2, pane, scale), drawn(painter, fast, 2, pane, scale));
    EXPECT_GT(painter.aspect(), 0);
}

TEST(PairView, DrawsBothSidesForOneInstantAskedOnce) {
    const Study study = corridor();
    int asked = 0;
    double instant = 0;
    PairView view("test.pair", std::make_shared<const MotionPainter>(study), [&] {
        ++asked;
        return instant += 0.4;
    });
    view.resize(900, 300);
    view.show(&study.motions[5], &study.motions[5]);
    const QImage image = view.grab().toImage();
    EXPECT_EQ(asked, 1);
    EXPECT_EQ(view.leftPane().size(), view.rightPane().size());
    EXPECT_EQ(image.copy(view.leftPane()), image.copy(view.rightPane()));
    view.show(&study.motions[5], &study.motions[20]);
    const QImage other = view.grab().toImage();
    EXPECT_NE(other.copy(view.leftPane()), other.copy(view.rightPane()));
}
