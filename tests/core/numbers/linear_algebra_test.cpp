// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/numbers/linear_algebra.h"

#include "core/random.h"

#include <Eigen/Dense>
#include <gtest/gtest.h>

using namespace whichway;

// Reference: Eigen, a general-purpose library.
class CholeskyOfSize : public ::testing::TestWithParam<int> {};

TEST_P(CholeskyOfSize, SolvesAndInvertsAsEigenDoes) {
    const int n = GetParam();
    Random random(static_cast<std::uint64_t>(n));
    Eigen::MatrixXd root(n, n);
    for (int i = 0; i < n * n; ++i)
        root.data()[i] = random.normal();
    const Eigen::MatrixXd a = root * root.transpose() + Eigen::MatrixXd::Identity(n, n);
    Matrix ours(static_cast<std::size_t>(n), static_cast<std::size_t>(n));
    for (int i = 0; i < n; ++i)
        for (int j = 0; j < n; ++j)
            ours(static_cast<std::size_t>(i), static_cast<std::size_t>(j)) = a(i, j);

    Matrix lower;
    ASSERT_TRUE(cholesky(ours, lower));
    const Eigen::MatrixXd expectedLower = a.llt().matrixL();
    const Eigen::MatrixXd expectedInverse = a.inverse();
    const Matrix inverse = inverseFromCholesky(lower);
    for (int i = 0; i < n; ++i)
        for (int j = 0; j < n; ++j) {
            const auto r = static_cast<std::size_t>(i), c = static_cast<std::size_t>(j);
            ASSERT_NEAR(lower(r, c), expectedLower(i, j), 1e-12 * a.norm());
            ASSERT_NEAR(inverse(r, c), expectedInverse(i, j), 1e-12 * expectedInverse.norm());
        }
}

INSTANTIATE_TEST_SUITE_P(Sizes, CholeskyOfSize, ::testing::Values(1, 2, 3, 8, 17, 40));

TEST(Cholesky, SaysWhenAMatrixIsNotPositiveDefinite) {
    Matrix a(2, 2);
    a(0, 0) = 1;
    a(1, 0) = a(0, 1) = 2;
    a(1, 1) = 1;
    Matrix lower;
    EXPECT_FALSE(cholesky(a, lower));
    EXPECT_THROW((void)cholesky(Matrix(2, 3), lower), std::invalid_argument);
}
