// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <algorithm>
#include <cmath>
#include <cstddef>
#include <cstdint>
#include <functional>
#include <numbers>
#include <random>
#include <vector>

/// Signals whose truth is known, for tests of what measures them.
namespace sinewright::tests {

/// One component: `ratio` sin(order theta + phaseRad), theta being the fundamental's phase.
struct Partial
{
    int order = 1;
    double ratio = 0.0;
    double phaseRad = 0.0;
};

struct ToneSpec
{
    double rateHz = 48000.0;
    double frequencyHz = 997.0;
    double amplitude = 0.5; ///< of the fundamental, 1.0 = full scale
    double phaseRad = 0.4;
    double dc = 0.0;
    std::vector<Partial> partials{}; ///< relative to the fundamental
};

/// Phase of the fundamental at a sample, from whole turns taken off, so that a long tone stays pure.
inline double thetaAt(const ToneSpec& spec, std::size_t n)
{
    const double turns = spec.frequencyHz / spec.rateHz * static_cast<double>(n);
    return 2.0 * std::numbers::pi * (turns - std::floor(turns)) + spec.phaseRad;
}

inline std::vector<double> tone(const ToneSpec& spec, std::size_t count)
{
    std::vector<double> samples(count);
    for (std::size_t n = 0; n < count; ++n) {
        const double theta = thetaAt(spec, n);
        double sum = std::sin(theta);
        for (const Partial& partial : spec.partials) {
            sum += partial.ratio * std::sin(partial.order * theta + partial.phaseRad);
        }
        samples[n] = spec.amplitude * sum + spec.dc;
    }
    return samples;
}

/// A sine bent by a characteristic, sample by sample: `amplitude` times shape(sin theta).
inline std::vector<double>
shaped(const ToneSpec& spec, std::size_t count, const std::function<double(double)>& shape)
{
    std::vector<double> samples(count);
    for (std::size_t n = 0; n < count; ++n) {
        samples[n] = spec.amplitude * shape(std::sin(thetaAt(spec, n))) + spec.dc;
    }
    return samples;
}

inline std::vector<double> whiteNoise(double rms, std::size_t count, std::uint64_t seed)
{
    std::mt19937_64 generator(seed);
    std::normal_distribution<double> normal(0.0, rms);
    std::vector<double> samples(count);
    for (double& x : samples) {
        x = normal(generator);
    }
    return samples;
}

/// Noise whose density falls by 3 dB an octave within half a decibel over the audio band: one-pole noises an octave
/// apart.
inline std::vector<double> pinkNoise(double rms, std::size_t count, std::uint64_t seed)
{
    constexpr int kOctaves = 14;
    std::mt19937_64 generator(seed);
    std::normal_distribution<double> normal;
    std::vector<double> states(kOctaves, 0.0);
    std::vector<double> samples(count);
    double squares = 0.0;
    for (double& x : samples) {
        double pole = 0.6;
        x = 0.0;
        for (double& state : states) {
            state += pole * (normal(generator) - state);
            x += state / std::sqrt(pole); // the same variance for each
            pole /= 2.0;
        }
        squares += x * x;
    }
    const double scale = rms / std::sqrt(squares / static_cast<double>(count));
    for (double& x : samples) {
        x *= scale;
    }
    return samples;
}

inline std::vector<double> sum(std::vector<double> a, const std::vector<double>& b)
{
    for (std::size_t n = 0; n < a.size(); ++n) {
        a[n] += b[n];
    }
    return a;
}

/// An ideal converter of so many bits: rounded to the nearest step, held at its end codes.
inline std::vector<double> quantised(std::vector<double> samples, int bits)
{
    const double scale = std::ldexp(1.0, bits - 1);
    for (double& x : samples) {
        x = std::min(std::max(std::nearbyint(x * scale), -scale), scale - 1.0) / scale;
    }
    return samples;
}

/// Triangular dither of two steps from peak to peak.
inline std::vector<double> triangularDither(int bits, std::size_t count, std::uint64_t seed)
{
    std::mt19937_64 generator(seed);
    std::uniform_real_distribution<double> uniform(-0.5, 0.5);
    std::vector<double> samples(count);
    for (double& x : samples) {
        x = (uniform(generator) + uniform(generator)) * std::ldexp(1.0, 1 - bits);
    }
    return samples;
}

inline double rmsOf(const std::vector<double>& samples)
{
    double squares = 0.0;
    for (const double x : samples) {
        squares += x * x;
    }
    return std::sqrt(squares / static_cast<double>(samples.size()));
}

} // namespace sinewright::tests
