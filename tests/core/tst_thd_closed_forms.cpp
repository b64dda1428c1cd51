// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/measure/measure.h"

#include <QTest>

#include <algorithm>
#include <cmath>
#include <functional>
#include <numbers>

#include "tests/support/signals.h"

using namespace sinewright;
using core::Reading;

using Shape = std::function<double(double)>;
using Series = std::function<double(int)>;
Q_DECLARE_METATYPE(Shape)
Q_DECLARE_METATYPE(Series)

/// THD of waveforms whose harmonics are known in closed form.
class TestThdClosedForms : public QObject
{
    Q_OBJECT

private slots:
    void series_truncatedSum_data();
    void series_truncatedSum();
    void series_isEveryHarmonicAsBuilt();
    void clippedSine_followsClosedForm_data();
    void clippedSine_followsClosedForm();
    void characteristic_harmonics_data();
    void characteristic_harmonics();
    void polynomial_isExact();
    void thdR_followsFromThdF_data();
    void thdR_followsFromThdF();
};

namespace {

constexpr double kRateHz = 192000.0;
constexpr std::size_t kCount = 192000;

/// Incommensurate with the rate: what folds back from beyond half the rate falls between the harmonics.
constexpr double kFrequencyHz = 100.37;

core::MeasureSettings upTo(int harmonicCount)
{
    core::MeasureSettings settings;
    settings.harmonicCount = harmonicCount;
    return settings;
}

Reading read(const std::vector<double>& samples, int harmonicCount)
{
    return core::measure(samples, {kRateHz}, upTo(harmonicCount));
}

double square(int n)
{
    return n % 2 == 1 ? 1.0 / n : 0.0;
}
double triangle(int n)
{
    return n % 2 == 1 ? (n % 4 == 1 ? 1.0 : -1.0) / (n * n) : 0.0;
}
double sawtooth(int n)
{
    return 1.0 / n;
}

} // namespace

void TestThdClosedForms::series_truncatedSum_data()
{
    QTest::addColumn<Series>("series");
    QTest::addColumn<int>("highest");
    QTest::addColumn<double>("thd");
    QTest::newRow("square, series to 5") << Series(square) << 5 << 0.388730;
    QTest::newRow("square, series to 7") << Series(square) << 7 << 0.414149;
    QTest::newRow("square, series to 9") << Series(square) << 9 << 0.428795;
    QTest::newRow("square, series to 20") << Series(square) << 20 << 0.456860;
    QTest::newRow("sawtooth, series to 5") << Series(sawtooth) << 5 << 0.680890;
    QTest::newRow("sawtooth, series to 10") << Series(sawtooth) << 10 << 0.741463;
    QTest::newRow("sawtooth, series to 20") << Series(sawtooth) << 20 << 0.772116;
    QTest::newRow("triangle, series to 5") << Series(triangle) << 5 << 0.118092;
    QTest::newRow("triangle, series to 9") << Series(triangle) << 9 << 0.120477;
    QTest::newRow("triangle, series to 20") << Series(triangle) << 20 << 0.121067;
}

void TestThdClosedForms::series_truncatedSum()
{
    QFETCH(Series, series);
    QFETCH(int, highest);
    QFETCH(double, thd);
    // Many more harmonics are there than are counted.
    tests::ToneSpec spec{.rateHz = kRateHz, .frequencyHz = kFrequencyHz, .amplitude = 0.3};
    for (int n = 2; n <= 60; ++n) {
        spec.partials.push_back({n, series(n), (n - 1) * spec.phaseRad});
    }
    const Reading reading = read(tests::tone(spec, kCount), highest);
    QVERIFY(reading.thdRatio.has_value());
    QCOMPARE_LE(std::abs(*reading.thdRatio - thd), 6e-7); // printed to six decimals
}

