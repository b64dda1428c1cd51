// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/measure/measure.h"

#include <QTest>

#include <array>
#include <cmath>
#include <numbers>

#include "tests/support/reader.h"
#include "tests/support/signals.h"

using namespace sinewright;
using core::Reading;

/// How far figures scatter from stretch to stretch, against the spread that each reading states.
class TestUncertainty : public QObject
{
    Q_OBJECT

private slots:
    void statedSigma_agreesWithScatter_data();
    void statedSigma_agreesWithScatter();
    void withoutTone_noSigma();

private:
    tests::Reader read;
};

namespace {

constexpr double kRateHz = 48000.0;
constexpr int kRuns = 400;

/// Scatter about the mean, and the mean of what was stated.
class Spread
{
public:
    void add(double value, double stated)
    {
        ++m_count;
        const double step = value - m_mean;
        m_mean += step / m_count;
        m_squares += step * (value - m_mean);
        m_stated += stated;
    }
    [[nodiscard]] double ratio() const
    {
        return m_stated / m_count / std::sqrt(m_squares / (m_count - 1.0));
    }

private:
    int m_count = 0;
    double m_mean = 0.0;
    double m_squares = 0.0;
    double m_stated = 0.0;
};

} // namespace

void TestUncertainty::statedSigma_agreesWithScatter_data()
{
    QTest::addColumn<double>("snrDb");
    QTest::addColumn<int>("count");
    QTest::addColumn<double>("frequencyHz");
    QTest::addColumn<core::Weighting>("weighting");
    const auto none = core::Weighting::None;
    QTest::newRow("Rife and Boorstyn 1974: quick reading") << 60.0 << 4800 << 1000.3 << none;
    QTest::newRow("Rife and Boorstyn 1974: long stretch") << 80.0 << 16384 << 997.0 << none;
    QTest::newRow("Rife and Boorstyn 1974: few periods") << 60.0 << 1024 << 500.7 << none;
    QTest::newRow("IEC 61672-1: A-weighted") << 60.0 << 4800 << 1000.3 << core::Weighting::A;
}

void TestUncertainty::statedSigma_agreesWithScatter()
{
    QFETCH(double, snrDb);
    QFETCH(int, count);
    QFETCH(double, frequencyHz);
    QFETCH(core::Weighting, weighting);
    const double ratio = core::ratioFromDecibels(snrDb); // rms over rms
    core::MeasureSettings settings;
    settings.weighting = weighting;
    const tests::ToneSpec spec{.frequencyHz = frequencyHz,
                               .partials = {{2, 2.0 / ratio, 0.3}, {3, 1.0 / ratio, -1.0}}};
    const auto clean = tests::tone(spec, static_cast<std::size_t>(count));
    enum Figure { Level, Second, SecondPhase, Thd, Thdn, Noise, Figures };
    const std::array<const char*, Figures> names{
        "level", "second harmonic", "its phase", "THD", "THD+N", "noise"};
    std::array<Spread, Figures> spreads;
    for (int run = 0; run < kRuns; ++run) {
        const auto noise = tests::whiteNoise(spec.amplitude / std::numbers::sqrt2 / ratio,
                                             static_cast<std::size_t>(count),
                                             static_cast<std::uint64_t>(5000 + run));
        const Reading reading = read(tests::sum(clean, noise), kRateHz, settings);
        QCOMPARE(reading.status, core::ReadingStatus::Ok);
        const core::HarmonicReading& second = reading.harmonics.front();
        spreads[Level].add(*reading.levelDbfs, *reading.levelStdDb);
        spreads[Second].add(second.ratio, *second.ratioStd);
        spreads[SecondPhase].add(second.phaseDeg, *second.phaseStdDeg);
        spreads[Thd].add(*reading.thdRatio, *reading.thdStdRatio);
        spreads[Thdn].add(*reading.thdnRatio, *reading.thdnStdRatio);
        spreads[Noise].add(*reading.noiseDbfs, *reading.noiseStdDb);
    }
    for (std::size_t figure = 0; figure < Figures; ++figure) {
        qInfo("%s: stated over found %.3f", names[figure], spreads[figure].ratio());
    }
    for (const Spread& spread : spreads) {
        // What is asked of a stated spread; the scatter of 400 runs is itself known to 3.5 %.
        QCOMPARE_LE(std::abs(spread.ratio() - 1.0), 0.2);
    }
}

void TestUncertainty::withoutTone_noSigma()
{
    const Reading reading = read(tests::whiteNoise(0.1, 4800, 7));
    QCOMPARE(reading.status, core::ReadingStatus::NoTone);
    QVERIFY(!reading.levelStdDb);
    QVERIFY(!reading.thdStdRatio);
    QVERIFY(!reading.thdnStdRatio);
    QVERIFY(!reading.noiseStdDb);
}

QTEST_APPLESS_MAIN(TestUncertainty)
#include "tst_uncertainty.moc"
