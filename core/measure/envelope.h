// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/measure/line_fit.h"

#include <complex>
#include <cstddef>
#include <span>
#include <vector>

namespace sinewright::core {

/// How a stretch is cut into blocks for looking at the fundamental from one moment to the next.
///
/// A block holds at least one period; there are at most 64 of them unless they would grow longer than 1024 samples.
struct BlockGrid
{
    std::size_t samples = 0; ///< of the stretch
    std::size_t length = 0;  ///< of a block; the last one may be shorter
    std::size_t blocks = 0;

    BlockGrid(std::size_t stretchSamples, double periods);

    /// Length of one block.
    [[nodiscard]] std::size_t lengthOf(std::size_t block) const;
    /// Middle of a full block, or where it would be, counted from the stretch's middle [samples].
    [[nodiscard]] double middleOf(std::size_t block) const;
    /// Where the samples of a block lie on average [samples from the stretch's middle].
    [[nodiscard]] double centroidOf(std::size_t block) const;
};

/// The fundamental over a stretch: amplitude and phase against a carrier of fixed frequency.
///
/// Its shape is c(tau) exp(i (phase + turn tau + bend tau^2)), tau = 2 t / N from -1 to 1, with c a complex polynomial
/// of low degree: a settling or drifting tone is followed, faster modulation is left to the residual.
class Envelope final
{
public:
    /// @param blockPhasors  fundamental's amplitude and phase against `periods`, one a block.
    /// @param degree        of the polynomial, 0 .. 5; less than the number of blocks.
    Envelope(const BlockGrid& grid,
             std::span<const std::complex<double>> blockPhasors,
             double periods,
             int degree);

    /// Amplitude and phase against the carrier at a moment, tau from -1 to 1.
    [[nodiscard]] std::complex<double> at(double tau) const;

    /// Least-squares frequency over the whole stretch [periods a stretch]: the slope of the phase.
    [[nodiscard]] double periods() const { return m_periods; }
    /// Amplitude of the fundamental, averaged over the stretch.
    [[nodiscard]] double amplitude() const { return m_amplitude; }
    /// Relative level change between the highest and the lowest point of the fitted parabola.
    [[nodiscard]] double levelChange() const { return m_levelChange; }
    /// Change of frequency from the first to the last sample [periods a stretch], from the phase's parabola.
    [[nodiscard]] double periodsChange() const { return m_periodsChange; }

private:
    void fitCarrier(const BlockGrid& grid, std::span<const std::complex<double>> blockPhasors);
    void fitPolynomial(const BlockGrid& grid, std::span<const std::complex<double>> blockPhasors);
    void readFigures(double carrierPeriods);

    double m_phase = 0.0;
    double m_turn = 0.0;
    double m_bend = 0.0;
    std::vector<std::complex<double>> m_legendre; ///< coefficients of c in Legendre polynomials
    double m_periods = 0.0;
    double m_amplitude = 0.0;
    double m_levelChange = 0.0;
    double m_periodsChange = 0.0;
};

/// True when the tone is found again in each quarter: at least a quarter of the mean amplitude, and the frequency
/// within half a bin of the quarter's own resolution.
[[nodiscard]] bool isInEachQuarter(const BlockGrid& grid,
                                   std::span<const std::complex<double>> blockPhasors);

} // namespace sinewright::core
