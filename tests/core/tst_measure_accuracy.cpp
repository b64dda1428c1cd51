// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/measure/measure.h"

#include <QTest>

#include <array>
#include <cmath>

#include "tests/support/reader.h"
#include "tests/support/signals.h"

using namespace sinewright;
using core::Reading;

/// How good a reading has to be: a steady tone in double precision, 4 s at 48 kHz unless said otherwise.
class TestMeasureAccuracy : public QObject
{
    Q_OBJECT

private slots:
    void pureTone_readsNoDistortion_data();
    void pureTone_readsNoDistortion();
    void shortPureTone_readsNoDistortion_data();
    void shortPureTone_readsNoDistortion();
    void harmonic_levelAndPhase_data();
    void harmonic_levelAndPhase();
    void frequency_reachesCramerRao_data();
    void frequency_reachesCramerRao();
    void noise_agreesWithWhatIsThere_data();
    void noise_agreesWithWhatIsThere();
    void weightedNoise_agreesWithIntegral_data();
    void weightedNoise_agreesWithIntegral();
    void movingTone_isNotDistorted_data();
    void movingTone_isNotDistorted();
    void twentyFourBitTake_harmonicsAndFrequency();
    void quickReading_agreesWithFull_data();
    void quickReading_agreesWithFull();

private:
    tests::Reader read;
};

namespace {

constexpr double kRateHz = 48000.0;
constexpr std::size_t kCount = 192000;

} // namespace

void TestMeasureAccuracy::pureTone_readsNoDistortion_data()
{
    QTest::addColumn<double>("rateHz");
    QTest::addColumn<double>("frequencyHz");
    for (const double rate : {44100.0, 48000.0, 88200.0, 96000.0, 192000.0}) {
        for (const double frequency : {15.0,
                                       20.0,
                                       50.3,
                                       439.99,
                                       997.0,
                                       1000.0,
                                       6543.21,
                                       0.1234 * rate,
                                       0.2499 * rate,
                                       0.333 * rate,
                                       0.45 * rate}) {
            QTest::addRow("floor -170 dB: %.0f Hz, tone %.2f Hz", rate, frequency)
                << rate << frequency;
        }
    }
}

void TestMeasureAccuracy::pureTone_readsNoDistortion()
{
    QFETCH(double, rateHz);
    QFETCH(double, frequencyHz);
    core::MeasureSettings wide;
    wide.band.highHz = rateHz / 2.0;
    wide.band.lowHz = 10.0;
    const tests::ToneSpec spec{.rateHz = rateHz, .frequencyHz = frequencyHz, .amplitude = 0.7};
    const Reading reading =
        read(tests::tone(spec, static_cast<std::size_t>(4.0 * rateHz)), rateHz, wide);
    QCOMPARE(reading.status, core::ReadingStatus::Ok);
    QCOMPARE_LE(std::abs(*reading.frequencyHz / frequencyHz - 1.0), 1e-12);
    QCOMPARE_LE(std::abs(*reading.levelDbfs - 20.0 * std::log10(0.7)), 0.0005);
    QCOMPARE(reading.thdRatio.has_value(), frequencyHz < rateHz / 4.0);
    if (reading.thdRatio) {
        QCOMPARE_LE(core::decibelsFromRatio(*reading.thdRatio), -170.0);
    }
    QCOMPARE_LE(core::decibelsFromRatio(*reading.thdnRatio), -170.0);
    QVERIFY(!reading.mainsHumDbc);
}

void TestMeasureAccuracy::shortPureTone_readsNoDistortion_data()
{
    QTest::addColumn<int>("count");
    QTest::addColumn<double>("periods");
    for (const int count : {64, 65, 100, 1000, 4800, 9601}) {
        for (const double periods : {4.0, 4.37, 5.5, 8.0, 12.7, 17.9, 18.1, 29.3}) {
            if (periods < 0.45 * count) {
                QTest::addRow("few samples: %d with %.2f periods", count, periods)
                    << count << periods;
            }
        }
    }
}

