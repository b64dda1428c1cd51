// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/signal/spectrum.h"
#include "core/units.h"

#include <QTest>

#include <algorithm>
#include <cmath>

#include "tests/support/signals.h"

using namespace sinewright;

class TestSpectrum : public QObject
{
    Q_OBJECT

private slots:
    void fullScaleSine_readsHalfOnItsBin();
    void flatTop_holdsLevelBetweenBins();
    void dcTakenOut_leavesTheLowestBinsToTheTone();
    void whiteNoise_sumsToItsPower();
    void goodLength_isSmoothAndClose();
};

void TestSpectrum::fullScaleSine_readsHalfOnItsBin()
{
    core::Spectrum spectrum(core::minimumSidelobeWindow(7), 4096);
    const auto sine =
        tests::tone({.rateHz = 4096.0, .frequencyHz = 1000.0, .amplitude = 1.0}, 4096);
    const auto power = spectrum.powerFs2(sine);
    QCOMPARE(power.size(), std::size_t{2049});
    QCOMPARE_LE(std::abs(power[1000] - 0.5), 1e-12);
    // Albrecht 2010: sidelobes at -180.5 dB; the lobe ends 7 bins away.
    const double beyond = *std::max_element(power.begin() + 1007, power.end());
    QCOMPARE_LE(10.0 * std::log10(beyond / 0.5), -180.0);
}

void TestSpectrum::flatTop_holdsLevelBetweenBins()
{
    // Heinzel 2002: HFT116D errs by at most 0.0028 dB within half a bin.
    core::Spectrum spectrum(*core::findCosineWindow("HFT116D"), 4096);
    for (const double offset : {0.0, 0.1, 0.25, 0.4, 0.5}) {
        const auto sine =
            tests::tone({.rateHz = 4096.0, .frequencyHz = 1000.0 + offset, .amplitude = 0.1}, 4096);
        const double level = core::dbfsFromRms(std::sqrt(spectrum.powerFs2(sine)[1000]));
        QCOMPARE_LE(std::abs(level + 20.0), 0.003);
    }
}

void TestSpectrum::dcTakenOut_leavesTheLowestBinsToTheTone()
{
    constexpr std::size_t kCount = 4096;
    constexpr double kBin =
        100.37; // no whole number of periods, so that the plain mean is not zero
    std::vector<double> samples(kCount);
    for (std::size_t i = 0; i < kCount; ++i) {
        const double turns = kBin * static_cast<double>(i) / static_cast<double>(kCount);
        samples[i] = 0.1 + 0.5 * std::sin(2.0 * std::numbers::pi * turns);
    }
    core::Spectrum keeping(core::minimumSidelobeWindow(7), kCount);
    core::Spectrum without(core::minimumSidelobeWindow(7), kCount, core::Spectrum::Dc::TakeOut);
    // DC keeps its lobe of seven bins: 0.01 times 2 at bin 0, still far above the sidelobes at bin 3.
    QCOMPARE_GE(keeping.powerFs2(samples)[3], 1e-6);
    // What is left are sidelobes 180 dB below the tone's 0.125 (Albrecht 2001, from memory): of the tone and of its
    // image at minus its frequency, each once by itself and once through the mean, so four amplitudes at the most.
    for (std::size_t bin = 0; bin < 10; ++bin) {
        QCOMPARE_LE(without.powerFs2(samples)[bin], 16.0 * 0.125 * 1e-18);
    }
}

void TestSpectrum::whiteNoise_sumsToItsPower()
{
    core::Spectrum spectrum(core::minimumSidelobeWindow(4), 65536);
    const auto noise = tests::whiteNoise(0.01, 65536, 7);
    double sum = 0.0;
    for (const double power : spectrum.powerFs2(noise)) {
        sum += power;
    }
    const double rms = std::sqrt(sum / spectrum.noiseBandwidthBins());
    // The window weighs the samples unevenly: what it sees of 65536 of them scatters by about 0.5 %.
    QCOMPARE_LE(std::abs(rms / 0.01 - 1.0), 0.02);
}

void TestSpectrum::goodLength_isSmoothAndClose()
{
    QCOMPARE(core::goodTransformLength(1), std::size_t{2});
    QCOMPARE(core::goodTransformLength(64), std::size_t{64});
    QCOMPARE(core::goodTransformLength(65), std::size_t{70});
    QCOMPARE(core::goodTransformLength(192000), std::size_t{192000});
    QCOMPARE(core::goodTransformLength(1048583), std::size_t{1049760}); // 2^5 3^8 5
}

QTEST_APPLESS_MAIN(TestSpectrum)
#include "tst_spectrum.moc"
