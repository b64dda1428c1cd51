// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/measure/hum.h"

#include "core/signal/noise_level.h"

#include <algorithm>
#include <array>
#include <cmath>
#include <vector>

namespace sinewright::core {

namespace {

constexpr std::array kFamiliesHz{50.0, 60.0};
constexpr int kMultiples = 6;
constexpr double kMainsTolerance = 0.002; ///< of the nominal frequency
constexpr double kPlaceBins = 0.25;       ///< and what noise may do to a line's place
constexpr double kFalseAlarm = 1e-4;      ///< for all places looked at together
constexpr double kLeastProminence = 10.0; ///< power ratio: 10 dB
constexpr double kLobeBins = 2.0;         ///< half width of a line seen through the raised cosine
constexpr double kNearBins = 8.0;         ///< beside a line, where it must have fallen away
constexpr double kBackgroundBins = 40.0;  ///< looked at on each side
constexpr std::size_t kFewestBackground = 12; ///< powers on a side, below which nothing is said
constexpr double kCorrelatedBins = 1.5;       ///< noise bandwidth of the raised cosine [bins]

struct Place
{
    double familyHz;
    double lowBins, highBins;
};

std::vector<Place> placesToLook(const ResidualSpectrum& spectrum, double resolutionHz)
{
    std::vector<Place> places;
    const double endBins = spectrum.position(spectrum.size() - 1) - kBackgroundBins;
    for (const double family : kFamiliesHz) {
        for (int n = 1; n <= kMultiples; ++n) {
            const double centre = family * n / resolutionHz;
            const double reach = centre * kMainsTolerance + kPlaceBins;
            if (centre + reach < endBins) {
                places.push_back({family, centre - reach, centre + reach});
            }
        }
    }
    return places;
}

/// Background beside a place and how many independent powers it rests on.
struct Background
{
    double power = 0.0;
    double independent = 0.0;
};

Background backgroundIn(const ResidualSpectrum& spectrum, double lowBins, double highBins)
{
    std::vector<double> powers;
    const std::size_t last = spectrum.indexAt(highBins);
    for (std::size_t index = spectrum.indexAt(std::max(1.0, lowBins)); index <= last; ++index) {
        if (!spectrum.isNearMultiple(spectrum.position(index), kLobeBins)) {
            powers.push_back(spectrum.smoothPower(index));
        }
    }
    if (powers.size() < kFewestBackground) {
        return {};
    }
    const double independent =
        static_cast<double>(powers.size()) * kMedianEfficiency / kCorrelatedBins;
    return {meanFromMedian(powers), independent};
}

/// The higher of the two sides: on the flank of a line that moves, the other one says nothing.
Background backgroundOf(const ResidualSpectrum& spectrum, const Place& place)
{
    const double low = place.lowBins - kLobeBins;
    const double high = place.highBins + kLobeBins;
    const Background below = backgroundIn(spectrum, low - kBackgroundBins, low);
    const Background above = backgroundIn(spectrum, high, high + kBackgroundBins);
    if (below.independent > 0.0 && above.independent > 0.0) {
        return below.power > above.power ? below : above;
    }
    return {};
}

/// True when the power falls away on both sides as fast as that of a line: lobes of what a moving tone leaves over
/// are wider.
bool isNarrow(const ResidualSpectrum& spectrum, std::size_t index)
{
    const auto meanBeside = [&](double fromBins, double toBins) {
        std::vector<double> powers;
        const double at = spectrum.position(index);
        for (std::size_t i = spectrum.indexAt(at + fromBins); i <= spectrum.indexAt(at + toBins);
             ++i) {
            powers.push_back(spectrum.smoothPower(i));
        }
        return meanFromMedian(powers);
    };
    const double highest = spectrum.smoothPower(index) / kLeastProminence;
    return meanBeside(-kNearBins, -kLobeBins) < highest &&
           meanBeside(kLobeBins, kNearBins) < highest;
}

/// The strongest line of a place that stands out so far; amplitude 0 when none does.
ResidualSpectrum::Line
lineIn(const ResidualSpectrum& spectrum, const Place& place, double threshold)
{
    ResidualSpectrum::Line strongest;
    const std::size_t last = spectrum.indexAt(place.highBins + 0.5);
    for (std::size_t index = spectrum.indexAt(place.lowBins - 0.5); index <= last; ++index) {
        const double power = spectrum.smoothPower(index);
        const bool isCrest =
            power >= spectrum.smoothPower(index - 1) && power >= spectrum.smoothPower(index + 1);
        if (!isCrest || power < threshold || !isNarrow(spectrum, index) ||
            spectrum.isNearMultiple(spectrum.position(index), kLobeBins)) {
            continue;
        }
        const auto line = spectrum.lineAt(index);
        if (line.amplitude > strongest.amplitude && line.bins >= place.lowBins &&
            line.bins <= place.highBins) {
            strongest = line;
        }
    }
    return strongest;
}

} // namespace

std::optional<HumLine> findHum(const ResidualSpectrum& spectrum, double resolutionHz)
{
    const auto places = placesToLook(spectrum, resolutionHz);
    double cells = 0.0;
    for (const Place& place : places) {
        cells += place.highBins - place.lowBins + 1.0;
    }
    std::optional<HumLine> strongest;
    for (const Place& place : places) {
        const Background background = backgroundOf(spectrum, place);
        if (!(background.power > 0.0)) {
            continue;
        }
        const double statistical = chanceRatio(kFalseAlarm / cells, background.independent);
        const double threshold = background.power * std::max(kLeastProminence, statistical);
        const auto line = lineIn(spectrum, place, threshold);
        if (line.amplitude > 0.0 && (!strongest || line.amplitude > strongest->amplitude)) {
            strongest = HumLine{line.bins * resolutionHz, line.amplitude, place.familyHz};
        }
    }
    return strongest;
}

} // namespace sinewright::core