void TestMeasureAccuracy::shortPureTone_readsNoDistortion()
{
    QFETCH(int, count);
    QFETCH(double, periods);
    const double frequencyHz = kRateHz * periods / count;
    const tests::ToneSpec spec{.frequencyHz = frequencyHz, .amplitude = 0.7, .dc = 0.05};
    const Reading reading = read(tests::tone(spec, static_cast<std::size_t>(count)));
    QCOMPARE(reading.status, core::ReadingStatus::Ok);
    QCOMPARE_LE(std::abs(*reading.frequencyHz / frequencyHz - 1.0), 1e-9);
    QCOMPARE_LE(std::abs(*reading.levelDbfs - 20.0 * std::log10(0.7)), 0.0005);
    QCOMPARE_LE(std::abs(*reading.dcFs - 0.05), 1e-9);
    if (reading.thdRatio) {
        QCOMPARE_LE(core::decibelsFromRatio(*reading.thdRatio), -170.0);
    }
}

void TestMeasureAccuracy::harmonic_levelAndPhase_data()
{
    QTest::addColumn<int>("order");
    QTest::addColumn<double>("dbc");
    QTest::addColumn<double>("toleranceDb");
    QTest::addColumn<double>("toleranceDeg");
    for (const int order : {2, 3, 7, 10}) {
        QTest::addRow("alone at -60 dBc, order %d", order) << order << -60.0 << 0.001 << 0.1;
        QTest::addRow("alone at -100 dBc, order %d", order) << order << -100.0 << 0.01 << 0.1;
        QTest::addRow("alone at -140 dBc, order %d", order) << order << -140.0 << 0.1 << 1.0;
    }
}

void TestMeasureAccuracy::harmonic_levelAndPhase()
{
    QFETCH(int, order);
    QFETCH(double, dbc);
    QFETCH(double, toleranceDb);
    QFETCH(double, toleranceDeg);
    constexpr double kDegrees = 180.0 / std::numbers::pi;
    for (const double frequency : {50.3, 997.0, 1333.33, 2000.0, 2345.678}) {
        for (const double phaseDeg : {-135.0, 0.0, 60.0, 180.0}) {
            const tests::ToneSpec spec{
                .frequencyHz = frequency,
                .partials = {{order, core::ratioFromDecibels(dbc), phaseDeg / kDegrees}}};
            const Reading reading = read(tests::tone(spec, kCount));
            const auto& harmonic = reading.harmonics.at(static_cast<std::size_t>(order - 2));
            QCOMPARE_LE(std::abs(core::decibelsFromRatio(harmonic.ratio) - dbc), toleranceDb);
            QCOMPARE_LE(std::abs(std::remainder(harmonic.phaseDeg - phaseDeg, 360.0)),
                        toleranceDeg);
            QVERIFY(harmonic.phaseDeg > -180.0 && harmonic.phaseDeg <= 180.0);
            QCOMPARE_LE(std::abs(harmonic.frequencyHz - order * frequency), 1e-6);
        }
    }
}

void TestMeasureAccuracy::frequency_reachesCramerRao_data()
{
    QTest::addColumn<double>("snrDb");
    QTest::addColumn<int>("count");
    for (const double snr : {20.0, 40.0, 60.0, 80.0, 100.0}) {
        QTest::addRow("Rife and Boorstyn 1974 (from memory): SNR %.0f dB, 4800 samples", snr)
            << snr << 4800;
    }
    QTest::newRow("Rife and Boorstyn 1974 (from memory): SNR 60 dB, 19200 samples")
        << 60.0 << 19200;
    QTest::newRow("Rife and Boorstyn 1974 (from memory): SNR 40 dB, 480 samples") << 40.0 << 480;
}

void TestMeasureAccuracy::frequency_reachesCramerRao()
{
    QFETCH(double, snrDb);
    QFETCH(int, count);
    constexpr int kRuns = 400;
    const auto n = static_cast<double>(count);
    const double ratio = core::ratioFromDecibels(snrDb); // rms over rms
    // var(w) >= 12 / (eta N (N^2 - 1)), eta = A^2 / (2 s^2).
    const double bound =
        std::sqrt(12.0 / (ratio * ratio * n * (n * n - 1.0))) * kRateHz / (2.0 * std::numbers::pi);
    double squares = 0.0;
    double stated = 0.0;
    for (int run = 0; run < kRuns; ++run) {
        const double frequency = 1000.0 + 7.77 * run;
        const tests::ToneSpec spec{.frequencyHz = frequency, .phaseRad = 0.1 * run};
        const auto noise = tests::whiteNoise(spec.amplitude / std::numbers::sqrt2 / ratio,
                                             static_cast<std::size_t>(count),
                                             static_cast<std::uint64_t>(1000 + run));
        const Reading reading =
            read(tests::sum(tests::tone(spec, static_cast<std::size_t>(count)), noise));
        QCOMPARE(reading.status, core::ReadingStatus::Ok);
        const double error = *reading.frequencyHz - frequency;
        squares += error * error;
        stated += *reading.frequencyStdHz;
    }
    const double rms = std::sqrt(squares / kRuns);
    qInfo("rms error %.3f of the bound, stated sigma %.3f", rms / bound, stated / kRuns / bound);
    // 400 runs scatter by 3.5 %: the bar of 1.1 stands two of these above the bound.
    QCOMPARE_LE(rms / bound, 1.1);
    QCOMPARE_GE(rms / bound, 0.88);
    QCOMPARE_LE(std::abs(stated / kRuns / rms - 1.0), 0.2);
}

