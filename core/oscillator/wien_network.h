// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/units.h"

#include <complex>

namespace sinewright::core {

/// The network of a Wien oscillator: the series arm (resistor and capacitor in series) comes from the amplifier's
/// output, the shunt arm (resistor and capacitor in parallel) goes to ground, the output is taken across the latter.
struct WienNetwork
{
    double seriesOhm = 0.0, seriesFarad = 0.0; ///< > 0
    double shuntOhm = 0.0, shuntFarad = 0.0;   ///< > 0
};

/// Where the network turns no phase: 1 / (2 pi sqrt(R1 C1 R2 C2)).
/// @source Common practice; any circuit text.
[[nodiscard]] Hertz wienFrequency(const WienNetwork& network);

/// Gain that just makes up for the network's loss at wienFrequency(): 1 + R1/R2 + C2/C1, 3 for equal arms.
/// @source Common practice; any circuit text.
[[nodiscard]] double wienGain(const WienNetwork& network);

/// Output over input of the network, a complex ratio.
/// @param frequency  [Hz] > 0.
/// @source beta(s) = s R2 C1 / (1 + s (R1 C1 + R2 C2 + R2 C1) + s^2 R1 C1 R2 C2); any circuit text.
[[nodiscard]] std::complex<double> wienTransfer(const WienNetwork& network, Hertz frequency);

/// What a tone born at the amplifier's output inside the closed loop is multiplied by at `order` times the
/// frequency of oscillation: 1 / (1 - K beta).
/// @param order  2 and up.
/// @source Derived here from wienTransfer() and wienGain().
[[nodiscard]] std::complex<double> wienLoopFactor(const WienNetwork& network, int order);

/// One time step of the two capacitor voltages z = (series, shunt) for an amplifier of gain wienGain(), whose
/// departure u = v - gain z_shunt runs straight from one sample to the next:
///     z(n+1) = turn z(n) + before u(n) + after u(n+1)
struct WienStep
{
    double turn[2][2] = {{1.0, 0.0}, {0.0, 1.0}};
    double before[2] = {0.0, 0.0};
    double after[2] = {0.0, 0.0};
    double gain = 3.0;
};

/// Exact for any u that is straight between samples; with u = 0 it is a rotation on an ellipse.
///
/// @param stepS  [s] > 0.
/// @source Derived here. dz/dt = M z + b u has trace 0 and M^2 = -w0^2 I, hence
///         turn = exp(M h) = cos(w0 h) I + sin(w0 h)/w0 M; the weights of u are the integrals of the exponential
///         against the two ends of the ramp (exponential time differencing: Cox and Matthews 2002, from memory).
[[nodiscard]] WienStep wienStep(const WienNetwork& network, double stepS);

} // namespace sinewright::core
