// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/random.h"

#include "core/numbers/special_functions.h"

#include <algorithm>
#include <cmath>
#include <gtest/gtest.h>
#include <numeric>
#include <vector>

using namespace whichway;

// Reference: the published generator's own recurrence worked by hand from the state (1, 2, 3, 4) is not
// reachable through a seed, so the stream is pinned by its distribution and by committed values that every
// machine must give.
TEST(Random, GivesTheSameNumbersOnEveryMachine) {
    Random a(42), b(42), c(43);
    EXPECT_EQ(a.bits(), 1546998764402558742ull);
    (void)b.bits();
    EXPECT_EQ(a.normal(), b.normal());
    EXPECT_NE(a.bits(), c.bits());
}

TEST(Random, NormalsPassAKolmogorovSmirnovTest) {
    Random random(7);
    std::vector<double> p(20000);
    for (double& value : p)
        value = normalCdf(random.normal());
    std::sort(p.begin(), p.end());
    double distance = 0;
    for (std::size_t i = 0; i < p.size(); ++i)
        distance = std::max(distance,
                            std::abs(p[i] - (static_cast<double>(i) + 0.5) / static_cast<double>(p.size())));
    EXPECT_LT(distance, 1.95 / std::sqrt(20000.0)); // the 0.1 % point of Kolmogorov's distribution
}

TEST(Random, BelowIsUniform) {
    Random random(11);
    std::vector<int> counts(7);
    for (int i = 0; i < 70000; ++i)
        ++counts[random.below(7)];
    double chiSquare = 0;
    for (const int count : counts)
        chiSquare += (count - 10000.0) * (count - 10000.0) / 10000.0;
    EXPECT_LT(chiSquare, 22.46); // chi-square with 6 degrees of freedom, upper 0.1 % point
}

TEST(Random, ShuffleKeepsEveryItem) {
    Random random(3);
    std::vector<int> items(100);
    std::iota(items.begin(), items.end(), 0);
    std::vector<int> shuffled = items;
    random.shuffle(std::span<int>(shuffled));
    EXPECT_NE(shuffled, items);
    EXPECT_TRUE(std::is_permutation(items.begin(), items.end(), shuffled.begin()));
}

TEST(DeriveSeed, DiffersByPartAndBySeed) {
    EXPECT_NE(deriveSeed(1, 0), deriveSeed(1, 1));
    EXPECT_NE(deriveSeed(1, 0), deriveSeed(2, 0));
    EXPECT_EQ(deriveSeed(9, 4), deriveSeed(9, 4));
}