void TestThdClosedForms::series_isEveryHarmonicAsBuilt()
{
    tests::ToneSpec spec{.rateHz = kRateHz, .frequencyHz = kFrequencyHz, .amplitude = 0.3};
    // Half-wave rectified sine: 2 / (1 - n^2) / pi of the peak for even n, the fundamental being half of it.
    for (int n = 2; n <= 32; n += 2) {
        spec.partials.push_back({n, 4.0 / (std::numbers::pi * (n * n - 1.0)), 0.0});
    }
    const Reading reading = read(tests::tone(spec, kCount), 32);
    QCOMPARE(reading.harmonics.size(), std::size_t{31});
    QCOMPARE_LE(std::abs(reading.harmonics[0].ratio - 0.424413), 6e-7);
    QCOMPARE_LE(std::abs(reading.harmonics[2].ratio - 0.084883), 6e-7);
    QCOMPARE_LE(std::abs(reading.harmonics[4].ratio - 0.036378), 6e-7);
    for (std::size_t line = 1; line < reading.harmonics.size(); line += 2) {
        QCOMPARE_LE(reading.harmonics[line].ratio, 1e-9); // odd orders are absent
    }
    // The whole sum is sqrt(1 - 8 / pi^2); beyond the 32nd it lacks 1.3e-5.
    const double whole = std::sqrt(1.0 - 8.0 / (std::numbers::pi * std::numbers::pi));
    QCOMPARE_LE(std::abs(*reading.thdRatio - whole), 2e-5);
    QCOMPARE_LT(*reading.thdRatio, whole);
}

void TestThdClosedForms::clippedSine_followsClosedForm_data()
{
    QTest::addColumn<double>("level");
    QTest::newRow("hard clip, Fourier integral, c = 0.99") << 0.99;
    QTest::newRow("hard clip, Fourier integral, c = 0.9") << 0.9;
    QTest::newRow("hard clip, Fourier integral, c = 0.7071") << std::sqrt(0.5);
    QTest::newRow("hard clip, Fourier integral, c = 0.5") << 0.5;
    QTest::newRow("hard clip, Fourier integral, c = 0.1") << 0.1;
}

void TestThdClosedForms::clippedSine_followsClosedForm()
{
    QFETCH(double, level);
    const double theta = std::asin(level);
    const double first = 2.0 / std::numbers::pi * (theta + std::sin(theta) * std::cos(theta));
    const auto samples =
        tests::shaped({.rateHz = kRateHz, .frequencyHz = kFrequencyHz, .amplitude = 0.8},
                      kCount,
                      [level](double x) { return std::clamp(x, -level, level); });
    const Reading reading = read(samples, 9);
    QCOMPARE(reading.status, core::ReadingStatus::Overload); // a flat top is what it is
    QCOMPARE_LE(std::abs(*reading.levelDbfs - 20.0 * std::log10(0.8 * first)), 0.0005);
    // The corners' series falls as 4 / (pi n^2), and what lies beyond half the rate folds back; near the
    // fundamental it is of the order n = rate / frequency, and twice the rate's adds a quarter.
    const double folded =
        2.0 * 4.0 / std::numbers::pi * std::pow(kFrequencyHz / kRateHz, 2.0) / first;
    for (const auto& harmonic : reading.harmonics) {
        const int n = harmonic.order;
        const double closed = n % 2 == 0 ? 0.0
                                         : 4.0 / (std::numbers::pi * n * (n * n - 1.0)) *
                                               (n * std::cos(theta) * std::sin(n * theta) -
                                                std::sin(theta) * std::cos(n * theta)) /
                                               first;
        QCOMPARE_LE(std::abs(harmonic.ratio - std::abs(closed)), folded);
        if (n % 2 == 1) {
            const double expected = closed > 0.0 ? 0.0 : 180.0;
            const double off = std::abs(std::remainder(harmonic.phaseDeg - expected, 360.0));
            QCOMPARE_LE(off, 0.2);
        }
    }
}

