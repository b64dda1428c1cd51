// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/signal/fourier.h"
#include "core/signal/window.h"

#include <complex>
#include <cstddef>
#include <span>
#include <vector>

namespace sinewright::core {

/// Windowed transform of a stretch, read with the origin of time in the stretch's middle.
///
/// Frequencies are in bins: cycles over the stretch's samples, however long the transform was padded.
class StretchTransform final
{
public:
    /// @param transform  of the windowed samples, zero-padded to an even length; must outlive this object.
    StretchTransform(const RealFourier& transform, const CosineWindow& window, std::size_t samples);

    [[nodiscard]] std::size_t samples() const { return m_kernel.count(); }
    [[nodiscard]] std::size_t size() const { return m_transform.size(); }
    [[nodiscard]] double position(std::size_t index) const
    {
        return static_cast<double>(index) * m_binsPerIndex;
    }
    [[nodiscard]] double binsPerIndex() const { return m_binsPerIndex; }
    [[nodiscard]] const WindowTransform& kernel() const { return m_kernel; }
    [[nodiscard]] double lobeBins() const { return m_lobeBins; } ///< half width of the main lobe
    [[nodiscard]] std::span<const double> powers() const { return m_powers; }
    [[nodiscard]] std::complex<double> value(std::size_t index) const;

private:
    std::span<const std::complex<double>> m_transform;
    std::span<const double> m_powers;
    WindowTransform m_kernel;
    double m_binsPerIndex;
    double m_lobeBins;
};

/// A tone with harmonics: x(t) = dc + (1 + levelSlope t / N) Re C1 e^(i w t) + sum of Re Ck e^(i k w t), with t from
/// the middle of the N samples and w = 2 pi periods / N.
struct ToneModel
{
    double periods = 0.0;    ///< of the fundamental in the stretch
    double dc = 0.0;         ///< 1.0 = full scale
    double levelSlope = 0.0; ///< relative change over the stretch
    std::vector<std::complex<double>>
        phasors; ///< C1, C2, ...; those at or above half the rate are left out
};

/// Fits a tone and its harmonics to the main lobes of their lines by least squares.
///
/// The fundamental's frequency, amplitude and amplitude slope are iterated (Gauss-Newton), the harmonics stand at exact
/// multiples. Lines whose lobes stand clear of each other are fitted one by one; with a window of few terms, for few
/// periods, what the other lines leak into a lobe is taken out in sweeps until nothing changes.
///
/// @param periods       start, within half a bin.
/// @param highestOrder  1 ..
[[nodiscard]] ToneModel
fitTone(const StretchTransform& transform, double periods, int highestOrder);

/// Amplitude and phase of one line at a known place, from the bins within `reachBins`; other lines must stand clear.
[[nodiscard]] std::complex<double>
linePhasor(const StretchTransform& transform, double bins, double reachBins);

} // namespace sinewright::core
