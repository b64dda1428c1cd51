// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <complex>
#include <cstddef>
#include <memory>
#include <span>

namespace sinewright::core {

/// A real transform with its buffers: X[m] = sum of x[n] exp(-2 pi i m n / N), m = 0 .. N/2.
///
/// Plans are estimated, not timed, so that the same samples give the same bits at every run on one machine.
///
/// @thread    one object, one thread; objects may be made and destroyed anywhere: FFTW's planner is locked
///            process-wide.
/// @realtime  forward() neither allocates nor locks.
class RealFourier final
{
public:
    /// @param count  > 0; see goodTransformLength().
    explicit RealFourier(std::size_t count);
    ~RealFourier();
    RealFourier(RealFourier&&) noexcept;
    RealFourier& operator=(RealFourier&&) noexcept;
    RealFourier(const RealFourier&) = delete;
    RealFourier& operator=(const RealFourier&) = delete;

    [[nodiscard]] std::size_t count() const;
    [[nodiscard]] std::span<double> input();
    [[nodiscard]] std::span<const std::complex<double>> output() const;

    /// Transforms input() into output() and powers(); the input stays.
    void forward();

    /// Squared magnitudes of output().
    [[nodiscard]] std::span<const double> powers() const;

private:
    struct Plan;
    std::unique_ptr<Plan> m_plan;
};

/// The smallest even number >= `count` whose prime factors are 2, 3, 5 and 7 alone: a length that FFTW does fast.
[[nodiscard]] std::size_t goodTransformLength(std::size_t count);

} // namespace sinewright::core
