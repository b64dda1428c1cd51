// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <cmath>
#include <complex>
#include <cstddef>
#include <numbers>
#include <span>
#include <vector>

#include <Eigen/Cholesky>
#include <Eigen/Core>

namespace sinewright::tests {

/// What a least-squares fit of a constant, a fundamental with evenly changing amplitude and its harmonics says.
struct HarmonicFit
{
    double frequencyHz = 0.0;
    double dc = 0.0;
    double levelRms = 0.0; ///< of the fundamental
    std::vector<std::complex<double>>
        relative; ///< [k]: harmonic k over the fundamental, sine convention, fundamental's phase taken out

    [[nodiscard]] double ratio(std::size_t order) const { return std::abs(relative[order]); }
    [[nodiscard]] double phaseDeg(std::size_t order) const
    {
        return std::arg(relative[order]) * 180.0 / std::numbers::pi;
    }

    /// Root of the sum of squares of harmonics 2 to the highest fitted.
    [[nodiscard]] double thd() const
    {
        double sum = 0.0;
        for (std::size_t k = 2; k < relative.size(); ++k) {
            sum += std::norm(relative[k]);
        }
        return std::sqrt(sum);
    }
};

namespace detail {

/// Frequency from the first and last upward crossings of the middle line.
inline double crossingFrequency(std::span<const double> x, double rateHz)
{
    double mean = 0.0;
    for (const double v : x) {
        mean += v / static_cast<double>(x.size());
    }
    double first = 0.0;
    double last = 0.0;
    int crossings = 0;
    for (std::size_t i = 1; i < x.size(); ++i) {
        const double a = x[i - 1] - mean;
        const double b = x[i] - mean;
        if (a < 0.0 && b >= 0.0) {
            last = static_cast<double>(i - 1) + a / (a - b);
            first = crossings == 0 ? last : first;
            ++crossings;
        }
    }
    return crossings < 2 ? 0.0 : (crossings - 1) * rateHz / (last - first);
}

/// Normal equations of columns {1, sin k, cos k ..., t sin, t cos} about the middle of `x`.
inline Eigen::VectorXd
solveFit(std::span<const double> x, double rateHz, double frequencyHz, int highest)
{
    const Eigen::Index columns = 1 + 2 * highest + 2;
    Eigen::MatrixXd gram = Eigen::MatrixXd::Zero(columns, columns);
    Eigen::VectorXd right = Eigen::VectorXd::Zero(columns);
    Eigen::VectorXd row(columns);
    const double middle = static_cast<double>(x.size() - 1) / 2.0;
    const double scale = 2.0 / static_cast<double>(x.size()); // the time column runs from -1 to 1
    for (std::size_t i = 0; i < x.size(); ++i) {
        const double from = static_cast<double>(i) - middle;
        const std::complex<double> turn =
            std::polar(1.0, 2.0 * std::numbers::pi * frequencyHz * from / rateHz);
        std::complex<double> power = turn;
        row(0) = 1.0;
        for (Eigen::Index k = 1; k <= highest; ++k, power *= turn) {
            row(2 * k - 1) = power.imag();
            row(2 * k) = power.real();
        }
        row(columns - 2) = from * scale * turn.imag();
        row(columns - 1) = from * scale * turn.real();
        gram.selfadjointView<Eigen::Lower>().rankUpdate(row);
        right += x[i] * row;
    }
    return gram.selfadjointView<Eigen::Lower>().ldlt().solve(right);
}

/// Frequency correction [Hz] that the slope columns of a fit ask for.
inline double frequencyStep(const Eigen::VectorXd& q, double spanS)
{
    const Eigen::Index n = q.size();
    const double quadrature = q(1) * q(n - 1) - q(2) * q(n - 2);
    return quadrature / (q(1) * q(1) + q(2) * q(2)) / (std::numbers::pi * spanS);
}

} // namespace detail

/// Fits `x`, which must hold a steady tone far above everything else for at least ten periods.
///
/// Written for the tests alone and by another method than the program's own, so that the two can be held against each
/// other.
///
/// @param highest  order of the highest harmonic; those above 0.47 of the rate are left out.
inline HarmonicFit fitHarmonics(std::span<const double> x, double rateHz, int highest = 12)
{
    constexpr double kHighestOfRate = 0.47;
    constexpr int kRefinements = 4;
    double frequency = detail::crossingFrequency(x, rateHz);
    if (frequency <= 0.0) {
        return {};
    }
    for (int i = 0; i < kRefinements; ++i) {
        const Eigen::VectorXd q = detail::solveFit(x, rateHz, frequency, 1);
        frequency += detail::frequencyStep(q, static_cast<double>(x.size()) / rateHz);
    }
    const int orders = std::min(highest, static_cast<int>(kHighestOfRate * rateHz / frequency));
    const Eigen::VectorXd q = detail::solveFit(x, rateHz, frequency, orders);
    const std::complex<double> fundamental{q(1), q(2)};
    HarmonicFit fit;
    fit.frequencyHz = frequency;
    fit.dc = q(0);
    fit.levelRms = std::abs(fundamental) / std::numbers::sqrt2;
    fit.relative.resize(static_cast<std::size_t>(orders) + 1);
    for (int k = 1; k <= orders; ++k) {
        const std::complex<double> turnBack = std::polar(1.0, -k * std::arg(fundamental));
        fit.relative[static_cast<std::size_t>(k)] =
            std::complex<double>{q(2 * k - 1), q(2 * k)} * turnBack / std::abs(fundamental);
    }
    return fit;
}

} // namespace sinewright::tests
