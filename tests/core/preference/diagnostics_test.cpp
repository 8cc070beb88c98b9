// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/preference/diagnostics.h"

#include "reference_data.h"

#include <cmath>
#include <gtest/gtest.h>

namespace whichway {
namespace {

// Fixed chains and their diagnostics by a general-purpose statistics package: tests/reference/README.md.
TEST(Diagnostics, EqualThePublishedDefinitionOnFixedChains) {
    const nlohmann::json file = reference::fits("mcmc_diagnostics.json");
    int cases = 0;
    for (const auto& expected : file.at("cases")) {
        const std::string name = expected.at("file");
        SCOPED_TRACE(name);
        const reference::Table table(name);
        Chains chains(table.columns());
        for (std::size_t row = 0; row < table.rows(); ++row)
            for (std::size_t c = 0; c < chains.size(); ++c)
                chains[c].push_back(table.number(row, c));
        const auto near = [&](double value, const char* key) {
            const double wanted = expected.at(key);
            EXPECT_NEAR(value, wanted, 1e-9 * std::abs(wanted)) << key;
        };
        near(rHat(chains), "posterior_rhat");
        near(bulkEss(chains), "ess_bulk");
        near(tailEss(chains), "ess_tail");
        near(meanEss(chains), "ess_mean");
        near(meanMcse(chains), "mcse_mean");
        std::vector<double> all;
        for (const auto& chain : chains)
            all.insert(all.end(), chain.begin(), chain.end());
        const auto quantiles = reference::numbers(expected.at("quantile_5_50_95"));
        EXPECT_NEAR(quantileOf(all, 0.05), quantiles[0], 1e-12);
        EXPECT_NEAR(quantileOf(all, 0.50), quantiles[1], 1e-12);
        EXPECT_NEAR(quantileOf(all, 0.95), quantiles[2], 1e-12);
        ++cases;
    }
    EXPECT_EQ(cases, 6);
}

TEST(Diagnostics, ConstantOrTooFewDrawsHaveNone) {
    const Chains constant(2, std::vector<double>(50, 3.0));
    EXPECT_TRUE(std::isnan(rHat(constant)));
    EXPECT_TRUE(std::isnan(bulkEss(constant)));
    EXPECT_TRUE(std::isnan(tailEss(constant)));
    const Chains brief{{1, 2, 3}, {2, 3, 1}};
    EXPECT_TRUE(std::isnan(rHat(brief)));
    const Chains notANumber{{1, 2, std::nan(""), 4, 5, 6, 7, 8}};
    EXPECT_TRUE(std::isnan(rHat(notANumber)));
}

TEST(Diagnostics, QuantilesRefuseNonsense) {
    EXPECT_THROW(quantileOf({}, 0.5), std::invalid_argument);
    EXPECT_THROW(quantileOf({1, 2}, 1.5), std::invalid_argument);
    EXPECT_EQ(quantileOf({4}, 0.3), 4);
}

} // namespace
} // namespace whichway
