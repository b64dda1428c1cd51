// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/oscillator/wien_network.h"

#include <cassert>
#include <cmath>
#include <numbers>

#include <Eigen/Core>
#include <Eigen/LU>

namespace sinewright::core {

namespace {

double angularFrequency(const WienNetwork& n)
{
    return 1.0 / std::sqrt(n.seriesOhm * n.seriesFarad * n.shuntOhm * n.shuntFarad);
}

} // namespace

Hertz wienFrequency(const WienNetwork& network)
{
    return Hertz{angularFrequency(network) / (2.0 * std::numbers::pi)};
}

double wienGain(const WienNetwork& n)
{
    return 1.0 + n.seriesOhm / n.shuntOhm + n.shuntFarad / n.seriesFarad;
}

std::complex<double> wienTransfer(const WienNetwork& n, Hertz frequency)
{
    const std::complex<double> s{0.0, 2.0 * std::numbers::pi * frequency.value};
    const double series = n.seriesOhm * n.seriesFarad;
    const double shunt = n.shuntOhm * n.shuntFarad;
    const double cross = n.shuntOhm * n.seriesFarad;
    return s * cross / (1.0 + s * (series + shunt + cross) + s * s * series * shunt);
}

std::complex<double> wienLoopFactor(const WienNetwork& network, int order)
{
    assert(order >= 2);
    const Hertz frequency{order * wienFrequency(network).value};
    return 1.0 / (1.0 - wienGain(network) * wienTransfer(network, frequency));
}

WienStep wienStep(const WienNetwork& n, double stepS)
{
    assert(stepS > 0.0);
    const double gain = wienGain(n);
    const double seriesRate = 1.0 / (n.seriesOhm * n.seriesFarad);
    const double crossRate = 1.0 / (n.seriesOhm * n.shuntFarad);
    const double shuntRate = 1.0 / (n.shuntOhm * n.shuntFarad);

    Eigen::Matrix2d motion;
    motion << -seriesRate, (gain - 1.0) * seriesRate, //
        -crossRate, (gain - 1.0) * crossRate - shuntRate;
    const Eigen::Vector2d input(seriesRate, crossRate);

    const double omega = angularFrequency(n);
    const Eigen::Matrix2d unit = Eigen::Matrix2d::Identity();
    const Eigen::Matrix2d turn =
        std::cos(omega * stepS) * unit + (std::sin(omega * stepS) / omega) * motion;
    const Eigen::Matrix2d inverse = motion.inverse();
    const Eigen::Matrix2d held = inverse * (turn - unit); // integral of exp(motion s) over the step
    const Eigen::Vector2d after = inverse * (held / stepS - unit) * input;
    const Eigen::Vector2d before = held * input - after;

    return WienStep{.turn = {{turn(0, 0), turn(0, 1)}, {turn(1, 0), turn(1, 1)}},
                    .before = {before(0), before(1)},
                    .after = {after(0), after(1)},
                    .gain = gain};
}

} // namespace sinewright::core
