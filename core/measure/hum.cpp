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
constexpr double kFalseAlarm = 1e-4;      ///< for all places looked at together
constexpr double kLeastProminence = 10.0; ///< power ratio: 10 dB
constexpr double kLobeBins = 2.0;         ///< half width of a line seen through the raised cosine
constexpr double kBackgroundBins = 40.0;  ///< looked at on each side
constexpr std::size_t kFewestBackground = 16; ///< powers, below which nothing is said
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
            const double reach = centre * kMainsTolerance + 0.5;
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

Background backgroundOf(const ResidualSpectrum& spectrum, const Place& place)
{
    std::vector<double> powers;
    const std::size_t first = spectrum.indexAt(std::max(1.0, place.lowBins - kBackgroundBins));
    const std::size_t last = spectrum.indexAt(place.highBins + kBackgroundBins);
    for (std::size_t index = first; index <= last; ++index) {
        const double at = spectrum.position(index);
        const bool isInPlace = at > place.lowBins - kLobeBins && at < place.highBins + kLobeBins;
        if (!isInPlace && !spectrum.isInGap(at, kLobeBins)) {
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
        for (std::size_t index = spectrum.indexAt(place.lowBins);
             index <= spectrum.indexAt(place.highBins);
             ++index) {
            if (spectrum.smoothPower(index) < threshold ||
                spectrum.isInGap(spectrum.position(index), kLobeBins)) {
                continue;
            }
            const auto line = spectrum.lineAt(index);
            if (!strongest || line.amplitude > strongest->amplitude) {
                strongest = HumLine{line.bins * resolutionHz, line.amplitude, place.familyHz};
            }
        }
    }
    return strongest;
}

} // namespace sinewright::core
