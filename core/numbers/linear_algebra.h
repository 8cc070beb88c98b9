// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <cstddef>
#include <span>
#include <vector>

namespace whichway {

// Small dense linear algebra whose order of operations is fixed, so that the same input gives the same bits
// on any machine (Eigen's products and factorisations change theirs with cache sizes and alignment). It
// serves what leads to a plan; elsewhere use Eigen.

/// A dense matrix, row by row. A plain value.
struct Matrix {
    std::size_t rows = 0;
    std::size_t columns = 0;
    std::vector<double> values = {}; ///< rows x columns

    Matrix() = default;
    Matrix(std::size_t rowCount, std::size_t columnCount, double fill = 0)
        : rows(rowCount), columns(columnCount), values(rowCount * columnCount, fill) {}

    double& operator()(std::size_t row, std::size_t column) { return values[row * columns + column]; }
    double operator()(std::size_t row, std::size_t column) const { return values[row * columns + column]; }
    std::span<double> row(std::size_t index) { return {values.data() + index * columns, columns}; }
    std::span<const double> row(std::size_t index) const {
        return {values.data() + index * columns, columns};
    }
    bool operator==(const Matrix&) const = default;
};

/// Sum of a_i b_i in order of i. @throws std::invalid_argument if the lengths differ.
double dot(std::span<const double> a, std::span<const double> b);

/// Lower Cholesky factor L of the symmetric positive definite A = L L', reading A's lower triangle.
/// @return false, and `lower` unspecified, if A is not positive definite.
/// @throws std::invalid_argument if A is not square.
[[nodiscard]] bool cholesky(const Matrix& a, Matrix& lower);

/// Solves L y = b, then L' x = y in place, for a lower Cholesky factor L. Lengths must agree.
void solveLower(const Matrix& lower, std::span<double> b);
void solveLowerTransposed(const Matrix& lower, std::span<double> b);

/// The inverse of L L'.
Matrix inverseFromCholesky(const Matrix& lower);

} // namespace whichway
