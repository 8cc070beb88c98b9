// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/study/protocol.h"

#include <vector>

namespace whichway::reference {

// A small table of our own: eight motions, four features, of which the third is capped and the fourth
// logarithmic. The expected values were computed with numpy 1.24.2 and scipy 1.10.1: numpy.percentile
// (linear), mean, std with ddof 0, numpy.corrcoef, the diagonal of numpy.linalg.inv of it, and
// scipy.stats.skew (biased).

inline const std::vector<std::vector<double>> kRaw = {
    {4.0, 0.9, 0.35, 12.5}, {4.6, 1.1, 0.30, 3.5}, {5.2, 0.7, 0.85, 1.75}, {5.9, 1.6, 0.40, 0.5},
    {6.1, 1.3, 0.55, 40.0}, {7.4, 2.0, 0.20, 7.0}, {8.8, 1.9, 0.65, 2.25}, {9.5, 2.6, 0.25, 90.0}};
inline const double kLowCap = 0.2175, kHighCap = 0.7799999999999999;
inline const std::vector<double> kMean = {6.4375, 1.5125, 0.43718749999999995, 1.823811213736868};
inline const std::vector<double> kDeviation = {1.8418316291127157, 0.5946374946133148, 0.18928912037872117,
                                               1.5981370856824744};
inline const std::vector<std::vector<double>> kStandardised = {
    {-1.3234108707179937, -1.030039318994341, -0.46060491921331315, 0.43920977546906603},
    {-0.9976481948489493, -0.6936999495268009, -0.7247511094431702, -0.35732119000144313},
    {-0.6718855189799045, -1.3663786884618812, 1.8110523167634576, -0.7910431696549853},
    {-0.29182906379935225, 0.14714847414204896, -0.19645872898345584, -1.5749327243863827},
    {-0.18324150517633778, -0.3573605800592611, 0.5959798417061155, 1.1670264441555103},
    {0.5225776258732593, 0.8198272130771287, -1.1605923233224342, 0.07640078965209895},
    {1.2826905362343635, 0.6516575283433585, 1.1242722221658297, -0.6337885570611077},
    {1.662746991414915, 1.8288453214797487, -0.9888972996730272, 1.6744486318272431}};
inline const std::vector<std::vector<double>> kCorrelation = {
    {1, 0.9126287796188358, -0.09309647000675143, 0.3204543679607352},
    {0.9126287796188358, 1, -0.4708319400622399, 0.36743332450840643},
    {-0.09309647000675143, -0.4708319400622399, 1, -0.3535123840574456},
    {0.3204543679607352, 0.36743332450840643, -0.3535123840574456, 1}};
inline const std::vector<double> kInflation = {59.918896971329545, 73.39717525533699, 13.498532144726699,
                                               1.5680087880153906};
inline const std::vector<double> kSkewness = {0.40062949875067516, 0.3655628464987176, 0.569563238363195,
                                              0.20846263239820118};
inline const std::vector<double> kMedian = {6.0, 1.4500000000000002, 0.375, 5.25};
inline const std::vector<double> kRawMean = {6.4375, 1.5125, 0.44375000000000003, 19.6875};
inline const std::vector<double> kRawDeviation = {1.8418316291127157, 0.5946374946133148, 0.20832291640623699,
                                                  29.20850421966178};

inline std::vector<FeatureDefinition> features() {
    std::vector<FeatureDefinition> features(4);
    const char* names[] = {"time", "distance", "share", "load"};
    for (std::size_t j = 0; j < features.size(); ++j)
        features[j].name = features[j].label = names[j];
    features[2].scale = FeatureScale::Capped;
    features[3].scale = FeatureScale::Log;
    return features;
}

inline std::vector<std::string> motions(std::size_t count) {
    std::vector<std::string> names;
    for (std::size_t i = 0; i < count; ++i)
        names.push_back("m" + std::to_string(i));
    return names;
}

inline Matrix matrixOf(const std::vector<std::vector<double>>& rows) {
    Matrix matrix(rows.size(), rows.front().size());
    for (std::size_t i = 0; i < matrix.rows; ++i)
        for (std::size_t j = 0; j < matrix.columns; ++j)
            matrix(i, j) = rows[i][j];
    return matrix;
}

} // namespace whichway::reference
