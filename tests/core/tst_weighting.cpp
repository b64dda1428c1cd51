// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/signal/weighting.h"
#include "core/units.h"

#include <QTest>

#include <array>
#include <cmath>
#include <utility>

using namespace sinewright;
using core::Weighting;

class TestWeighting : public QObject
{
    Q_OBJECT

private slots:
    void aCurve_agreesWithStandard_data();
    void aCurve_agreesWithStandard();
    void itu468Curve_agreesWithRecommendation_data();
    void itu468Curve_agreesWithRecommendation();
    void whiteNoise_readsKnownLevel_data();
    void whiteNoise_readsKnownLevel();
    void none_isFlat();
};

namespace {

double levelDb(Weighting weighting, double hz)
{
    return core::decibelsFromRatio(core::weightingFactor(weighting, hz));
}

} // namespace

void TestWeighting::aCurve_agreesWithStandard_data()
{
    QTest::addColumn<int>("step"); // tenths of a decade from 1 kHz
    QTest::addColumn<double>("level");
    constexpr std::array kPublished{-70.4, -63.4, -56.7, -50.5, -44.7, -39.4, -34.6, -30.2, -26.2,
                                    -22.5, -19.1, -16.1, -13.4, -10.9, -8.6,  -6.6,  -4.8,  -3.2,
                                    -1.9,  -0.8,  0.0,   0.6,   1.0,   1.2,   1.3,   1.2,   1.0,
                                    0.5,   -0.1,  -1.1,  -2.5,  -4.3,  -6.6,  -9.3};
    int step = -20;
    for (const double level : kPublished) {
        QTest::addRow("IEC 61672-1, A, 1000 * 10^(%d/10) Hz", step) << step << level;
        ++step;
    }
}

void TestWeighting::aCurve_agreesWithStandard()
{
    QFETCH(int, step);
    QFETCH(double, level);
    const double hz = 1000.0 * std::pow(10.0, step / 10.0);
    // The table is printed to a tenth of a decibel.
    QCOMPARE_LE(std::abs(levelDb(Weighting::A, hz) - level), 0.0501);
}

void TestWeighting::itu468Curve_agreesWithRecommendation_data()
{
    QTest::addColumn<double>("hz");
    QTest::addColumn<double>("level");
    constexpr std::array<std::pair<double, double>, 21> kPublished{
        {{31.5, -29.9},  {63, -23.9},    {100, -19.8},  {200, -13.8}, {400, -7.8},  {800, -1.9},
         {1000, 0.0},    {2000, 5.6},    {3150, 9.0},   {4000, 10.5}, {5000, 11.7}, {6300, 12.2},
         {7100, 12.0},   {8000, 11.4},   {9000, 10.1},  {10000, 8.1}, {12500, 0.0}, {14000, -5.3},
         {16000, -11.7}, {20000, -22.2}, {31500, -42.7}}};
    for (const auto& [hz, level] : kPublished) {
        QTest::addRow("Rec. ITU-R BS.468-4, Annex 1, Table 1, %.1f Hz", hz) << hz << level;
    }
}

void TestWeighting::itu468Curve_agreesWithRecommendation()
{
    QFETCH(double, hz);
    QFETCH(double, level);
    // The table is printed to a tenth of a decibel; the network lies 0.0502 dB off it at 100 Hz, nearer elsewhere.
    QCOMPARE_LE(std::abs(levelDb(Weighting::Itu468, hz) - level), 0.0505);
}

void TestWeighting::whiteNoise_readsKnownLevel_data()
{
    QTest::addColumn<bool>("isA");
    QTest::addColumn<double>("lowHz");
    QTest::addColumn<double>("highHz");
    QTest::addColumn<double>("level");
    // Integrals of the squared curves, computed independently.
    QTest::newRow("A, 20 Hz to 20 kHz") << true << 20.0 << 20000.0 << -2.048;
    QTest::newRow("A, 22.4 Hz to 22.4 kHz") << true << 22.4 << 22400.0 << -2.459;
    QTest::newRow("468, 20 Hz to 20 kHz") << false << 20.0 << 20000.0 << 7.301;
    QTest::newRow("468, 22.4 Hz to 22.4 kHz") << false << 22.4 << 22400.0 << 6.810;
}

void TestWeighting::whiteNoise_readsKnownLevel()
{
    QFETCH(bool, isA);
    QFETCH(double, lowHz);
    QFETCH(double, highHz);
    QFETCH(double, level);
    constexpr int kSteps = 100000;
    double sum = 0.0;
    for (int step = 0; step < kSteps; ++step) {
        const double hz = lowHz + (highHz - lowHz) * (step + 0.5) / kSteps;
        const double factor = core::weightingFactor(isA ? Weighting::A : Weighting::Itu468, hz);
        sum += factor * factor;
    }
    QCOMPARE_LE(std::abs(10.0 * std::log10(sum / kSteps) - level), 0.001); // as printed
}

void TestWeighting::none_isFlat()
{
    for (const double hz : {0.0, 20.0, 1000.0, 96000.0}) {
        QCOMPARE(core::weightingFactor(Weighting::None, hz), 1.0);
    }
    QCOMPARE(core::weightingFactor(Weighting::A, 0.0), 0.0);
    QCOMPARE(core::weightingFactor(Weighting::Itu468, 0.0), 0.0);
}

QTEST_APPLESS_MAIN(TestWeighting)
#include "tst_weighting.moc"
