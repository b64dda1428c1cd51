// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/signal/fourier.h"

#include <fftw3.h>

#include <cassert>
#include <mutex>

#include <Eigen/Core>

namespace sinewright::core {

namespace {

/// FFTW's planner is not safe to be entered by two threads.
std::mutex& plannerMutex()
{
    static std::mutex mutex;
    return mutex;
}

fftw_plan makePlan(std::size_t length, double* input, fftw_complex* output)
{
    const std::scoped_lock lock(plannerMutex());
    return fftw_plan_dft_r2c_1d(
        static_cast<int>(length), input, output, FFTW_ESTIMATE | FFTW_PRESERVE_INPUT);
}

} // namespace

struct RealFourier::Plan
{
    std::size_t count;
    double* input;
    fftw_complex* output;
    double* powers;
    fftw_plan plan;

    explicit Plan(std::size_t length)
        : count(length)
        , input(fftw_alloc_real(length))
        , output(fftw_alloc_complex(length / 2 + 1))
        , powers(fftw_alloc_real(length / 2 + 1))
        , plan(makePlan(length, input, output))
    {}

    ~Plan()
    {
        {
            const std::scoped_lock lock(plannerMutex());
            fftw_destroy_plan(plan);
        }
        fftw_free(input);
        fftw_free(output);
        fftw_free(powers);
    }

    Plan(const Plan&) = delete;
    Plan& operator=(const Plan&) = delete;
};

RealFourier::RealFourier(std::size_t count) : m_plan(std::make_unique<Plan>(count))
{
    assert(count > 0 && m_plan->plan != nullptr);
}

RealFourier::~RealFourier() = default;
RealFourier::RealFourier(RealFourier&&) noexcept = default;
RealFourier& RealFourier::operator=(RealFourier&&) noexcept = default;

std::size_t RealFourier::count() const
{
    return m_plan->count;
}

std::span<double> RealFourier::input()
{
    return {m_plan->input, m_plan->count};
}

std::span<const std::complex<double>> RealFourier::output() const
{
    // FFTW's complex numbers are laid out like the standard library's (FFTW manual, "Complex numbers").
    return {reinterpret_cast<const std::complex<double>*>(m_plan->output), m_plan->count / 2 + 1};
}

void RealFourier::forward()
{
    fftw_execute(m_plan->plan);
    const auto bins = output();
    const auto size = static_cast<Eigen::Index>(bins.size());
    Eigen::Map<Eigen::ArrayXd>(m_plan->powers, size) =
        Eigen::Map<const Eigen::ArrayXcd>(bins.data(), size).abs2();
}

std::span<const double> RealFourier::powers() const
{
    return {m_plan->powers, m_plan->count / 2 + 1};
}

std::size_t goodTransformLength(std::size_t count)
{
    const auto isGood = [](std::size_t n) {
        for (const std::size_t prime : {2U, 3U, 5U, 7U}) {
            while (n % prime == 0) {
                n /= prime;
            }
        }
        return n == 1;
    };
    std::size_t n = count + count % 2;
    while (!isGood(n)) {
        n += 2;
    }
    return n;
}

} // namespace sinewright::core