void TestThdClosedForms::characteristic_harmonics_data()
{
    QTest::addColumn<Shape>("shape");
    QTest::addColumn<int>("order");
    QTest::addColumn<double>("ratio");
    const auto oneSided = [](double level) {
        return Shape([level](double x) { return std::min(x, level); });
    };
    const auto deadZone = [](double d) {
        return Shape([d](double x) { return std::copysign(std::max(std::abs(x) - d, 0.0), x); });
    };
    // Fourier integrals, evaluated independently on 2^20 points.
    QTest::newRow("one-sided clip at 0.9, second") << oneSided(0.9) << 2 << 0.017909538;
    QTest::newRow("one-sided clip at 0.9, third") << oneSided(0.9) << 3 << 0.016118584;
    QTest::newRow("one-sided clip at 0.9, fourth") << oneSided(0.9) << 4 << 0.013826164;
    QTest::newRow("one-sided clip at 0.5, second") << oneSided(0.5) << 2 << 0.171326804;
    QTest::newRow("one-sided clip at 0.5, third") << oneSided(0.5) << 3 << 0.085663402;
    QTest::newRow("dead zone 0.01, third") << deadZone(0.01) << 3 << 0.004298221;
    QTest::newRow("dead zone 0.01, fifth") << deadZone(0.01) << 5 << 0.002578245;
    QTest::newRow("dead zone 0.1, third") << deadZone(0.1) << 3 << 0.047894192;
    QTest::newRow("dead zone 0.1, fifth") << deadZone(0.1) << 5 << 0.027970208;
}

void TestThdClosedForms::characteristic_harmonics()
{
    QFETCH(Shape, shape);
    QFETCH(int, order);
    QFETCH(double, ratio);
    const auto samples = tests::shaped(
        {.rateHz = kRateHz, .frequencyHz = kFrequencyHz, .amplitude = 0.8}, kCount, shape);
    const Reading reading = read(samples, 10);
    const auto& harmonic = reading.harmonics.at(static_cast<std::size_t>(order - 2));
    QCOMPARE(harmonic.order, order);
    QCOMPARE_LE(std::abs(harmonic.ratio - ratio), 2e-6); // folding, as above
}

void TestThdClosedForms::polynomial_isExact()
{
    // y = x + a2 x^2 + a3 x^3 with A = 1: H2 = (a2 / 2) / (1 + 3 a3 / 4), H3 = (a3 / 4) / (1 + 3 a3 / 4).
    const auto samples =
        tests::shaped({.rateHz = kRateHz, .frequencyHz = kFrequencyHz, .amplitude = 0.5},
                      kCount,
                      [](double x) { return x + 0.01 * x * x + 0.02 * x * x * x; });
    const Reading reading = read(samples, 10);
    QCOMPARE(reading.status, core::ReadingStatus::Ok);
    QCOMPARE_LE(std::abs(reading.harmonics[0].ratio - 0.005 / 1.015), 1e-12);
    QCOMPARE_LE(std::abs(reading.harmonics[1].ratio - 0.005 / 1.015), 1e-12);
    QCOMPARE_LE(reading.harmonics[2].ratio, 1e-12);
    // sin^2 = (1 - cos 2 theta) / 2: the second lags by 90 degrees; sin^3 holds -sin 3 theta / 4.
    QCOMPARE_LE(std::abs(reading.harmonics[0].phaseDeg + 90.0), 1e-6);
    QCOMPARE_LE(std::abs(std::abs(reading.harmonics[1].phaseDeg) - 180.0), 1e-6);
    QCOMPARE_LE(std::abs(*reading.dcFs - 0.5 * 0.005), 1e-12);
}

void TestThdClosedForms::thdR_followsFromThdF_data()
{
    QTest::addColumn<double>("thdF");
    QTest::addColumn<double>("thdR");
    QTest::newRow("F / sqrt(1 + F^2): 0.01") << 0.01 << 0.0099995000;
    QTest::newRow("F / sqrt(1 + F^2): 0.1") << 0.1 << 0.0995037190;
    QTest::newRow("F / sqrt(1 + F^2): 0.5") << 0.5 << 0.4472135955;
}

void TestThdClosedForms::thdR_followsFromThdF()
{
    QFETCH(double, thdF);
    QFETCH(double, thdR);
    const auto samples = tests::tone(
        {.rateHz = kRateHz, .frequencyHz = kFrequencyHz, .partials = {{3, thdF, 0.7}}}, kCount);
    const Reading reading = read(samples, 10);
    QCOMPARE_LE(std::abs(*reading.thdRatio - thdF), 1e-10);
    QCOMPARE_LE(std::abs(*reading.thdRRatio - thdR), 1e-10);
    QCOMPARE_LE(std::abs(*reading.thdnRatio - thdR), 1e-10); // nothing else is there
}

QTEST_APPLESS_MAIN(TestThdClosedForms)
#include "tst_thd_closed_forms.moc"
