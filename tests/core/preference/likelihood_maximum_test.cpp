// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/preference/likelihood_maximum.h"

#include "core/numbers/linear_algebra.h"
#include "reference_data.h"

#include <cmath>
#include <gtest/gtest.h>
#include <utility>

// Maximum likelihood fits by general-purpose statistics packages; sources in tests/reference/README.md.
namespace whichway {
namespace {

using nlohmann::json;
using reference::Table;

constexpr double kTolerance = 1e-7;

/// Flat priors, no lapse.
ResponseModel plainModel(std::size_t dimension, int levels, bool cannotTell, bool sideBias = false) {
    return {.dimension = static_cast<int>(dimension),
            .levels = levels,
            .cannotTell = cannotTell,
            .lapse = 0,
            .sideBiasDeviation = sideBias ? 1.0 : 0.0};
}

/// A natural parameter as a sum of multiples of the reference fit's parameters.
struct Link {
    std::size_t natural = 0;
    std::vector<std::pair<std::size_t, double>> terms = {};
};

/// Natural parameters first, first + 1, … are the reference's parameters from, from + 1, … to.
void linkRun(std::vector<Link>& links, std::size_t first, std::size_t from, std::size_t to) {
    for (std::size_t i = from; i <= to; ++i)
        links.push_back({.natural = first++, .terms = {{i, 1.0}}});
}

void expectEqual(const ResponseModel& model, const std::vector<Response>& responses, const json& fit,
                 const std::vector<Link>& links, double constant = 0) {
    const Result<LikelihoodMaximum> maximum = maximiseLikelihood(ResponseLikelihood(model, responses));
    ASSERT_TRUE(maximum) << describe(maximum.error());
    const auto estimate = reference::numbers(fit.at("estimate"));
    const auto vcov = fit.at("vcov").get<std::vector<std::vector<double>>>();
    const double logLikelihood = fit.at("logLik");
    EXPECT_NEAR(maximum->logLikelihood + constant, logLikelihood, kTolerance * std::abs(logLikelihood));
    const auto covarianceOf = [&](const Link& a, const Link& b) {
        double sum = 0;
        for (const auto& [i, x] : a.terms)
            for (const auto& [j, y] : b.terms)
                sum += x * y * vcov[i][j];
        return sum;
    };
    for (const Link& link : links) {
        double wanted = 0;
        for (const auto& [index, factor] : link.terms)
            wanted += factor * estimate[index];
        EXPECT_NEAR(maximum->natural[link.natural], wanted, kTolerance * std::abs(wanted)) << link.natural;
        for (const Link& other : links) {
            const double size = std::sqrt(covarianceOf(link, link) * covarianceOf(other, other));
            EXPECT_NEAR(maximum->covariance(link.natural, other.natural), covarianceOf(link, other),
                        2 * kTolerance * size)
                << link.natural << " " << other.natural;
        }
    }
}

/// ln of the binomial coefficient, which fits to counts include.
double logChoose(double n, double k) {
    return std::lgamma(n + 1) - std::lgamma(k + 1) - std::lgamma(n - k + 1);
}

class BankChoices : public testing::TestWithParam<const char*> {};
INSTANTIATE_TEST_SUITE_P(Samples, BankChoices, testing::Values("bank_open", "bank_open100"));

TEST_P(BankChoices, EqualLogisticRegression) {
    const std::string name = GetParam();
    const Table table(name + ".csv");
    const json file = reference::fits("glm_" + name + ".json");
    const auto columns = file.at("columns").get<std::vector<std::string>>();
    std::vector<Response> responses;
    for (std::size_t row = 0; row < table.rows(); ++row) {
        Response response{.answer = table.number(row, "choice") > 0.5 ? 1 : -1};
        for (const std::string& column : columns)
            response.difference.push_back(table.number(row, column));
        responses.push_back(response);
    }
    std::vector<Link> links;
    linkRun(links, 0, 0, columns.size() - 1);
    expectEqual(plainModel(columns.size(), 1, false), responses, file.at("logit"), links);
}

/// Ordered categories 1 … 2 K (+ 1) as answers -K … K.
std::vector<Response> orderedResponses(const Table& table, const std::string& category,
                                       const std::vector<std::string>& features, int levels,
                                       bool cannotTell) {
    std::vector<Response> responses;
    for (std::size_t row = 0; row < table.rows(); ++row) {
        const int value = static_cast<int>(table.number(row, category)) - levels - 1; // from -K
        Response response{.answer = cannotTell || value < 0 ? value : value + 1};
        for (const std::string& feature : features)
            response.difference.push_back(table.number(row, feature));
        responses.push_back(response);
    }
    return responses;
}

TEST(OrderedAnswers, WineRatingsEqualCumulativeLogitWithMirroredCuts) {
    const json file = reference::fits("ordinal_wine.json");
    // Published as cold/warm and no/yes, in the file as 0/1.
    const auto responses = orderedResponses(Table("wine.csv"), "rating", {"temp", "contact"}, 2, true);
    std::vector<Link> links;
    linkRun(links, 3, 0, 1);
    linkRun(links, 0, 2, 3);
    expectEqual(plainModel(2, 2, true), responses, file.at("clm_logit_symmetric2"), links);

    // Cuts mirrored at a free centre: the centre is a side bias.
    std::vector<Link> shifted{{.natural = 2, .terms = {{0, -0.5}, {1, -0.5}}},
                              {.natural = 3, .terms = {{0, -0.5}, {1, 0.5}}},
                              {.natural = 4, .terms = {{0, -0.5}, {1, 0.5}, {2, 1.0}}}};
    linkRun(shifted, 0, 3, 4);
    expectEqual(plainModel(2, 2, true, true), responses, file.at("clm_logit_symmetric"), shifted);
}

TEST(OrderedAnswers, SoupSurenessEqualsCumulativeLogitWithMirroredCuts) {
    const json file = reference::fits("ordinal_soup.json");
    const auto responses = orderedResponses(Table("soup_open.csv"), "sureness", {"test"}, 3, false);
    std::vector<Link> links;
    linkRun(links, 3, 0, 1);
    linkRun(links, 0, 2, 2);
    expectEqual(plainModel(1, 3, false), responses, file.at("logit_symmetric2"), links);

    std::vector<Link> shifted{{.natural = 1, .terms = {{0, -1.0}}}};
    linkRun(shifted, 3, 1, 2);
    linkRun(shifted, 0, 3, 3);
    expectEqual(plainModel(1, 3, false, true), responses, file.at("logit_symmetric"), shifted);
}

TEST(OrderedAnswers, SimulatedConfidenceEqualsCumulativeLogitWithMirroredCuts) {
    const json file = reference::fits("ordinal_sim_open.json");
    const auto responses =
        orderedResponses(Table("sim_ordinal_open.csv"), "y", {"dx1", "dx2", "dx3", "dx4"}, 2, true);
    std::vector<Link> links;
    linkRun(links, 5, 0, 1);
    linkRun(links, 0, 2, 5);
    expectEqual(plainModel(4, 2, true), responses, file.at("clm_symmetric2"), links);

    std::vector<Link> shifted{{.natural = 4, .terms = {{0, -0.5}, {1, -0.5}}},
                              {.natural = 5, .terms = {{0, -0.5}, {1, 0.5}}},
                              {.natural = 6, .terms = {{0, -0.5}, {1, 0.5}, {2, 1.0}}}};
    linkRun(shifted, 0, 3, 6);
    expectEqual(plainModel(4, 2, true, true), responses, file.at("clm_symmetric"), shifted);
}

/// The reference's item names without what their program put before them.
std::vector<std::string> itemsOf(const json& names, const std::string& prefix) {
    std::vector<std::string> items;
    for (const std::string name : names)
        items.push_back(name.substr(prefix.size()));
    return items;
}

TEST(PairedComparison, BaseballEqualsBradleyTerryWithAndWithoutHomeAdvantage) {
    const json file = reference::fits("bt_baseball.json");
    const auto items = itemsOf(file.at("no_home").at("terms"), "team");
    const Table table("baseball.csv");
    std::vector<Response> responses;
    double constant = 0;
    for (std::size_t row = 0; row < table.rows(); ++row) {
        const auto difference =
            reference::itemDifference(items, table.text(row, "home.team"), table.text(row, "away.team"));
        const double home = table.number(row, "home.wins"), away = table.number(row, "away.wins");
        reference::repeat(responses, difference, 1, home);
        reference::repeat(responses, difference, -1, away);
        constant += logChoose(home + away, home);
    }
    std::vector<Link> links;
    linkRun(links, 0, 0, items.size() - 1);
    expectEqual(plainModel(items.size(), 1, false), responses, file.at("no_home"), links, constant);
    linkRun(links, items.size(), items.size(), items.size()); // the advantage of the home side is a side bias
    expectEqual(plainModel(items.size(), 1, false, true), responses, file.at("home"), links, constant);
}

TEST(PairedComparison, CitationsEqualBradleyTerry) {
    const json file = reference::fits("bt_citations.json");
    const auto items = itemsOf(file.at("bt").at("terms"), "..");
    const Table table("citations.csv");
    std::vector<Response> responses;
    double constant = 0;
    for (std::size_t row = 0; row < table.rows(); ++row) {
        const auto difference =
            reference::itemDifference(items, table.text(row, "journal1"), table.text(row, "journal2"));
        const double first = table.number(row, "win1"), second = table.number(row, "win2");
        reference::repeat(responses, difference, 1, first);
        reference::repeat(responses, difference, -1, second);
        constant += logChoose(first + second, first);
    }
    std::vector<Link> links;
    linkRun(links, 0, 0, items.size() - 1);
    expectEqual(plainModel(items.size(), 1, false), responses, file.at("bt"), links, constant);
}

TEST(PairedComparison, PartiesEqualBradleyTerry) {
    const json fit = reference::fits("bt_german_parties.json").at("pooled");
    const auto items = itemsOf(fit.at("terms"), "X");
    const Table table("german_parties.csv");
    std::vector<Response> responses;
    for (std::size_t row = 0; row < table.rows(); ++row)
        reference::repeat(
            responses, reference::itemDifference(items, table.text(row, "item1"), table.text(row, "item2")),
            static_cast<int>(table.number(row, "y")), 1);
    std::vector<Link> links;
    linkRun(links, 0, 0, items.size() - 1);
    expectEqual(plainModel(items.size(), 1, false), responses, fit, links);
}

void addCounts(std::vector<Response>& responses, const std::vector<double>& difference, const Table& table,
               std::size_t row) {
    reference::repeat(responses, difference, 1, table.number(row, "win1"));
    reference::repeat(responses, difference, 0, table.number(row, "tie"));
    reference::repeat(responses, difference, -1, table.number(row, "win2"));
}

// Rao and Kupper (1967): ties by a threshold on the logistic scale, which is "cannot tell" with one level.
TEST(Ties, FlavourStrengthEqualsRaoKupper) {
    const json file = reference::fits("ties_springall.json");
    const Table contests("springall_contests.csv"), properties("springall_items.csv");
    const auto items = itemsOf(file.at("raokupper_items").at("beta_names"), "x_item");
    const auto features = itemsOf(file.at("raokupper_covariates").at("beta_names"), "x_");
    std::vector<Response> byItem, byFeature;
    for (std::size_t row = 0; row < contests.rows(); ++row) {
        const std::string first = contests.text(row, "item1"), second = contests.text(row, "item2");
        addCounts(byItem, reference::itemDifference(items, first, second), contests, row);
        std::vector<double> difference;
        for (const std::string& feature : features)
            difference.push_back(properties.number(static_cast<std::size_t>(std::stoi(first)) - 1, feature) -
                                 properties.number(static_cast<std::size_t>(std::stoi(second)) - 1, feature));
        addCounts(byFeature, difference, contests, row);
    }
    std::vector<Link> links;
    linkRun(links, items.size() + 1, 0, 0);
    linkRun(links, 0, 1, items.size());
    expectEqual(plainModel(items.size(), 1, true), byItem, file.at("raokupper_items"), links);
    links.clear();
    linkRun(links, features.size() + 1, 0, 0);
    linkRun(links, 0, 1, features.size());
    expectEqual(plainModel(features.size(), 1, true), byFeature, file.at("raokupper_covariates"), links);
}

TEST(Ties, SoundFieldsEqualRaoKupper) {
    const json file = reference::fits("ties_sound_fields.json");
    const Table table("sound_fields.csv");
    const auto items = itemsOf(file.at("raokupper_items").at("beta_names"), "x_");
    std::vector<Response> byItem, byDigit;
    for (std::size_t row = 0; row < table.rows(); ++row) {
        const std::string first = table.text(row, "field1"), second = table.text(row, "field2");
        addCounts(byItem, reference::itemDifference(items, first, second), table, row);
        std::vector<double> difference; // the three digits of the field's name
        for (std::size_t digit = 1; digit <= 3; ++digit)
            difference.push_back(static_cast<double>(first[digit] - second[digit]));
        addCounts(byDigit, difference, table, row);
    }
    std::vector<Link> links;
    linkRun(links, items.size() + 1, 0, 0);
    linkRun(links, 0, 1, items.size());
    expectEqual(plainModel(items.size(), 1, true), byItem, file.at("raokupper_items"), links);
    links.clear();
    linkRun(links, 4, 0, 0);
    linkRun(links, 0, 1, 3);
    expectEqual(plainModel(3, 1, true), byDigit, file.at("raokupper_abc"), links);
}

TEST(Ties, FootballEqualsRaoKupperWithHomeAdvantage) {
    const json fit = reference::fits("ties_football.json").at("raokupper_home");
    const Table table("football_open.csv");
    const auto teams = itemsOf(fit.at("beta_names"), "x_");
    std::vector<Response> responses;
    for (std::size_t row = 0; row < table.rows(); ++row)
        reference::repeat(responses,
                          reference::itemDifference(teams, table.text(row, "home"), table.text(row, "away")),
                          static_cast<int>(table.number(row, "result")), 1);
    const std::size_t d = teams.size();
    std::vector<Link> links{{.natural = d, .terms = {{0, -0.5}, {1, -0.5}}},
                            {.natural = d + 1, .terms = {{0, -0.5}, {1, 0.5}}}};
    linkRun(links, 0, 2, d + 1);
    expectEqual(plainModel(d, 1, true, true), responses, fit, links);
}

void expectNoMaximum(const ResponseModel& model, const std::vector<Response>& responses) {
    const Result<LikelihoodMaximum> maximum = maximiseLikelihood(ResponseLikelihood(model, responses));
    ASSERT_FALSE(maximum);
    EXPECT_EQ(maximum.error().code, "preference.no-maximum");
    EXPECT_FALSE(maximum.error().remedy.empty());
}

TEST(LikelihoodMaximum, DoesNotExistForSeparableAnswers) {
    for (const double unit : {1e-3, 1.0, 1e3})
        expectNoMaximum(plainModel(2, 1, false), {{{unit, 0.2 * unit}, 1},
                                                  {{2 * unit, -0.1 * unit}, 1},
                                                  {{-unit, 0.3 * unit}, -1},
                                                  {{0.5 * unit, unit}, 1}});
}

// One weight is determined, the other goes to infinity.
TEST(LikelihoodMaximum, DoesNotExistForPartlySeparableAnswers) {
    expectNoMaximum(plainModel(2, 1, false),
                    {{{1, 0}, 1}, {{1, 0}, 1}, {{1, 0}, -1}, {{1, 1}, 1}, {{-1, 1}, 1}, {{0.5, -1}, -1}});
}

TEST(LikelihoodMaximum, DoesNotExistWithoutAnswersOrForAFeatureThatNeverVaried) {
    expectNoMaximum(plainModel(1, 1, false), {});
    expectNoMaximum(plainModel(2, 1, false), {{{1, 0}, 1}, {{1, 0}, -1}, {{-2, 0}, -1}});
    expectNoMaximum(plainModel(2, 1, false), {{{1, 2}, 1}, {{1, 2}, -1}, {{-2, -4}, -1}});
}

TEST(LikelihoodMaximum, DoesNotExistForALevelThatWasNeverUsed) {
    expectNoMaximum(plainModel(1, 2, false), {{{1}, 1}, {{1}, -1}, {{-2}, -1}});
}

TEST(LikelihoodMaximum, FollowsTheUnitsOfTheFeatures) {
    const std::vector<Response> plain{{{1}, 1}, {{1}, -1}, {{-2}, -1}, {{0.4}, 1}, {{3}, 1}};
    const auto expected = maximiseLikelihood(ResponseLikelihood(plainModel(1, 1, false), plain));
    ASSERT_TRUE(expected);
    for (const double unit : {1e-6, 1e6}) {
        std::vector<Response> scaled = plain;
        for (Response& response : scaled)
            response.difference[0] *= unit;
        const auto maximum = maximiseLikelihood(ResponseLikelihood(plainModel(1, 1, false), scaled));
        ASSERT_TRUE(maximum);
        EXPECT_NEAR(maximum->natural[0] * unit / expected->natural[0], 1, 1e-9);
    }
}

} // namespace
} // namespace whichway
