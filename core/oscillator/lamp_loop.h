// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/oscillator/wien_network.h"

#include <optional>

namespace sinewright::core {

/// Parts of the demo oscillator: a Wien network, an operational amplifier with rails, dead zone and slew limit, and a
/// lamp in the feedback divider. All values are invented.
struct LampOscillatorParts
{
    double seriesOhm = 14.7e3, seriesFarad = 9.1e-9; ///< series arm of the network
    double shuntOhm = 14.7e3, shuntFarad = 9.1e-9;   ///< shunt arm
    double gainBandwidthHz = 1.1e6;
    double slewVoltPerS = 0.45e6;
    double dcGain = 1e5;
    double offsetVolt = 0.5e-3;        ///< input offset
    double noiseVoltPerRootHz = 15e-9; ///< input noise
    double positiveRailVolt = 4.10;
    double negativeRailVolt = 4.45; ///< a positive number: the rail lies at minus this
    double railKneeVolt = 0.05;
    double deadZoneVolt = 0.30; ///< half width; 0: no crossover distortion
    double deadZoneSmoothingVolt = 0.02;
    double lampOhmAt300K = 118.0;
    double lampExponent = 1.2;        ///< R = lampOhmAt300K (T / 300 K)^lampExponent
    double lampHeatCapacity = 1.3e-5; ///< [J/K]
    double lampConductance = 2.6e-5;  ///< [W/K]
    double lampRadiance = 6.0e-18;    ///< [W/K^5]
    double lampJitter = 0.0;          ///< relative rms of the resistance, correlated over 33 ms
    double roomKelvin = 295.0;
    double warmUpKelvin = 0.0; ///< enclosure's rise over the room; 0: no warm-up
    double warmUpTimeConstantS = 540.0;
    double networkTempcoPerKelvin = -60e-6; ///< of R C
    double humAtInputVolt = 0.0;            ///< peak, at the amplifier's non-inverting input
    double humHz = 50.0;
};

/// The network among the parts.
[[nodiscard]] WienNetwork wienNetwork(const LampOscillatorParts& parts);

/// Where the loop settles with a linear amplifier (rails and dead zone left out).
struct LampEquilibrium
{
    double levelVrms = 0.0;  ///< [V] at the amplifier's output; 0 below the threshold
    double lampKelvin = 0.0; ///< [K]
};

/// @param trimmerOhm  [ohm] > 0, from the output to the inverting input.
[[nodiscard]] LampEquilibrium lampEquilibrium(const LampOscillatorParts& parts, double trimmerOhm);

/// Trimmer below which there is no oscillation [ohm].
[[nodiscard]] double lampThresholdOhm(const LampOscillatorParts& parts);

/// Lamp resistance [ohm] at a filament temperature [K].
///
/// @source Tungsten follows R ~ T^1.2 from room temperature up: fit to the table of Jones and Langmuir 1927, from
///         memory (tst_lamp_physics holds the table).
[[nodiscard]] double lampOhm(const LampOscillatorParts& parts, double filamentKelvin);

/// Heat that leaves the filament [W] at a filament temperature in surroundings of `ambientKelvin` [K].
///
/// @source Conduction and convection linear in the temperature, grey radiation with an emissivity that grows with the
///         temperature: kc (T - Ta) + kr (T^5 - Ta^5). A sum of a linear and a high-power term is what M. Carla,
///         Am. J. Phys. 81 (2013), found for light bulbs.
[[nodiscard]] double
lampLossWatt(const LampOscillatorParts& parts, double filamentKelvin, double ambientKelvin);

/// How the level rings about its settled value after a small push, amplifier linear.
struct LampBounce
{
    double lampSlope = 0.0;            ///< d ln R / d ln P of the lamp
    double thermalTimeConstantS = 0.0; ///< [s] small-signal, of the filament
    double frequencyHz = 0.0;          ///< [Hz] undamped
    double dampingRatio = 0.0;         ///< of critical
    double decayPerS = 0.0;            ///< [1/s]
};

/// Closed form of the ringing; nothing below the threshold.
///
/// @source Derived here by linearising d ln V/dt = ((K-1)/(2 R1 C2)) (d - r), tau dr/dt = slope (2 ln V - r) - r about
///         the settled level, d and r being the relative changes of trimmer and lamp.
[[nodiscard]] std::optional<LampBounce> lampBounce(const LampOscillatorParts& parts,
                                                   double trimmerOhm);

} // namespace sinewright::core
