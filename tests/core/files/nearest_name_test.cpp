// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/files/nearest_name.h"

#include <gtest/gtest.h>
#include <vector>

using namespace whichway;

TEST(NearestName, FindsWhatWasMeant) {
    const std::vector<std::string> known = {"travel_time", "closest_distance", "smoothness", "detour"};
    EXPECT_EQ(nearestName("travl_time", known), "travel_time");
    EXPECT_EQ(nearestName("trvael_time", known), "travel_time"); // neighbours swapped
    EXPECT_EQ(nearestName("smothness", known), "smoothness");
    EXPECT_EQ(nearestName("detours", known), "detour");
    EXPECT_EQ(nearestName("detour", known), "detour");
}

TEST(NearestName, NamesNothingThatIsFarOff) {
    const std::vector<std::string> known = {"travel_time", "detour"};
    EXPECT_EQ(nearestName("colour", known), "");
    EXPECT_EQ(nearestName("x", known), "");
    EXPECT_EQ(nearestName("", known), "");
    EXPECT_EQ(nearestName("detour", {}), "");
}
