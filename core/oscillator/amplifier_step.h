// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/oscillator/lamp_loop.h"

#include <algorithm>
#include <cmath>
#include <numbers>

namespace sinewright::core {

/// One time step of the operational amplifier: an integrator with a slew limit that leaks by its finite DC gain, is
/// held between the rails by two exponential clamps, and must deliver the output stage's dead zone on top of the output.
///
/// With x the integrator and v the output,
///     dx/dt = SR S(wu e / SR) - (wu / A0) x - SR (exp((x - Vp) / w) - exp(-(x + Vn) / w)),   S(y) = y / sqrt(1 + y^2)
///     x = v + d v / sqrt(v^2 + delta^2)
/// taken by backward Euler, which keeps the area of crossover spikes narrower than a sample and so folds little of them
/// back (an antiderivative's virtue: Parker, Zavalishin and Le Bivic 2016, from memory).
///
/// @source Behavioural; derived here.
class AmplifierStep final
{
public:
    AmplifierStep(const LampOscillatorParts& parts, double stepS)
        : m_slewStep(stepS * parts.slewVoltPerS)
        , m_perSlew(2.0 * std::numbers::pi * parts.gainBandwidthHz / parts.slewVoltPerS)
        , m_leak(stepS * 2.0 * std::numbers::pi * parts.gainBandwidthHz / parts.dcGain)
        , m_deadZone(parts.deadZoneVolt)
        , m_smoothing2(parts.deadZoneSmoothingVolt * parts.deadZoneSmoothingVolt)
        , m_positiveRail(parts.positiveRailVolt)
        , m_negativeRail(parts.negativeRailVolt)
        , m_knee(parts.railKneeVolt)
    {}

    struct Solution
    {
        double outputVolt;
        double integratorVolt;
    };

    /// Solves for the new output when the error at the input is `driveVolt - feedback v`.
    ///
    /// The unbalance rises with v, so there is one root and its sign brackets it. The bracket is needed: S() is flat
    /// where the dead zone is steep, and plain Newton steps go round in circles there.
    ///
    /// @param feedback          > 0: share of the output fed back, less what the network passes on within the step.
    /// @param before            the last step's solution.
    [[nodiscard]] Solution
    solve(double driveVolt, double feedback, const Solution& before) const noexcept
    {
        double low = -m_negativeRail - kBracketKnees * m_knee;
        double high = m_positiveRail + kBracketKnees * m_knee;
        double v = std::clamp(driveVolt / feedback, low, high);
        if (isClippedWith(v, before.integratorVolt)) {
            v = before.outputVolt; // the linear guess is far out where the clamp rules
        }
        for (int i = 0; i < kMostIterations; ++i) {
            const Unbalance now = unbalance(v, driveVolt, feedback, before.integratorVolt);
            (now.volt > 0.0 ? high : low) = v;
            double next = v - now.volt / now.slope;
            if (!(next > low && next < high)) {
                next = 0.5 * (low + high);
            }
            const double change = next - v;
            v = next;
            if (std::abs(change) < kToleranceVolt) {
                break; // the error left is of the order of its square
            }
        }
        return Solution{.outputVolt = v, .integratorVolt = required(v).volt};
    }

private:
    static constexpr double kBracketKnees = 3.0; // no output lies further beyond a rail than this
    static constexpr double kClippedKnees =
        4.0; // from here on the clamp draws 2 % of the slew current
    static constexpr double kClampReach =
        12.0; // below exp(-12) a clamp is not worth an exponential
    static constexpr double kClampMost =
        4.0; // keeps the first steps of a poor guess within numbers
    static constexpr double kToleranceVolt = 2e-8; // -160 dB of a volt before the last step
    static constexpr int kMostIterations = 60;     // halving alone would do in 30

    struct Unbalance
    {
        double volt;
        double slope;
    };

    [[nodiscard]] bool isClippedWith(double v, double x) const noexcept
    {
        const double reach = kClippedKnees * m_knee;
        return std::min(v, x) > m_positiveRail - reach || std::max(v, x) < reach - m_negativeRail;
    }

    /// What the integrator must deliver for an output, and the derivative.
    [[nodiscard]] Unbalance required(double v) const noexcept
    {
        if (m_deadZone == 0.0) {
            return {v, 1.0};
        }
        const double q = 1.0 / std::sqrt(v * v + m_smoothing2);
        return {v + m_deadZone * v * q, 1.0 + m_deadZone * m_smoothing2 * q * q * q};
    }

    [[nodiscard]] Unbalance
    unbalance(double v, double driveVolt, double feedback, double xBefore) const noexcept
    {
        const Unbalance x = required(v);
        const double y = m_perSlew * (driveVolt - feedback * v);
        const double w = 1.0 / std::sqrt(1.0 + y * y);
        Unbalance result{x.volt - xBefore - m_slewStep * y * w + m_leak * x.volt,
                         x.slope * (1.0 + m_leak) + m_slewStep * m_perSlew * feedback * w * w * w};
        const double above = (x.volt - m_positiveRail) / m_knee;
        if (above > -kClampReach) {
            const double clamp = m_slewStep * std::exp(std::min(above, kClampMost));
            result.volt += clamp;
            result.slope += clamp / m_knee * x.slope;
        }
        const double below = -(x.volt + m_negativeRail) / m_knee;
        if (below > -kClampReach) {
            const double clamp = m_slewStep * std::exp(std::min(below, kClampMost));
            result.volt -= clamp;
            result.slope += clamp / m_knee * x.slope;
        }
        return result;
    }

    double m_slewStep; // [V] most that the integrator moves in a step
    double m_perSlew;  // [1/V] input error over the one that would slew
    double m_leak;
    double m_deadZone;
    double m_smoothing2; // [V^2]
    double m_positiveRail;
    double m_negativeRail;
    double m_knee;
};

} // namespace sinewright::core
