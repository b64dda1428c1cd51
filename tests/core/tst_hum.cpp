// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/measure/hum.h"

#include <QTest>

#include <algorithm>
#include <cmath>

#include "tests/support/reader.h"
#include "tests/support/signals.h"

using namespace sinewright;
using core::Reading;

class TestHum : public QObject
{
    Q_OBJECT

private slots:
    void line_isFoundAtItsLevel_data();
    void line_isFoundAtItsLevel();
    void plainNoise_raisesNone();
    void fundamentalAndHarmonics_areNotHum_data();
    void fundamentalAndHarmonics_areNotHum();
    void strongerFamily_wins();
    void flankOfAMovingTone_isNotHum_data();
    void flankOfAMovingTone_isNotHum();

private:
    tests::Reader read;
};

namespace {

constexpr std::size_t kCount = 192000;

std::vector<double> withLine(double toneHz, double lineHz, double dbc, std::uint64_t seed)
{
    return tests::sum(tests::sum(tests::tone({.frequencyHz = toneHz}, kCount),
                                 tests::tone({.frequencyHz = lineHz,
                                              .amplitude = 0.5 * core::ratioFromDecibels(dbc)},
                                             kCount)),
                      tests::whiteNoise(1e-5, kCount, seed));
}

} // namespace

void TestHum::line_isFoundAtItsLevel_data()
{
    QTest::addColumn<double>("lineHz");
    QTest::addColumn<double>("dbc");
    QTest::newRow("50 Hz, -60 dBc") << 50.0 << -60.0;
    QTest::newRow("50.1 Hz: mains off by 0.2 %, -80 dBc") << 50.1 << -80.0;
    QTest::newRow("49.9 Hz, -80 dBc") << 49.9 << -80.0;
    QTest::newRow("100 Hz, -90 dBc") << 100.0 << -90.0;
    QTest::newRow("149.93 Hz, -90 dBc") << 149.93 << -90.0;
    QTest::newRow("300.6 Hz, sixth of 50.1 Hz, -100 dBc") << 300.6 << -100.0;
    QTest::newRow("60.05 Hz, -90 dBc") << 60.05 << -90.0;
    QTest::newRow("359.3 Hz, sixth of 59.88 Hz, -90 dBc") << 359.3 << -90.0;
}

void TestHum::line_isFoundAtItsLevel()
{
    QFETCH(double, lineHz);
    QFETCH(double, dbc);
    for (std::uint64_t seed = 1; seed <= 5; ++seed) {
        const Reading reading = read(withLine(997.0, lineHz, dbc, seed));
        QVERIFY(reading.mainsHumDbc.has_value());
        // Noise of -91 dB in 24 kHz leaves -137 dBc in a quarter of a hertz, 1.6 % of the weakest line: 3 sigma.
        QCOMPARE_LE(std::abs(*reading.mainsHumDbc - dbc), dbc < -95.0 ? 0.4 : 0.15);
        QVERIFY(std::ranges::find(reading.warnings, core::Warning::MainsHum) !=
                reading.warnings.end());
    }
}

void TestHum::plainNoise_raisesNone()
{
    // One false alarm in ten thousand is promised: among 600 stretches of any length even one is unlikely (6 %), two
    // are not to be had.
    int alarms = 0;
    for (std::uint64_t seed = 1; seed <= 600; ++seed) {
        const std::size_t count = seed % 3 == 0 ? 96000 : (seed % 3 == 1 ? 24000 : 9600);
        const Reading reading = read(tests::sum(tests::tone({.frequencyHz = 997.0}, count),
                                                tests::whiteNoise(1e-4, count, seed)));
        QCOMPARE(reading.status, core::ReadingStatus::Ok);
        alarms += reading.mainsHumDbc ? 1 : 0;
    }
    QCOMPARE_LE(alarms, 1);
}

void TestHum::fundamentalAndHarmonics_areNotHum_data()
{
    QTest::addColumn<double>("toneHz");
    QTest::newRow("tone at 50 Hz") << 50.0;
    QTest::newRow("tone at 100 Hz, harmonics on the family") << 100.0;
    QTest::newRow("tone at 60.02 Hz") << 60.02;
    QTest::newRow("tone at 25 Hz, its second on 50 Hz") << 25.0;
    QTest::newRow("tone at 22.73 Hz, its eleventh near 250 Hz") << 22.73;
}

void TestHum::fundamentalAndHarmonics_areNotHum()
{
    QFETCH(double, toneHz);
    const tests::ToneSpec spec{
        .frequencyHz = toneHz,
        .partials = {
            {2, 1e-3, 0.0}, {3, 1e-3, 0.0}, {4, 1e-4, 0.0}, {6, 1e-4, 0.0}, {11, 1e-3, 0.0}}};
    const Reading reading =
        read(tests::sum(tests::tone(spec, kCount), tests::whiteNoise(1e-5, kCount, 2)));
    QCOMPARE(reading.status, core::ReadingStatus::Ok);
    QVERIFY(!reading.mainsHumDbc);
}

void TestHum::strongerFamily_wins()
{
    const auto both = tests::sum(withLine(997.0, 50.0, -70.0, 3),
                                 tests::tone({.frequencyHz = 120.0, .amplitude = 0.5e-4}, kCount));
    QCOMPARE_LE(std::abs(*read(both).mainsHumDbc + 70.0), 0.15);
}

void TestHum::flankOfAMovingTone_isNotHum_data()
{
    QTest::addColumn<double>("toneHz");
    for (const double tone : {43.0, 111.0, 118.9, 155.0, 310.0}) {
        QTest::addRow("dying and bouncing tone at %.1f Hz", tone) << tone;
    }
}

void TestHum::flankOfAMovingTone_isNotHum()
{
    QFETCH(double, toneHz);
    auto samples = tests::tone({.frequencyHz = toneHz}, kCount);
    for (std::size_t n = 0; n < kCount; ++n) {
        const double t = static_cast<double>(n) / 48000.0;
        samples[n] *= 0.3 + 0.7 * std::exp(-t) * (1.0 - 0.5 * std::sin(9.0 * t) * std::exp(-t));
    }
    const Reading reading =
        read(tests::sum(std::move(samples), tests::whiteNoise(1e-6, kCount, 6)));
    QCOMPARE(reading.status, core::ReadingStatus::Ok);
    QVERIFY(!reading.mainsHumDbc);
}

QTEST_APPLESS_MAIN(TestHum)
#include "tst_hum.moc"
