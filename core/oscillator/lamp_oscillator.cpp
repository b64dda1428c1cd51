// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/oscillator/lamp_oscillator.h"

#include <algorithm>
#include <cassert>
#include <cmath>
#include <numbers>

namespace sinewright::core {

namespace {

// Coarser steps lose the crossover spikes: THD would read 5 % low at 96 kHz and 10 % low at 48 kHz.
constexpr double kLowestStepRateHz = 176.4e3;

constexpr double kJitterTimeS = 0.033;   // of the lamp's slow wander; invented
constexpr double kWarmUpRefreshS = 0.02; // the enclosure moves by a third of a millikelvin in it
constexpr double kSwitchOnVolt = 1e-6;   // what noise leaves on a capacitor
constexpr double kMostOfRail =
    0.75; // of the lower rail, rms: a start beyond would only be clipped away

std::size_t stepsPerSample(SampleRate rate)
{
    return static_cast<std::size_t>(std::max(1.0, std::ceil(kLowestStepRateHz / rate.hz)));
}

} // namespace

LampOscillator::LampOscillator(const LampOscillatorParts& parts,
                               SampleRate rate,
                               std::uint64_t seed)
    : m_parts(parts)
    , m_stepsPerSample(stepsPerSample(rate))
    , m_stepS(1.0 / (rate.hz * static_cast<double>(m_stepsPerSample)))
    , m_samplesPerRefresh(std::max<std::size_t>(1, kMostStepsPerRefresh / m_stepsPerSample))
    , m_amplifier(parts, m_stepS)
    , m_noiseVolt(parts.noiseVoltPerRootHz * std::sqrt(0.5 / m_stepS))
    , m_jitterMemory(std::exp(-static_cast<double>(m_samplesPerRefresh * m_stepsPerSample) *
                              m_stepS / kJitterTimeS))
    , m_jitterDrive(parts.lampJitter * std::sqrt(1.0 - m_jitterMemory * m_jitterMemory))
    , m_network(wienStep(wienNetwork(parts), m_stepS))
    , m_ambientKelvin(parts.roomKelvin)
    , m_noise(seed)
    , m_hum(parts.humAtInputVolt, parts.humHz, 1.0 / m_stepS)
    , m_decimator(m_stepsPerSample)
{
    assert(m_stepsPerSample <= kMostStepsPerRefresh);
    startSettled(lampThresholdOhm(parts));
}

void LampOscillator::startSettled(double trimmerOhm)
{
    const LampEquilibrium settled = lampEquilibrium(m_parts, trimmerOhm);
    const double most = kMostOfRail * std::min(m_parts.positiveRailVolt, m_parts.negativeRailVolt);
    const double level = std::min(settled.levelVrms, most);
    // On the orbit the output, gain times the shunt voltage, passes zero while the series capacitor is at its peak.
    const WienNetwork network = wienNetwork(m_parts);
    const double peak = level * std::numbers::sqrt2 / m_network.gain;
    const double arms = std::sqrt(network.shuntFarad * network.seriesOhm /
                                  (network.seriesFarad * network.shuntOhm));
    State state;
    state.seriesVolt = -peak * arms;
    state.filamentKelvin = settled.lampKelvin;
    state.filamentWatt = lampLossWatt(m_parts, settled.lampKelvin, m_parts.roomKelvin);
    start(state, trimmerOhm);
}

void LampOscillator::startCold(double trimmerOhm)
{
    State state;
    state.seriesVolt = kSwitchOnVolt;
    state.filamentKelvin = m_parts.roomKelvin;
    start(state, trimmerOhm);
}

void LampOscillator::start(const State& state, double trimmerOhm)
{
    m_state = state;
    m_trimmerOhm = trimmerOhm;
    m_samplesToRefresh = 0;
    m_refreshes = 0;
    m_jitterRatio = 0.0;
    if (m_stepsPerSample > 1) {
        double forgotten = 0.0; // what the low-pass makes of the empty past
        for (std::size_t fed = 0; fed < m_decimator.length(); fed += m_stepsPerSample) {
            run(trimmerOhm, std::span(&forgotten, 1));
        }
    }
}

void LampOscillator::run(double trimmerOhm, std::span<double> volts) noexcept
{
    assert(trimmerOhm > 0.0 && !volts.empty());
    const double from = m_trimmerOhm;
    const double perSample = (trimmerOhm - from) / static_cast<double>(volts.size());
    const double perStep = perSample / static_cast<double>(m_stepsPerSample);
    for (std::size_t done = 0; done < volts.size();) {
        if (m_samplesToRefresh == 0) {
            refresh();
        }
        const std::size_t samples = std::min(m_samplesToRefresh, volts.size() - done);
        const std::span<double> steps = std::span(m_steps).first(samples * m_stepsPerSample);
        advance(steps, from + perSample * static_cast<double>(done), perStep);
        for (std::size_t i = 0; i < samples; ++i) {
            volts[done + i] =
                m_decimator.next(steps.subspan(i * m_stepsPerSample, m_stepsPerSample));
        }
        m_samplesToRefresh -= samples;
        done += samples;
    }
    m_trimmerOhm = trimmerOhm;
}

void LampOscillator::refresh() noexcept
{
    m_samplesToRefresh = m_samplesPerRefresh;
    if (m_parts.warmUpKelvin != 0.0) {
        warmUp();
    }
    if (m_parts.lampJitter > 0.0) {
        m_jitterRatio = m_jitterMemory * m_jitterRatio + m_jitterDrive * m_noise.next();
    }
    const double kelvin = m_state.filamentKelvin;
    const double ohm = lampOhm(m_parts, kelvin);
    const double slope = ohm * m_parts.lampExponent / kelvin;
    m_lamp = LampSeries{.kelvin = kelvin,
                        .ohm = ohm,
                        .slope = slope,
                        .halfCurvature = 0.5 * slope * (m_parts.lampExponent - 1.0) / kelvin};
    ++m_refreshes;
}

void LampOscillator::warmUp() noexcept
{
    const double refreshS = static_cast<double>(m_samplesPerRefresh * m_stepsPerSample) * m_stepS;
    const auto every = static_cast<std::uint64_t>(std::max(1.0, kWarmUpRefreshS / refreshS));
    if (m_refreshes % every != 0) {
        return;
    }
    const double elapsedS = static_cast<double>(m_refreshes) * refreshS;
    const double rise = -m_parts.warmUpKelvin * std::expm1(-elapsedS / m_parts.warmUpTimeConstantS);
    m_ambientKelvin = m_parts.roomKelvin + rise;
    WienNetwork network = wienNetwork(m_parts);
    const double stretch = 1.0 + m_parts.networkTempcoPerKelvin * rise; // of R C
    network.seriesOhm *= stretch;
    network.shuntOhm *= stretch;
    m_network = wienStep(network, m_stepS);
}

double LampOscillator::inputDisturbanceVolt() noexcept
{
    double volt = m_parts.offsetVolt;
    if (m_noiseVolt > 0.0) {
        volt += m_noiseVolt * m_noise.next();
    }
    if (m_parts.humAtInputVolt != 0.0) {
        volt += m_hum.next();
    }
    return volt;
}

void LampOscillator::advance(std::span<double> volts, double fromOhm, double ohmPerStep) noexcept
{
    State s = m_state; // locals stay in registers
    const WienStep& net = m_network;
    const double ambientLoss = lampLossWatt(m_parts, 0.0, m_ambientKelvin);
    const double kelvinPerWatt = m_stepS / m_parts.lampHeatCapacity;
    // The new shunt voltage is straight in the new output: shunt = free + share * output.
    const double share = net.after[1] / (1.0 + net.after[1] * net.gain);
    const double keep = 1.0 / (1.0 + net.after[1] * net.gain);
    double trimmer = fromOhm;

    for (double& output : volts) {
        trimmer += ohmPerStep;
        const double warmer = s.filamentKelvin - m_lamp.kelvin;
        const double lamp = (1.0 + m_jitterRatio) *
                            (m_lamp.ohm + warmer * (m_lamp.slope + warmer * m_lamp.halfCurvature));
        const double divider = lamp / (lamp + trimmer);

        const double series = net.turn[0][0] * s.seriesVolt + net.turn[0][1] * s.shuntVolt +
                              net.before[0] * s.residualVolt;
        const double shunt = net.turn[1][0] * s.seriesVolt + net.turn[1][1] * s.shuntVolt +
                             net.before[1] * s.residualVolt;
        const double free = keep * shunt;
        s.amplifier =
            m_amplifier.solve(free + inputDisturbanceVolt(), divider - share, s.amplifier);
        output = s.amplifier.outputVolt;
        s.shuntVolt = free + share * output;
        s.residualVolt = output - net.gain * s.shuntVolt;
        s.seriesVolt = series + net.after[0] * s.residualVolt;

        const double ampere = output / (trimmer + lamp);
        const double watt = ampere * ampere * lamp;
        const double loss = lampLossWatt(m_parts, s.filamentKelvin, 0.0) + ambientLoss;
        s.filamentKelvin += kelvinPerWatt * (1.5 * watt - 0.5 * s.filamentWatt - loss);
        s.filamentWatt = watt;
    }
    m_state = s;
}

} // namespace sinewright::core