void TestMeasureAccuracy::noise_agreesWithWhatIsThere_data()
{
    QTest::addColumn<double>("snrDb");
    for (const double snr : {0.0, 20.0, 40.0, 60.0, 80.0, 100.0, 120.0}) {
        QTest::addRow("realised noise in band, SNR %.0f dB", snr) << snr;
    }
}

void TestMeasureAccuracy::noise_agreesWithWhatIsThere()
{
    QFETCH(double, snrDb);
    core::MeasureSettings settings;
    settings.band = {0.0, kRateHz / 2.0}; // so that the samples' own power is the truth
    for (std::uint64_t seed = 1; seed <= 5; ++seed) {
        const tests::ToneSpec spec{.frequencyHz = 997.0 + 100.1 * static_cast<double>(seed),
                                   .amplitude = 0.2,
                                   .partials = {{2, 1e-4, 0.0}, {3, 1e-5, 1.0}}};
        const auto noise = tests::whiteNoise(
            0.2 / std::numbers::sqrt2 / core::ratioFromDecibels(snrDb), kCount, seed);
        const Reading reading =
            read(tests::sum(tests::tone(spec, kCount), noise), kRateHz, settings);
        const double signal = 0.2 / std::numbers::sqrt2;
        const double realised = tests::rmsOf(noise);
        QCOMPARE_LE(std::abs(*reading.snrDb - core::decibelsFromRatio(signal / realised)), 0.05);
        const double rest2 = realised * realised + signal * signal * (1e-8 + 1e-10);
        const double thdn = std::sqrt(rest2 / (rest2 + signal * signal));
        QCOMPARE_LE(std::abs(core::decibelsFromRatio(*reading.thdnRatio / thdn)), 0.05);
        QCOMPARE_LE(std::abs(*reading.sinadDb + core::decibelsFromRatio(*reading.thdnRatio)), 1e-9);
    }
}

void TestMeasureAccuracy::weightedNoise_agreesWithIntegral_data()
{
    QTest::addColumn<bool>("isA");
    QTest::addColumn<double>("changeDb");
    QTest::newRow("IEC 61672-1: white noise through A, 20 Hz to 20 kHz") << true << -2.048;
    QTest::newRow("BS.468-4: white noise through 468, 20 Hz to 20 kHz") << false << 7.301;
}

void TestMeasureAccuracy::weightedNoise_agreesWithIntegral()
{
    QFETCH(bool, isA);
    QFETCH(double, changeDb);
    const auto samples = tests::sum(tests::tone({.frequencyHz = 1000.0}, kCount),
                                    tests::whiteNoise(1e-4, kCount, 3));
    core::MeasureSettings settings;
    const Reading plain = read(samples, kRateHz, settings);
    settings.weighting = isA ? core::Weighting::A : core::Weighting::Itu468;
    const Reading weighted = read(samples, kRateHz, settings);
    // The weighted noise rests on some 20000 bins and more: 0.05 dB is over 3 sigma.
    QCOMPARE_LE(std::abs(*weighted.noiseDbfs - *plain.noiseDbfs - changeDb), 0.05);
    QCOMPARE_LE(
        std::abs(core::decibelsFromRatio(*weighted.thdnRatio / *plain.thdnRatio) - changeDb), 0.05);
    QCOMPARE(*weighted.thdRatio, *plain.thdRatio); // harmonics are not weighted
}

