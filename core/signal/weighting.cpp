// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/signal/weighting.h"

#include <cmath>

namespace sinewright::core {

namespace {

constexpr double kReferenceHz = 1000.0;

/// Squares of the A curve's pole frequencies [Hz^2].
struct APoles
{
    double f1, f2, f3, f4;
};

/// IEC 61672-1:2013, Annex E: the corner frequencies follow from four round numbers and D = 1/sqrt 2.
APoles aPoles()
{
    const double lowHz2 = std::pow(10.0, 2.0 * 1.5);
    const double highHz2 = std::pow(10.0, 2.0 * 3.9);
    const double cornerHz = std::pow(10.0, 2.45);
    const double d = std::sqrt(0.5);
    const double reference2 = kReferenceHz * kReferenceHz;
    const double b =
        (reference2 + lowHz2 * highHz2 / reference2 - d * (lowHz2 + highHz2)) / (1.0 - d);
    const double c = lowHz2 * highHz2;
    const double root = std::sqrt(b * b - 4.0 * c);
    const double f2 = cornerHz * (3.0 - std::sqrt(5.0)) / 2.0;
    const double f3 = cornerHz * (3.0 + std::sqrt(5.0)) / 2.0;
    return {(-b - root) / 2.0, f2 * f2, f3 * f3, (-b + root) / 2.0};
}

double aCurve(double frequencyHz)
{
    static const APoles poles = aPoles();
    const double f2 = frequencyHz * frequencyHz;
    return poles.f4 * f2 * f2 /
           ((f2 + poles.f1) * std::sqrt((f2 + poles.f2) * (f2 + poles.f3)) * (f2 + poles.f4));
}

double itu468Curve(double frequencyHz)
{
    // Coefficients of the passive network's response, frequency in Hz; Rec. ITU-R BS.468-4, Annex 1, Figure 1a.
    const double f = frequencyHz;
    const double f2 = f * f;
    const double h1 =
        ((-4.737338981378384e-24 * f2 + 2.043828333606125e-15) * f2 - 1.363894795463638e-7) * f2 +
        1.0;
    const double h2 =
        ((1.306612257412824e-19 * f2 - 2.118150887518656e-11) * f2 + 5.559488023498642e-4) * f;
    return 1.246332637532143e-4 * f / std::hypot(h1, h2);
}

} // namespace

double weightingFactor(Weighting weighting, double frequencyHz)
{
    switch (weighting) {
    case Weighting::A: {
        static const double atReference = aCurve(kReferenceHz);
        return aCurve(frequencyHz) / atReference;
    }
    case Weighting::Itu468: {
        static const double atReference = itu468Curve(kReferenceHz);
        return itu468Curve(frequencyHz) / atReference;
    }
    case Weighting::None:
        break;
    }
    return 1.0;
}

} // namespace sinewright::core
