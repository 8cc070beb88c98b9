// SPDX-License-Identifier: GPL-3.0-or-later
// The main of test programs that open windows: without a screen, and always with the same fonts' sizes and
// theme.
#include "ui/look/style.h"

#include <QApplication>
#include <gtest/gtest.h>

int main(int argc, char** argv) {
    qputenv("QT_QPA_PLATFORM", "offscreen");
    qputenv("QT_ENABLE_HIGHDPI_SCALING", "0");
    ::testing::InitGoogleTest(&argc, argv);
    QApplication application(argc, argv);
    whichway::applyLook(application, whichway::Theme::Light);
    return RUN_ALL_TESTS();
}
