// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/measure/figures.h"

#include "core/measure/hum.h"
#include "core/signal/weighting.h"
#include "core/units.h"

#include <algorithm>
#include <cmath>
#include <complex>
#include <numbers>
#include <vector>

namespace sinewright::core {

namespace {

using Complex = std::complex<double>;
constexpr double kPi = std::numbers::pi;

constexpr double kUnsteadyLevel = 0.01;
constexpr double kUnsteadyFrequency = 100e-6;
constexpr double kSignificantSigmas = 4.0;
constexpr double kDecibelsOfAmplitude = 20.0 / std::numbers::ln10;
constexpr double kDecibelsOfPower = 10.0 / std::numbers::ln10;
constexpr double kAnyPhase = kPi / std::numbers::sqrt3; ///< standard deviation of any phase at all
constexpr double kNumericalNoise =
    1e-14; ///< of the fundamental: what lies below is rounding, not noise
constexpr double kNumericalLine = 1e-10; ///< the same for a line: -200 dBc

class FigureWriter
{
public:
    FigureWriter(const ToneFindings& findings, Reading& reading)
        : m_findings(findings)
        , m_reading(reading)
        , m_samplePowerFs2(findings.residual.localPowerFs2(findings.model.periods) *
                           static_cast<double>(findings.residual.size() - 1))
        , m_phasorPowerFs2(m_samplePowerFs2 * findings.phasorNoise / 2.0)
    {}

    void writeTone()
    {
        const Envelope& envelope = m_findings.envelope;
        const double amplitude = envelope.amplitude();
        m_reading.dcFs = m_findings.model.dc;
        m_reading.frequencyHz = hzOf(envelope.periods());
        m_reading.levelDbfs = decibelsFromRatio(amplitude);
        if (m_findings.settings.fullScaleVrms) {
            m_reading.levelVrms = amplitude * *m_findings.settings.fullScaleVrms;
        }
        // Noise to signal of the mean amplitude; the Cramer-Rao bound of the frequency is sqrt 6 / pi times that, in
        // periods a stretch (Rife and Boorstyn 1974, from memory), and the least-squares coefficients of the second and
        // third Legendre polynomial scatter by sqrt 3 and sqrt 5 times sqrt 2 of it.
        const double relative =
            std::sqrt(m_samplePowerFs2 / static_cast<double>(m_findings.residual.samples())) /
            amplitude;
        m_levelStd = std::numbers::sqrt2 * relative;
        m_reading.levelStdDb = kDecibelsOfAmplitude * m_levelStd;
        const double periodsStd = std::sqrt(6.0) / kPi * relative;
        const double changeStd = 6.0 * std::sqrt(10.0) / kPi * relative;
        const double levelStd = std::sqrt(4.0 * 6.0 + 2.25 * 10.0) * relative;
        const double change = std::abs(envelope.periodsChange());
        const bool isDrifting = change > kSignificantSigmas * changeStd;
        // Where the tone moves, the figure stands for a range: an even drift has the standard deviation of its width.
        const double drift = isDrifting ? change / std::sqrt(12.0) : 0.0;
        m_reading.frequencyStdHz = hzOf(std::hypot(periodsStd, drift));
        if (isDrifting && change > kUnsteadyFrequency * envelope.periods()) {
            m_reading.warnings.push_back(Warning::UnsteadyFrequency);
        }
        if (envelope.levelChange() > std::max(kUnsteadyLevel, kSignificantSigmas * levelStd)) {
            m_reading.warnings.push_back(Warning::UnsteadyLevel);
        }
    }

