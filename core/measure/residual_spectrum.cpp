// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/measure/residual_spectrum.h"

#include "core/signal/noise_level.h"
#include "core/signal/weighting.h"

#include <algorithm>
#include <cmath>
#include <numbers>

#include <Eigen/Core>

namespace sinewright::core {

namespace {

constexpr double kPi = std::numbers::pi;
constexpr double kTaperShare = 1.0 / 16.0;

/// N sum w^4 / (sum w^2)^2 of the taper: sin^4 has the mean 3 / 8 over an edge, sin^8 has 35 / 128.
constexpr double kTaperMean2 = 1.0 - 2.0 * kTaperShare * (1.0 - 3.0 / 8.0);
constexpr double kTaperMean4 = 1.0 - 2.0 * kTaperShare * (1.0 - 35.0 / 128.0);
constexpr double kTaperSpread = kTaperMean4 / (kTaperMean2 * kTaperMean2);

constexpr std::size_t kLocalIndices = 64;   ///< wanted on both sides together for a local density
constexpr std::ptrdiff_t kLocalReach = 512; ///< how far they are looked for on each side

} // namespace

std::vector<double> taperEdge(std::size_t samples)
{
    std::vector<double> edge(static_cast<std::size_t>(static_cast<double>(samples) * kTaperShare));
    for (std::size_t n = 0; n < edge.size(); ++n) {
        const double s =
            std::sin(kPi / 2.0 * (static_cast<double>(n) + 0.5) / static_cast<double>(edge.size()));
        edge[n] = s * s;
    }
    return edge;
}

double taperPower(std::span<const double> edge, std::size_t samples)
{
    double power = static_cast<double>(samples - 2 * edge.size());
    for (const double w : edge) {
        power += 2.0 * w * w;
    }
    return power;
}

void applyTaper(std::span<const double> edge, std::span<double> samples)
{
    for (std::size_t n = 0; n < edge.size(); ++n) {
        samples[n] *= edge[n];
        samples[samples.size() - 1 - n] *= edge[n];
    }
}

ResidualSpectrum::ResidualSpectrum(const RealFourier& transform,
                                   std::size_t samples,
                                   double taperPowerSum,
                                   std::vector<double> linePeriods,
                                   double gapBins)
    : m_transform(transform.output())
    , m_powers(transform.powers())
    , m_samples(samples)
    , m_powerScale(2.0 / (static_cast<double>(transform.count()) * taperPowerSum))
    , m_binsPerIndex(static_cast<double>(samples) / static_cast<double>(transform.count()))
    , m_lines(std::move(linePeriods))
    , m_gapBins(gapBins)
{}

std::size_t ResidualSpectrum::indexAt(double bins) const
{
    const double index = std::round(bins / m_binsPerIndex);
    return static_cast<std::size_t>(std::clamp(index, 0.0, static_cast<double>(size() - 1)));
}

double ResidualSpectrum::powerFs2(std::size_t index) const
{
    const bool isEdge =
        index == 0 || index + 1 == size(); // 0 and half the rate stand for themselves alone
    return m_powers[index] * (isEdge ? m_powerScale / 2.0 : m_powerScale);
}

bool ResidualSpectrum::isInGap(double bins, double extraBins) const
{
    const double reach = m_gapBins + extraBins;
    const auto above = std::ranges::lower_bound(m_lines, bins);
    return (above != m_lines.end() && *above - bins <= reach) ||
           (above != m_lines.begin() && bins - *(above - 1) <= reach) || bins <= reach;
}

bool ResidualSpectrum::isNearMultiple(double bins, double extraBins) const
{
    return std::abs(std::remainder(bins, m_lines.front())) <= m_gapBins + extraBins;
}

ResidualSpectrum::Density
ResidualSpectrum::localDensity(double bins, double lowBins, double highBins) const
{
    const auto middle = static_cast<std::ptrdiff_t>(indexAt(bins));
    const auto last = static_cast<std::ptrdiff_t>(size()) - 2; // half the rate itself is left out
    std::vector<double> powers;
    powers.reserve(kLocalIndices + 2);
    const auto collect = [&](std::ptrdiff_t at) {
        const auto index = static_cast<std::size_t>(std::clamp<std::ptrdiff_t>(at, 0, last));
        const double place = position(index);
        if (at > 0 && at <= last && place >= lowBins && place <= highBins && !isInGap(place)) {
            powers.push_back(powerFs2(index));
        }
    };
    for (std::ptrdiff_t step = 1; step <= kLocalReach && powers.size() < kLocalIndices; ++step) {
        collect(middle + step);
        collect(middle - step);
    }
    if (powers.empty()) {
        return {};
    }
    const double independent = kMedianEfficiency * static_cast<double>(powers.size());
    return {meanFromMedian(powers), independent};
}

double ResidualSpectrum::localPowerFs2(double bins) const
{
    return localDensity(bins, 0.0, static_cast<double>(m_samples)).powerFs2;
}

double ResidualSpectrum::medianPowerFs2(double lowBins, double highBins) const
{
    // The gaps are few beside the rest and empty rather than full: they may stay in.
    const std::size_t first = std::max<std::size_t>(indexAt(lowBins), 1);
    const std::size_t end = std::min(indexAt(highBins) + 1, size() - 1);
    return end > first ? meanFromMedian(m_powers.subspan(first, end - first)) * m_powerScale : 0.0;
}

ResidualSpectrum::BandPower ResidualSpectrum::bandPower(double lowBins,
                                                        double highBins,
                                                        Weighting weighting,
                                                        double binHz) const
{
    const auto first = static_cast<std::size_t>(std::max(1.0, std::ceil(lowBins / m_binsPerIndex)));
    const auto last = static_cast<std::size_t>(
        std::clamp(std::floor(highBins / m_binsPerIndex), 0.0, static_cast<double>(size() - 1)));
    const auto factor2 = [&](std::size_t index) {
        const double factor = weightingFactor(weighting, position(index) * binHz);
        return factor * factor;
    };
    if (last < first) {
        return {};
    }
    double sum = 0.0;
    double squares = 0.0;
    if (weighting == Weighting::None) {
        const auto inside = m_powers.subspan(first, last - first + 1);
        const Eigen::Map<const Eigen::ArrayXd> powers(inside.data(),
                                                      static_cast<Eigen::Index>(inside.size()));
        sum = powers.sum() * m_powerScale;
        squares = powers.square().sum() * m_powerScale * m_powerScale;
        sum -= last + 1 == size() ? powerFs2(last) : 0.0; // half the rate stands for itself alone
    } else {
        for (std::size_t index = first; index <= last; ++index) {
            const double power = powerFs2(index) * factor2(index);
            sum += power;
            squares += power * power;
        }
    }
    // What little the fit left in the gaps goes out again, the density beside them comes in.
    double fillVariance = 0.0;
    double together = 0.0; // standard deviation of the fillings that scatter as one
    double lineBefore = -static_cast<double>(m_samples);
    std::size_t next = first;
    for (const double line : m_lines) {
        const double from = std::ceil((line - m_gapBins) / m_binsPerIndex);
        const auto gapFirst = std::max(next, static_cast<std::size_t>(std::max(0.0, from)));
        const auto gapLast = static_cast<std::size_t>(
            std::max(0.0, std::floor((line + m_gapBins) / m_binsPerIndex)));
        if (gapFirst > last || gapLast < gapFirst) {
            continue;
        }
        const auto density = localDensity(line, 0.0, static_cast<double>(m_samples));
        double filled = 0.0;
        for (std::size_t index = gapFirst; index <= std::min(gapLast, last); ++index) {
            const double factor = factor2(index);
            const double out = powerFs2(index) * factor;
            const double in = density.powerFs2 * factor;
            sum += in - out;
            // A filling moves with the sum, for the powers it comes from are in the sum as well: with n exponential
            // powers of density S the covariance of their sum and any estimate of scale d is d S (Basu's theorem).
            squares += 4.0 * in * in - out * out;
            filled += in;
        }
        if (density.independent > 0.0) {
            // Fillings of lines that share their neighbours scatter together, others on their own.
            const double fillStd = filled / std::sqrt(density.independent);
            const bool isShared = line - lineBefore < kLocalIndices * m_binsPerIndex;
            const double togetherBefore = isShared ? together : 0.0;
            together = togetherBefore + fillStd;
            fillVariance += together * together - togetherBefore * togetherBefore;
            lineBefore = line;
        }
        next = gapLast + 1;
    }
    const double variance = std::max(squares, 0.0) / 2.0 * kTaperSpread / m_binsPerIndex;
    return {std::max(sum, 0.0), variance + fillVariance};
}

double ResidualSpectrum::largestPowerFs2() const
{
    return Eigen::Map<const Eigen::ArrayXd>(m_powers.data(),
                                            static_cast<Eigen::Index>(m_powers.size()))
               .maxCoeff() *
           m_powerScale;
}

std::complex<double> ResidualSpectrum::smooth(std::size_t index) const
{
    // A raised cosine over the stretch, as a convolution; counted from the first sample its neighbours enter with
    // the sign changed.
    return 0.5 * m_transform[index] - 0.25 * (m_transform[index - 1] + m_transform[index + 1]);
}

double ResidualSpectrum::smoothPower(std::size_t index) const
{
    return index == 0 || index + 1 >= size() ? 0.0 : std::norm(smooth(index));
}

ResidualSpectrum::Line ResidualSpectrum::lineAt(std::size_t index) const
{
    if (index < 2 || index + 2 >= size()) {
        return {position(index), 0.0};
    }
    const double here = std::abs(smooth(index));
    const double before = std::abs(smooth(index - 1));
    const double after = std::abs(smooth(index + 1));
    if (!(here > 0.0)) {
        return {position(index), 0.0};
    }
    // Raised cosine: with r the ratio to the larger neighbour the line lies (2 r - 1) / (r + 1) bins towards it.
    // @source  Grandke, IEEE Trans. Instrum. Meas. 32 (1983) 350-355, from memory.
    const bool isAbove = after >= before;
    const double ratio = std::max(before, after) / here;
    const double offset = std::clamp((2.0 * ratio - 1.0) / (ratio + 1.0), 0.0, 0.5);
    const double shape =
        offset == 0.0 ? 1.0 : std::sin(kPi * offset) / (kPi * offset * (1.0 - offset * offset));
    const double amplitude = here * 4.0 / (static_cast<double>(m_samples) * shape);
    return {position(index) + (isAbove ? offset : -offset) * m_binsPerIndex, amplitude};
}

} // namespace sinewright::core
