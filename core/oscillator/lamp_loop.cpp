// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/oscillator/lamp_loop.h"

#include <cassert>
#include <cmath>
#include <numbers>

namespace sinewright::core {

namespace {

constexpr double kReferenceKelvin = 300.0; // where lampOhmAt300K holds

double fifthPower(double x)
{
    return x * x * x * x * x;
}

} // namespace

WienNetwork wienNetwork(const LampOscillatorParts& parts)
{
    return WienNetwork{.seriesOhm = parts.seriesOhm,
                       .seriesFarad = parts.seriesFarad,
                       .shuntOhm = parts.shuntOhm,
                       .shuntFarad = parts.shuntFarad};
}

double lampOhm(const LampOscillatorParts& parts, double filamentKelvin)
{
    return parts.lampOhmAt300K * std::pow(filamentKelvin / kReferenceKelvin, parts.lampExponent);
}

double lampLossWatt(const LampOscillatorParts& parts, double filamentKelvin, double ambientKelvin)
{
    return parts.lampConductance * (filamentKelvin - ambientKelvin) +
           parts.lampRadiance * (fifthPower(filamentKelvin) - fifthPower(ambientKelvin));
}

double lampThresholdOhm(const LampOscillatorParts& parts)
{
    return (wienGain(wienNetwork(parts)) - 1.0) * lampOhm(parts, parts.roomKelvin);
}

LampEquilibrium lampEquilibrium(const LampOscillatorParts& parts, double trimmerOhm)
{
    assert(trimmerOhm > 0.0);
    // The loop lets the level rise until the lamp makes the gain just right; the lamp's resistance tells its
    // temperature, that tells the power it takes, and that the voltage across it.
    const double gain = wienGain(wienNetwork(parts));
    const double lamp = trimmerOhm / (gain - 1.0);
    const double kelvin =
        kReferenceKelvin * std::pow(lamp / parts.lampOhmAt300K, 1.0 / parts.lampExponent);
    if (kelvin <= parts.roomKelvin) {
        return LampEquilibrium{.levelVrms = 0.0, .lampKelvin = parts.roomKelvin};
    }
    const double watt = lampLossWatt(parts, kelvin, parts.roomKelvin);
    return LampEquilibrium{.levelVrms = gain * std::sqrt(watt * lamp), .lampKelvin = kelvin};
}

std::optional<LampBounce> lampBounce(const LampOscillatorParts& parts, double trimmerOhm)
{
    const LampEquilibrium settled = lampEquilibrium(parts, trimmerOhm);
    if (settled.levelVrms <= 0.0) {
        return std::nullopt;
    }
    const double kelvin = settled.lampKelvin;
    const double wattPerKelvin = // derivative of lampLossWatt()
        parts.lampConductance + 5.0 * parts.lampRadiance * kelvin * kelvin * kelvin * kelvin;
    const double watt = lampLossWatt(parts, kelvin, parts.roomKelvin);
    const double slope = parts.lampExponent / kelvin * watt / wattPerKelvin;
    const double timeConstant = parts.lampHeatCapacity / wattPerKelvin;

    const double gain = wienGain(wienNetwork(parts));
    const double growthPerRatio = (gain - 1.0) / (2.0 * parts.seriesOhm * parts.shuntFarad);
    const double omega = std::sqrt(2.0 * growthPerRatio * slope / timeConstant);
    const double decay = (1.0 + slope) / (2.0 * timeConstant);
    return LampBounce{.lampSlope = slope,
                      .thermalTimeConstantS = timeConstant,
                      .frequencyHz = omega / (2.0 * std::numbers::pi),
                      .dampingRatio = decay / omega,
                      .decayPerS = decay};
}

} // namespace sinewright::core