    void writeHarmonics()
    {
        const Complex first = m_findings.model.phasors[0];
        const Complex toSine = std::conj(first * Complex(0.0, 1.0)) / std::abs(first);
        Complex turn = toSine;
        double sum = 0.0;
        double variance = 0.0; // of the sum
        bool isAny = false;
        for (std::size_t line = 1; line < m_findings.model.phasors.size(); ++line) {
            turn *= toSine;
            HarmonicReading harmonic;
            harmonic.order = static_cast<int>(line + 1);
            harmonic.frequencyHz = harmonic.order * *m_reading.frequencyHz;
            harmonic.ratio = std::abs(m_findings.model.phasors[line]) / std::abs(first);
            const double phase =
                std::arg(m_findings.model.phasors[line] * turn * Complex(0.0, 1.0));
            harmonic.phaseDeg = phase <= -kPi ? 180.0 : phase * 180.0 / kPi;
            harmonic.inBand = isInBand(harmonic.frequencyHz);
            const double squareVariance = writeSpread(harmonic, std::abs(first));
            m_squareVariances.push_back(squareVariance);
            if (harmonic.inBand) {
                isAny = true;
                variance += squareVariance;
                sum += harmonic.ratio * harmonic.ratio;
            }
            m_reading.harmonics.push_back(harmonic);
        }
        if (isAny) {
            const double thd = std::sqrt(sum);
            m_reading.thdRatio = thd;
            m_reading.thdStdRatio =
                thd > 0.0 ? std::hypot(std::sqrt(variance) / (2.0 * thd), thd * m_levelStd) : 0.0;
        }
        if (*m_reading.frequencyHz * m_findings.settings.harmonicCount > band().highHz) {
            m_reading.warnings.push_back(Warning::HarmonicsAboveBand);
        }
    }

    /// Harmonics in band [FS^2], weighted; what noise adds to each is taken off, for the noise is counted once already.
    [[nodiscard]] double harmonicPowerFs2(double fundamentalFs2, Weighting weighting) const
    {
        double sum = 0.0;
        for (const HarmonicReading& harmonic : m_reading.harmonics) {
            if (harmonic.inBand) {
                const double power =
                    harmonic.ratio * harmonic.ratio * fundamentalFs2 - m_phasorPowerFs2;
                const double factor = weightingFactor(weighting, harmonic.frequencyHz);
                sum += std::max(power, 0.0) * factor * factor;
            }
        }
        return sum;
    }

    /// Variance of harmonicPowerFs2().
    [[nodiscard]] double harmonicVarianceFs4(double fundamentalFs2, Weighting weighting) const
    {
        double sum = 0.0;
        for (std::size_t at = 0; at < m_reading.harmonics.size(); ++at) {
            const HarmonicReading& harmonic = m_reading.harmonics[at];
            if (harmonic.inBand) {
                const double factor = weightingFactor(weighting, harmonic.frequencyHz);
                sum += m_squareVariances[at] * std::pow(fundamentalFs2 * factor * factor, 2);
            }
        }
        return sum;
    }

    void writeNoise()
    {
        const auto noiseIn = [&](Weighting weighting) {
            return m_findings.residual.bandPower(
                binsOf(band().lowHz), binsOf(band().highHz), weighting, hzOf(1.0));
        };
        const double amplitude = m_findings.envelope.amplitude();
        const double fundamental = amplitude * amplitude / 2.0;
        const auto inBand = noiseIn(m_findings.settings.weighting);
        const double noise = inBand.powerFs2;
        if (noise > fundamental * kNumericalNoise * kNumericalNoise) {
            m_reading.noiseDbfs = dbfsFromRms(std::sqrt(noise));
            m_reading.noiseStdDb = kDecibelsOfPower * std::sqrt(inBand.varianceFs4) / noise;
            m_reading.snrDb = -decibelsFromRatio(std::sqrt(noise / fundamental));
        }
        if (!isInBand(*m_reading.frequencyHz)) {
            return; // the total of a band without the fundamental is no reference
        }
        const double factor =
            weightingFactor(m_findings.settings.weighting, *m_reading.frequencyHz);
        const double rest = noise + harmonicPowerFs2(fundamental, m_findings.settings.weighting);
        const double total = fundamental * factor * factor + rest;
        m_reading.thdnRatio = std::sqrt(rest / total);
        if (*m_reading.thdnRatio > 0.0) {
            // By the fundamental's share of the total, for what adds to the rest adds to the total too.
            const double variance = inBand.varianceFs4 +
                                    harmonicVarianceFs4(fundamental, m_findings.settings.weighting);
            m_reading.thdnStdRatio = std::hypot(std::sqrt(variance) / rest / 2.0, m_levelStd) *
                                     *m_reading.thdnRatio * (1.0 - rest / total);
            m_reading.sinadDb = -decibelsFromRatio(*m_reading.thdnRatio);
        }
        if (m_reading.thdRatio) {
            const double plain = m_findings.settings.weighting == Weighting::None
                                     ? total
                                     : fundamental + noiseIn(Weighting::None).powerFs2 +
                                           harmonicPowerFs2(fundamental, Weighting::None);
            m_reading.thdRRatio = *m_reading.thdRatio * std::sqrt(fundamental / plain);
        }
    }

