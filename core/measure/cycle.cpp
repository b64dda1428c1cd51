// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/measure/cycle.h"

#include <algorithm>
#include <array>
#include <cmath>
#include <complex>
#include <numbers>

namespace sinewright::core {

namespace {

using Complex = std::complex<double>;

constexpr int kHighestOrder = CycleView::kPoints / 2 - 1;
constexpr double kReadReachBins = 2.0; ///< enough of a line's lobe for a picture

} // namespace

CycleView cycleOf(const StretchTransform& transform, const ToneModel& model)
{
    // theta is counted from the fundamental's rising zero crossing: C1 = -i |C1| exp(i theta at the middle).
    const double size = std::abs(model.phasors[0]);
    const Complex toSine = std::conj(model.phasors[0] * Complex(0.0, 1.0)) / size;
    const double nyquist = static_cast<double>(transform.samples()) / 2.0 - transform.lobeBins();
    const int highest = std::clamp(static_cast<int>(nyquist / model.periods), 1, kHighestOrder);

    std::array<Complex, kHighestOrder + 1> harmonics{};
    Complex turn(1.0);
    for (int order = 1; order <= highest; ++order) {
        const auto line = static_cast<std::size_t>(order - 1);
        turn *= toSine;
        const Complex phasor = line < model.phasors.size()
                                   ? model.phasors[line]
                                   : linePhasor(transform, model.periods * order, kReadReachBins);
        harmonics[static_cast<std::size_t>(order)] = phasor * turn / size;
    }
    std::array<Complex, CycleView::kPoints> circle;
    for (std::size_t point = 0; point < circle.size(); ++point) {
        circle[point] = std::polar(
            1.0, 2.0 * std::numbers::pi * static_cast<double>(point) / CycleView::kPoints);
    }
    CycleView view;
    for (std::size_t point = 0; point < circle.size(); ++point) {
        double residual = 0.0;
        for (std::size_t order = 2; order <= static_cast<std::size_t>(highest); ++order) {
            residual += (harmonics[order] * circle[point * order % circle.size()]).real();
        }
        view.residual[point] = static_cast<float>(residual);
        view.cycle[point] = static_cast<float>(residual + circle[point].imag());
    }
    return view;
}

} // namespace sinewright::core
