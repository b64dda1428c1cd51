// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/measure/measure.h"

#include <QTest>

#include <cmath>

#include "tests/support/signals.h"

using namespace sinewright;

class TestQuantiser : public QObject
{
    Q_OBJECT

private slots:
    void idealConverter_readsSixDecibelsABit_data();
    void idealConverter_readsSixDecibelsABit();
    void triangularDither_addsItsPower_data();
    void triangularDither_addsItsPower();
};

namespace {

constexpr double kRateHz = 48000.0;
constexpr std::size_t kCount = 192000;

/// All the noise there is, from 0 to half the rate.
core::MeasureSettings wholeBand()
{
    core::MeasureSettings settings;
    settings.band = {0.0, kRateHz / 2.0};
    return settings;
}

/// Just short of the end codes, at a frequency that shares no period with the rate.
tests::ToneSpec nearFullScale(int bits)
{
    return {.rateHz = kRateHz,
            .frequencyHz = 997.0 + 1.0 / std::sqrt(7.0),
            .amplitude = 1.0 - 2.5 * std::ldexp(1.0, 1 - bits)};
}

void addBits(const char* source)
{
    QTest::addColumn<int>("bits");
    for (const int bits : {8, 10, 12, 14, 16, 18, 20, 24}) {
        QTest::addRow("%s, N = %d", source, bits) << bits;
    }
}

} // namespace

void TestQuantiser::idealConverter_readsSixDecibelsABit_data()
{
    addBits("IEEE Std 1241: 20 log10(2^N sqrt 1.5), from memory");
}

void TestQuantiser::idealConverter_readsSixDecibelsABit()
{
    QFETCH(int, bits);
    const auto spec = nearFullScale(bits);
    const auto reading =
        core::measure(tests::quantised(tests::tone(spec, kCount), bits), {kRateHz}, wholeBand());
    QCOMPARE(reading.status, core::ReadingStatus::Ok);
    const double expected = 6.020600 * bits + 1.760913 + 20.0 * std::log10(spec.amplitude);
    // The error of a quantised sine is not quite even: 0.3 dB, as promised.
    QCOMPARE_LE(std::abs(*reading.sinadDb - expected), 0.3);
}

void TestQuantiser::triangularDither_addsItsPower_data()
{
    addBits("TPDF of two steps: noise q^2 / 4, 4.771 dB above q^2 / 12");
}

void TestQuantiser::triangularDither_addsItsPower()
{
    QFETCH(int, bits);
    const auto spec = nearFullScale(bits);
    const auto dithered =
        tests::sum(tests::tone(spec, kCount), tests::triangularDither(bits, kCount, 11));
    const auto reading = core::measure(tests::quantised(dithered, bits), {kRateHz}, wholeBand());
    const double step = std::ldexp(1.0, 1 - bits);
    // The power of 192000 samples scatters by 0.014 dB: 4 sigma.
    QCOMPARE_LE(std::abs(*reading.noiseDbfs - core::dbfsFromRms(step / 2.0)), 0.06);
    // With it the harmonics are gone: each lies in the noise of its own line, 40 dB below the sum.
    QCOMPARE_LE(core::decibelsFromRatio(*reading.thdRatio), -*reading.snrDb - 25.0);
}

QTEST_APPLESS_MAIN(TestQuantiser)
#include "tst_quantiser.moc"
