// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <cmath>
#include <cstdint>

namespace sinewright::core {

/// White noise of unit variance, bell-shaped, the same on every machine for the same seed.
///
/// Four uniform numbers are summed: beyond 3.46 sigma there is nothing, which a bench's noise floor does not miss, and a
/// value costs a few nanoseconds. The standard library's normal distribution differs between implementations.
///
/// @source Generator: Steele, Lea and Flood 2014 (splitmix), from memory.
class SeededNoise final
{
public:
    explicit SeededNoise(std::uint64_t seed) : m_state(seed) {}

    double next() noexcept
    {
        std::uint64_t z = (m_state += 0x9E3779B97F4A7C15U);
        z = (z ^ (z >> 30U)) * 0xBF58476D1CE4E5B9U;
        z = (z ^ (z >> 27U)) * 0x94D049BB133111EBU;
        z ^= z >> 31U;
        const std::uint64_t sum =
            (z & kLow) + ((z >> 16U) & kLow) + ((z >> 32U) & kLow) + (z >> 48U);
        return (static_cast<double>(sum) - kMean) * kOverSigma;
    }

private:
    static constexpr std::uint64_t kLow = 0xFFFFU;
    static constexpr double kMean = 4.0 * 65535.0 / 2.0;
    static constexpr double kOverSigma = 1.0 / 37837.227; // sqrt(4 (65536^2 - 1) / 12)

    std::uint64_t m_state;
};

} // namespace sinewright::core
