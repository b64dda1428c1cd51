// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/measure/reading.h"
#include "core/signal/fourier.h"
#include "core/units.h"

#include <complex>
#include <cstddef>
#include <span>
#include <vector>

namespace sinewright::core {

/// Rising edge of the taper: a raised cosine over the first sixteenth of a stretch; the last sixteenth mirrors it.
///
/// Nearly every sample counts in full, so that the noise found is the noise that was there; yet what the fit left
/// over does not leak far.
[[nodiscard]] std::vector<double> taperEdge(std::size_t samples);

/// Sum of the squared taper over a stretch.
[[nodiscard]] double taperPower(std::span<const double> edge, std::size_t samples);

/// Tapers both ends in place.
void applyTaper(std::span<const double> edge, std::span<double> samples);

/// Spectrum of what is left of a stretch once DC, fundamental and harmonics are taken out.
///
/// Frequencies are in bins: cycles over the stretch.
class ResidualSpectrum final
{
public:
    /// @param transform    of the tapered residual, zero-padded to an even length; must outlive this object.
    /// @param taperPowerSum  taperPower() of the taper.
    /// @param linePeriods  places of the lines that were taken out [bins], ascending; the first is the fundamental.
    /// @param gapBins      half width of the gap that each left.
    ResidualSpectrum(const RealFourier& transform,
                     std::size_t samples,
                     double taperPowerSum,
                     std::vector<double> linePeriods,
                     double gapBins);

    [[nodiscard]] std::size_t size() const { return m_transform.size(); }
    [[nodiscard]] std::size_t samples() const { return m_samples; }
    [[nodiscard]] double position(std::size_t index) const
    {
        return static_cast<double>(index) * m_binsPerIndex;
    }
    [[nodiscard]] std::size_t indexAt(double bins) const;

    /// Mean square [FS^2] that one index of the transform stands for, both halves of the spectrum together.
    [[nodiscard]] double powerFs2(std::size_t index) const;

    /// Largest powerFs2() of all.
    [[nodiscard]] double largestPowerFs2() const;

    /// What noise is expected to put into one index, from the median of nearby indices that no line occupies.
    struct Density
    {
        double powerFs2 = 0.0;    ///< mean square an index; 0 when there are no such indices
        double independent = 0.0; ///< of how many independent powers the mean would be as good
    };

    /// About a place, from the nearest indices within a range [bins].
    [[nodiscard]] Density localDensity(double bins, double lowBins, double highBins) const;

    /// About a place, from the nearest indices wherever they lie.
    [[nodiscard]] double localPowerFs2(double bins) const;

    /// Median of the in-band power an index, brought to the mean of noise.
    [[nodiscard]] double medianPowerFs2(double lowBins, double highBins) const;

    /// Power of noise in a band and how far another stretch of the same noise would differ.
    struct BandPower
    {
        double powerFs2 = 0.0;    ///< mean square
        double varianceFs4 = 0.0; ///< of powerFs2
    };

    /// Mean square in a band, the gaps under the lines filled with the density beside them.
    ///
    /// An index's power is exponentially spread about its density S, so that half its mean square is S^2; the variance
    /// is the sum of S^2 over independent bins times the taper's N sum w^4 / (sum w^2)^2, and what the fillings' own
    /// scatter adds (Welch 1967, from memory, for a single stretch).
    ///
    /// @param weighting  applied to each frequency; `binHz` is the width of a bin.
    [[nodiscard]] BandPower
    bandPower(double lowBins, double highBins, Weighting weighting, double binHz) const;

    /// Amplitude and place of a line near an index, by a raised-cosine window and the ratio of two neighbours.
    struct Line
    {
        double bins = 0.0;
        double amplitude = 0.0;
    };
    [[nodiscard]] Line lineAt(std::size_t index) const;

    /// Squared magnitude at an index seen through a raised-cosine window; of use relative to others.
    [[nodiscard]] double smoothPower(std::size_t index) const;

    /// True within `extraBins` of a gap.
    [[nodiscard]] bool isInGap(double bins, double extraBins = 0.0) const;

    /// True where the fundamental or any multiple of it lies within a gap and `extraBins`, whether it was taken out or
    /// not.
    [[nodiscard]] bool isNearMultiple(double bins, double extraBins) const;

private:
    [[nodiscard]] std::complex<double> smooth(std::size_t index) const;

    std::span<const std::complex<double>> m_transform;
    std::span<const double> m_powers;
    std::size_t m_samples;
    double m_powerScale;
    double m_binsPerIndex;
    std::vector<double> m_lines;
    double m_gapBins;
};

} // namespace sinewright::core
