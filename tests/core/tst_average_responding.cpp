// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/signal/average_responding.h"

#include <QTest>

#include <cmath>
#include <functional>
#include <numbers>

#include "tests/support/signals.h"

using namespace sinewright;

using Shape = std::function<double(double)>;
Q_DECLARE_METATYPE(Shape)

class TestAverageResponding : public QObject
{
    Q_OBJECT

private slots:
    void reading_overTrueRms_data();
    void reading_overTrueRms();
    void gaussianNoise_readsLow();
    void nothing_readsZero();
};

// A meter calibrated in rms of a sine: common practice. The ratios are integrals in closed form.
void TestAverageResponding::reading_overTrueRms_data()
{
    QTest::addColumn<Shape>("shape"); // one cycle, by its phase in radians
    QTest::addColumn<double>("ratio");
    QTest::newRow("sine: 1") << Shape([](double t) { return std::sin(t); }) << 1.0;
    QTest::newRow("square: pi / (2 sqrt 2)")
        << Shape([](double t) { return std::sin(t) >= 0.0 ? 1.0 : -1.0; }) << 1.110720735;
    QTest::newRow("triangle: pi sqrt 3 / (4 sqrt 2)")
        << Shape([](double t) { return std::asin(std::sin(t)); }) << 0.961912373;
    QTest::newRow("sawtooth: as the triangle")
        << Shape([](double t) { return t / std::numbers::pi - 1.0; }) << 0.961912373;
    QTest::newRow("sine and 10 % third, in phase")
        << Shape([](double t) { return std::sin(t) + 0.1 * std::sin(3.0 * t); }) << 1.028205;
    QTest::newRow("sine and 10 % third, antiphase")
        << Shape([](double t) { return std::sin(t) - 0.1 * std::sin(3.0 * t); }) << 0.961869;
    QTest::newRow("sine and 10 % third, quadrature")
        << Shape([](double t) { return std::sin(t) + 0.1 * std::cos(3.0 * t); }) << 0.999876;
    QTest::newRow("sine and 10 % second")
        << Shape([](double t) { return std::sin(t) + 0.1 * std::sin(2.0 * t); }) << 0.995037;
}

void TestAverageResponding::reading_overTrueRms()
{
    QFETCH(Shape, shape);
    QFETCH(double, ratio);
    constexpr std::size_t kPoints = 100000;
    std::vector<double> cycle(kPoints);
    for (std::size_t n = 0; n < kPoints; ++n) {
        cycle[n] = shape(2.0 * std::numbers::pi * (static_cast<double>(n) + 0.5) / kPoints);
    }
    // Printed to six decimals; the sum over the points is good to better than 1e-8.
    QCOMPARE_LE(std::abs(core::averageRespondingRms(cycle) / tests::rmsOf(cycle) - ratio), 6e-7);
}

void TestAverageResponding::gaussianNoise_readsLow()
{
    const auto noise = tests::whiteNoise(0.1, 1000000, 20250101);
    // Mean |x| of a million samples scatters by sqrt(pi / 2 - 1) / 1000 of itself: 4 sigma.
    const double ratio = core::averageRespondingRms(noise) / tests::rmsOf(noise);
    QCOMPARE_LE(std::abs(ratio - std::sqrt(std::numbers::pi) / 2.0), 0.003);
}

void TestAverageResponding::nothing_readsZero()
{
    QCOMPARE(core::averageRespondingRms({}), 0.0);
}

QTEST_APPLESS_MAIN(TestAverageResponding)
#include "tst_average_responding.moc"