    void writeHum()
    {
        const auto hum = findHum(m_findings.residual, hzOf(1.0));
        const double fundamental = m_findings.envelope.amplitude();
        if (hum && hum->amplitude > kNumericalLine * fundamental) {
            m_reading.mainsHumDbc = decibelsFromRatio(hum->amplitude / fundamental);
            m_reading.warnings.push_back(Warning::MainsHum);
        }
    }

private:
    [[nodiscard]] double binsOf(double hz) const { return hz * m_findings.lengthS; }
    [[nodiscard]] double hzOf(double bins) const { return bins / m_findings.lengthS; }
    [[nodiscard]] const Band& band() const { return m_findings.settings.band; }
    [[nodiscard]] bool isInBand(double hz) const
    {
        return hz >= band().lowHz && hz <= band().highHz;
    }

    /// Spread of a harmonic's ratio and phase from the noise beside it.
    ///
    /// @return  Variance of the squared ratio, the fundamental taken as known.
    double writeSpread(HarmonicReading& harmonic, double fundamental) const
    {
        const double periods = m_findings.model.periods * harmonic.order;
        const double samplePower = m_findings.residual.localPowerFs2(periods) *
                                   static_cast<double>(m_findings.residual.size() - 1);
        // Of one of the two components, over the fundamental's square.
        const double scale = m_findings.phasorNoise / 2.0 / (fundamental * fundamental);
        const double part = samplePower * scale;
        const double square = harmonic.ratio * harmonic.ratio;
        const double squareVariance =
            4.0 * part * std::max(square - 2.0 * part, 0.0) + 4.0 * part * part;
        const double own = harmonic.ratio > 0.0
                               ? std::min(std::sqrt(squareVariance / square) / 2.0, std::sqrt(part))
                               : std::sqrt(part);
        harmonic.ratioStd = std::hypot(own, harmonic.ratio * m_levelStd);
        const double firstStd = harmonic.order * std::sqrt(m_samplePowerFs2 * scale);
        const double phaseStd =
            square > 0.0 ? std::hypot(std::sqrt(part / square), firstStd) : kAnyPhase;
        harmonic.phaseStdDeg = std::min(phaseStd, kAnyPhase) * 180.0 / kPi;
        return squareVariance;
    }

    const ToneFindings& m_findings;
    Reading& m_reading;
    double m_samplePowerFs2; ///< noise about the fundamental, as mean square were it white
    double m_levelStd = 0.0; ///< of the fundamental's amplitude, relative to it
    std::vector<double> m_squareVariances; ///< of the harmonics' squared ratios
    double m_phasorPowerFs2;               ///< what that noise adds to a harmonic's squared rms
};

} // namespace

void writeFigures(const ToneFindings& findings, Reading& reading)
{
    FigureWriter writer(findings, reading);
    writer.writeTone();
    writer.writeHarmonics();
    writer.writeNoise();
    writer.writeHum();
}

} // namespace sinewright::core
