// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <cstddef>
#include <span>
#include <string_view>
#include <vector>

namespace sinewright::core {

/// A window made of cosines: w(t) = a0 + a1 cos(2 pi t / N) + a2 cos(4 pi t / N) + ..., t counted from the middle.
///
/// Published tables count from the first sample and alternate the signs; from the middle all are positive.
struct CosineWindow
{
    std::string_view name;
    std::span<const double> terms; ///< a0, a1, ...
};

/// Every window that is known by name; the sources stand beside the coefficients in window_tables.cpp.
[[nodiscard]] std::span<const CosineWindow> cosineWindows();

/// The window of that name, or a null pointer.
[[nodiscard]] const CosineWindow* findCosineWindow(std::string_view name);

/// The cosine-sum window with the lowest sidelobes for its number of terms; its main lobe ends `terms` bins from the
/// middle.
///
/// @param terms  2 .. 11.
/// @source  Albrecht, Open Signal Processing Journal 3 (2010) 20-29, Tables 1 and 2.
[[nodiscard]] const CosineWindow& minimumSidelobeWindow(int terms);

/// What a window costs and gives, for a long one.
struct WindowFigures
{
    double noiseBandwidthBins = 1.0; ///< equivalent noise bandwidth [bins]
    double coherentGain = 1.0;       ///< mean of the window, its peak being 1
    double scallopDb = 0.0;  ///< [dB] >= 0: how much less a line midway between two bins reads
    double sidelobeDb = 0.0; ///< [dB] highest sidelobe against the main lobe, negative
};

/// @source  Harris, Proc. IEEE 66 (1978) 51-83, definitions, from memory.
/// @accuracy  sidelobe 0.01 dB down to -200 dB: searched on a grid of 1/512 bin and refined.
[[nodiscard]] WindowFigures windowFigures(const CosineWindow& window);

/// The window's samples, symmetric about the middle, not normalised: sample n lies at t = n - (N - 1) / 2.
[[nodiscard]] std::vector<double> windowSamples(const CosineWindow& window, std::size_t count);

/// Fourier transform of the N samples of a window, with the origin of time in the middle: real and even.
///
/// Frequencies are in bins, cycles over the N samples; the transform repeats after N bins (with the sign changed for
/// even N).
class WindowTransform final
{
public:
    WindowTransform(const CosineWindow& window, std::size_t count);

    [[nodiscard]] double value(double bins) const;

    /// Derivative of value() with respect to `bins`.
    [[nodiscard]] double slope(double bins) const;

    [[nodiscard]] std::size_t count() const { return m_count; }

private:
    std::vector<double> m_terms; ///< factors of the shifted Dirichlet kernels, from -J to J
    std::size_t m_count;
};

} // namespace sinewright::core
