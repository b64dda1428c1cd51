// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <optional>
#include <vector>

namespace sinewright::core {

/// Frequency weighting of residual and total.
enum class Weighting {
    None,
    A,      ///< IEC 61672-1
    Itu468, ///< ITU-R BS.468-4 curve, 0 dB at 1 kHz, rms detector
};

/// Measuring band [Hz], 0 <= lowHz < highHz; the upper edge is limited to half the sample rate where it is used.
struct Band
{
    double lowHz = 20.0;
    double highHz = 20000.0;
    friend bool operator==(const Band&, const Band&) = default;
};

/// What the user may choose about a reading.
struct MeasureSettings
{
    Band band;
    int harmonicCount = 10; ///< highest order counted, 2 .. 32
    Weighting weighting = Weighting::None;
    std::optional<double> fullScaleVrms; ///< [V] rms of a full-scale sine; none when not calibrated
    friend bool operator==(const MeasureSettings&, const MeasureSettings&) = default;
};

/// Whether there is a reading at all.
enum class ReadingStatus {
    Ok,
    NoTone,   ///< nothing that can be called one steady tone
    TooShort, ///< fewer than 4 periods or fewer than 64 samples
    Overload, ///< clipped at full scale or flat-topped: figures are given but not to be trusted
};

/// What spoils a reading that can otherwise be had.
enum class Warning {
    InputOverload,
    HarmonicsAboveBand,
    UnsteadyLevel,
    UnsteadyFrequency,
    MainsHum,
    DcOffset,
    CardLimited,
};

/// One harmonic, relative to the fundamental.
struct HarmonicReading
{
    int order = 2;            ///< 2 ..
    double frequencyHz = 0.0; ///< order times the fitted frequency
    double ratio = 0.0;       ///< amplitude over the fundamental's, >= 0
    double phaseDeg = 0.0;    ///< (-180, 180], sine convention, fundamental's phase taken out
    bool inBand =
        true; ///< false above the band's upper edge; such a harmonic does not count for THD
    std::optional<double> ratioStd = std::nullopt;    ///< 1 sigma
    std::optional<double> phaseStdDeg = std::nullopt; ///< 1 sigma; 104 where any phase is as likely
};

/// One set of figures from one stretch of signal.
///
/// A figure that cannot be had is empty, never NaN and never a made-up zero. With a status other than Ok or Overload
/// all figures but `dcFs` and `peakFs` are empty. Ratios are amplitude ratios; percent and dB are made where they are
/// shown.
///
/// The standard deviations (1 sigma) are of noise alone, taken from the density found beside each line. With s^2 the
/// variance of white noise of that density and N samples: an efficient amplitude has variance 2 s^2 / N, a phase that
/// over the squared amplitude (Rife and Boorstyn 1974, from memory); harmonics are fitted through a window, whose loss
/// of efficiency is counted. With v that variance over the fundamental's squared amplitude, a squared ratio r^2 + noise
/// has variance 4 v r^2 + 4 v^2 (non-central chi-square, two degrees of freedom), which makes THD's. Noise power P has
/// variance P^2 / K, K the equivalent number of independent bins, (sum of S)^2 / sum of S^2 less the taper's loss. A
/// steady line left in the residual, such as hum, counts as noise there and makes the stated spread too large.
struct Reading
{
    ReadingStatus status = ReadingStatus::TooShort;
    std::vector<Warning> warnings; ///< each at most once, in the order of the enumeration

    double startS = 0.0;  ///< [s] from the start of the source
    double lengthS = 0.0; ///< [s]

    std::optional<double> frequencyHz;
    std::optional<double> frequencyStdHz; ///< 1 sigma
    std::optional<double> levelDbfs;      ///< rms of the fundamental after AES17
    std::optional<double> levelStdDb;     ///< 1 sigma
    std::optional<double> levelVrms;      ///< only with a calibration
    std::optional<double> dcFs;           ///< mean, 1.0 = full scale
    std::optional<double> peakFs;         ///< largest absolute sample, 1.0 = full scale

    std::optional<double> thdRatio;    ///< THD_F: harmonics 2..K in band over the fundamental
    std::optional<double> thdStdRatio; ///< 1 sigma of thdRatio
    std::optional<double> thdRRatio;   ///< the same over the total rms in band
    std::optional<double>
        thdnRatio; ///< all in band but the fundamental, over the total rms in band
    std::optional<double> thdnStdRatio; ///< 1 sigma of thdnRatio
    std::optional<double> sinadDb;
    std::optional<double> snrDb;
    std::optional<double>
        noiseDbfs; ///< minus infinity is not a figure: empty when no noise is seen
    std::optional<double> noiseStdDb; ///< 1 sigma of noiseDbfs and of the noise in snrDb

    std::vector<HarmonicReading> harmonics; ///< ascending orders from 2, below half the sample rate

    std::optional<double>
        mainsHumDbc; ///< strongest line of the 50 or 60 Hz family; empty when none stands out
};

} // namespace sinewright::core
