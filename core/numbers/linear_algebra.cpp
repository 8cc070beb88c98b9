// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/numbers/linear_algebra.h"

#include <cmath>
#include <stdexcept>

namespace whichway {

double dot(std::span<const double> a, std::span<const double> b) {
    if (a.size() != b.size())
        throw std::invalid_argument("dot: lengths differ");
    double sum = 0;
    for (std::size_t i = 0; i < a.size(); ++i)
        sum += a[i] * b[i];
    return sum;
}

bool cholesky(const Matrix& a, Matrix& lower) {
    if (a.rows != a.columns)
        throw std::invalid_argument("cholesky: the matrix is not square");
    const std::size_t n = a.rows;
    lower = Matrix(n, n);
    for (std::size_t j = 0; j < n; ++j) {
        double diagonal = a(j, j);
        for (std::size_t k = 0; k < j; ++k)
            diagonal -= lower(j, k) * lower(j, k);
        if (!(diagonal > 0))
            return false;
        const double root = std::sqrt(diagonal); // IEEE 754 fixes the square root
        lower(j, j) = root;
        for (std::size_t i = j + 1; i < n; ++i) {
            double sum = a(i, j);
            for (std::size_t k = 0; k < j; ++k)
                sum -= lower(i, k) * lower(j, k);
            lower(i, j) = sum / root;
        }
    }
    return true;
}

void solveLower(const Matrix& lower, std::span<double> b) {
    if (lower.rows != b.size())
        throw std::invalid_argument("solveLower: lengths differ");
    for (std::size_t i = 0; i < b.size(); ++i) {
        double sum = b[i];
        for (std::size_t k = 0; k < i; ++k)
            sum -= lower(i, k) * b[k];
        b[i] = sum / lower(i, i);
    }
}

void solveLowerTransposed(const Matrix& lower, std::span<double> b) {
    if (lower.rows != b.size())
        throw std::invalid_argument("solveLowerTransposed: lengths differ");
    for (std::size_t i = b.size(); i-- > 0;) {
        double sum = b[i];
        for (std::size_t k = i + 1; k < b.size(); ++k)
            sum -= lower(k, i) * b[k];
        b[i] = sum / lower(i, i);
    }
}

Matrix inverseFromCholesky(const Matrix& lower) {
    const std::size_t n = lower.rows;
    Matrix inverse(n, n);
    std::vector<double> column(n);
    for (std::size_t j = 0; j < n; ++j) {
        column.assign(n, 0.0);
        column[j] = 1.0;
        solveLower(lower, column);
        solveLowerTransposed(lower, column);
        for (std::size_t i = 0; i < n; ++i)
            inverse(i, j) = column[i];
    }
    return inverse;
}

} // namespace whichway