void TestMeasureAccuracy::movingTone_isNotDistorted_data()
{
    QTest::addColumn<double>("settling"); // relative
    QTest::addColumn<double>("timeConstantS");
    QTest::addColumn<double>("driftPerS"); // relative
    QTest::addColumn<double>("frequencyHz");
    for (const double frequency : {50.0, 997.0, 4000.0}) {
        for (const double timeConstant : {0.3, 1.0, 4.0, 1e6}) {
            QTest::addRow("settling by 1 %% with %.1f s, %.0f Hz", timeConstant, frequency)
                << 0.01 << timeConstant << 0.0 << frequency;
        }
        QTest::addRow("drifting by 10 ppm/s, %.0f Hz", frequency)
            << 0.0 << 1.0 << 10e-6 << frequency;
        QTest::addRow("both, %.0f Hz", frequency) << 0.01 << 1.0 << -10e-6 << frequency;
    }
}

void TestMeasureAccuracy::movingTone_isNotDistorted()
{
    QFETCH(double, settling);
    QFETCH(double, timeConstantS);
    QFETCH(double, driftPerS);
    QFETCH(double, frequencyHz);
    std::vector<double> samples(kCount);
    for (std::size_t n = 0; n < kCount; ++n) {
        const double t = static_cast<double>(n) / kRateHz;
        // Even, when the time constant is endless: 1 % over the take.
        const double level = timeConstantS > 1e5 ? 1.0 - settling * t / 4.0
                                                 : 1.0 - settling * std::exp(-t / timeConstantS);
        samples[n] =
            0.5 * level *
            std::sin(2.0 * std::numbers::pi * frequencyHz * t * (1.0 + driftPerS * t / 2.0));
    }
    const Reading reading = read(samples);
    QCOMPARE(reading.status, core::ReadingStatus::Ok);
    QCOMPARE_LE(core::decibelsFromRatio(*reading.thdRatio), -120.0);
}

void TestMeasureAccuracy::twentyFourBitTake_harmonicsAndFrequency()
{
    const tests::ToneSpec spec{.rateHz = 96000.0,
                               .frequencyHz = 1000.0,
                               .partials = {{2, 1e-4, 0.3}, {3, std::pow(10.0, -4.5), 0.0}}};
    const auto samples = tests::quantised(tests::tone(spec, 960000), 24);
    Reading reading;
    QBENCHMARK_ONCE
    {
        reading = core::measure(samples, {96000.0}, {});
    }
    QCOMPARE_LE(std::abs(core::decibelsFromRatio(reading.harmonics[0].ratio) + 80.0), 0.05);
    QCOMPARE_LE(std::abs(core::decibelsFromRatio(reading.harmonics[1].ratio) + 90.0), 0.05);
    QCOMPARE_LE(std::abs(*reading.frequencyHz - 1000.0), 1e-3);
    QVERIFY(reading.warnings.empty());
}

void TestMeasureAccuracy::quickReading_agreesWithFull_data()
{
    QTest::addColumn<double>("frequencyHz");
    QTest::addColumn<double>("lengthS");
    for (const double frequency : {20.0, 55.0, 133.0, 1000.0, 3210.0}) {
        QTest::addRow("8 periods or 0.1 s at %.0f Hz", frequency)
            << frequency << std::max(8.0 / frequency, 0.1);
    }
}

void TestMeasureAccuracy::quickReading_agreesWithFull()
{
    QFETCH(double, frequencyHz);
    QFETCH(double, lengthS);
    // THD 0.01 %, SNR 90 dB in band: the worst case of the promise.
    for (std::uint64_t seed = 1; seed <= 20; ++seed) {
        const tests::ToneSpec spec{.frequencyHz = frequencyHz,
                                   .phaseRad = static_cast<double>(seed),
                                   .partials = {{2, 0.8e-4, 0.5}, {3, 0.6e-4, 2.0}}};
        const double noise = 0.5 / std::numbers::sqrt2 * core::ratioFromDecibels(-90.0);
        const auto samples =
            tests::sum(tests::tone(spec, 96000), tests::whiteNoise(noise, 96000, seed));
        const Reading full = read(samples);
        const auto quickCount = static_cast<std::size_t>(std::ceil(lengthS * kRateHz));
        const std::vector<double> newest(samples.end() - static_cast<std::ptrdiff_t>(quickCount),
                                         samples.end());
        const Reading quick = read(newest);
        QCOMPARE(quick.status, core::ReadingStatus::Ok);
        // At 0.1 s the noise that a harmonic's line lets in is 0.9 % of this THD.
        QCOMPARE_LE(std::abs(*quick.thdRatio / *full.thdRatio - 1.0), 0.03);
    }
}

QTEST_APPLESS_MAIN(TestMeasureAccuracy)
#include "tst_measure_accuracy.moc"
