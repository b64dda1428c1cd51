// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <QFile>
#include <QString>

#include <cmath>
#include <numbers>
#include <vector>

#include <sndfile.h>

namespace sinewright::tests {

/// A tone whose truth is known: 1 kHz, second harmonic at -80 dBc, third at -90 dBc, phases of no special kind.
struct KnownTone
{
    double rateHz = 96000.0;
    double frequencyHz = 1000.0;
    double amplitudeFs = 0.5;
    double secondDbc = -80.0;
    double thirdDbc = -90.0;

    [[nodiscard]] double at(std::size_t i) const
    {
        const double angle = 2.0 * std::numbers::pi * frequencyHz * static_cast<double>(i) / rateHz;
        const auto ratio = [](double dbc) {
            return std::pow(10.0, dbc / 20.0);
        };
        return amplitudeFs *
               (std::sin(angle + 0.3) + ratio(secondDbc) * std::sin(2.0 * angle + 1.1) +
                ratio(thirdDbc) * std::sin(3.0 * angle - 0.7));
    }

    [[nodiscard]] double thdDb() const
    {
        return 10.0 *
               std::log10(std::pow(10.0, secondDbc / 10.0) + std::pow(10.0, thirdDbc / 10.0));
    }

    [[nodiscard]] std::vector<double> samples(double seconds) const
    {
        std::vector<double> values(static_cast<std::size_t>(seconds * rateHz));
        for (std::size_t i = 0; i < values.size(); ++i) {
            values[i] = at(i);
        }
        return values;
    }
};

/// Writes interleaved samples through libsndfile. @param format  as SF_INFO::format.
inline bool writeTake(const QString& file,
                      int rateHz,
                      int channels,
                      int format,
                      const std::vector<double>& interleaved)
{
    SF_INFO info{};
    info.samplerate = rateHz;
    info.channels = channels;
    info.format = format;
    SNDFILE* const out = sf_open(QFile::encodeName(file).constData(), SFM_WRITE, &info);
    if (out == nullptr) {
        return false;
    }
    const auto count = static_cast<sf_count_t>(interleaved.size());
    const bool isWritten = sf_write_double(out, interleaved.data(), count) == count;
    return sf_close(out) == 0 && isWritten;
}

/// Two channels of equal length, interleaved.
inline std::vector<double> interleave(const std::vector<double>& left,
                                      const std::vector<double>& right)
{
    std::vector<double> both;
    for (std::size_t i = 0; i < left.size(); ++i) {
        both.push_back(left[i]);
        both.push_back(right[i]);
    }
    return both;
}

} // namespace sinewright::tests
