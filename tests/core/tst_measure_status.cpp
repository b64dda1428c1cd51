// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/measure/measure.h"

#include <QTest>

#include <algorithm>
#include <cmath>
#include <numbers>

#include "tests/support/reader.h"
#include "tests/support/signals.h"

using namespace sinewright;
using core::Reading;
using core::ReadingStatus;
using core::Warning;

/// When there is a reading, when there is none, and what it is warned of.
class TestMeasureStatus : public QObject
{
    Q_OBJECT

private slots:
    void noTone_isSaid_data();
    void noTone_isSaid();
    void noise_isNeverATone_data();
    void noise_isNeverATone();
    void toneInNoise_isStillATone();
    void fewSamplesOrPeriods_areTooShort_data();
    void fewSamplesOrPeriods_areTooShort();
    void statusOtherThanOk_leavesFiguresEmpty();
    void overload_isSeen_data();
    void overload_isSeen();
    void honestTake_isNoOverload_data();
    void honestTake_isNoOverload();
    void warnings_data();
    void warnings();
    void harmonics_beyondTheBandAreNotCounted();
    void settings_areApplied();
    void figures_areNeverNaN_data();
    void figures_areNeverNaN();

private:
    tests::Reader read;
};

using Samples = std::vector<double>;

namespace {

constexpr double kRateHz = 48000.0;
constexpr std::size_t kCount = 192000;
constexpr double kTurn = 2.0 * std::numbers::pi;

bool has(const Reading& reading, Warning warning)
{
    return std::ranges::find(reading.warnings, warning) != reading.warnings.end();
}

/// A vowel-like sound: a pulse train through two resonances, its pitch gliding as in speech.
Samples speechLike()
{
    Samples samples(kCount);
    double turns = 0.0;
    for (std::size_t n = 0; n < kCount; ++n) {
        const double t = static_cast<double>(n) / kRateHz;
        turns +=
            (120.0 + 25.0 * std::sin(kTurn * 1.7 * t) + 15.0 * std::sin(kTurn * 0.6 * t)) / kRateHz;
        const double syllable = std::max(0.0, std::sin(kTurn * 2.3 * t));
        for (int k = 1; k <= 30; ++k) {
            const double hz = 120.0 * k;
            const double gain = 1.0 / (1.0 + std::pow((hz - 600.0) / 150.0, 2.0)) +
                                0.5 / (1.0 + std::pow((hz - 1700.0) / 200.0, 2.0));
            samples[n] += 0.2 * syllable * gain * std::sin(kTurn * k * turns);
        }
    }
    return samples;
}

Samples sweep(double fromHz, double toHz, bool isExponential)
{
    Samples samples(kCount);
    const double length = static_cast<double>(kCount) / kRateHz;
    const double rate = std::log(toHz / fromHz) / length;
    for (std::size_t n = 0; n < kCount; ++n) {
        const double t = static_cast<double>(n) / kRateHz;
        const double turns = isExponential ? fromHz / rate * std::expm1(rate * t)
                                           : fromHz * t + (toHz - fromHz) * t * t / (2.0 * length);
        samples[n] = 0.5 * std::sin(kTurn * turns);
    }
    return samples;
}

Samples twoTones(double otherHz, double otherRatio)
{
    return tests::sum(tests::tone({.frequencyHz = 997.0}, kCount),
                      tests::tone({.frequencyHz = otherHz, .amplitude = 0.5 * otherRatio}, kCount));
}

Samples toneThatStops()
{
    auto samples = tests::tone({.frequencyHz = 997.0}, kCount);
    std::fill(samples.begin() + kCount * 3 / 4, samples.end(), 0.0);
    return tests::sum(std::move(samples), tests::whiteNoise(1e-5, kCount, 5));
}

} // namespace

void TestMeasureStatus::noTone_isSaid_data()
{
    QTest::addColumn<Samples>("samples");
    QTest::newRow("digital silence") << Samples(kCount, 0.0);
    QTest::newRow("DC alone") << Samples(kCount, 0.3);
    QTest::newRow("dithered 16-bit silence")
        << tests::quantised(tests::triangularDither(16, kCount, 1), 16);
    QTest::newRow("two tones, the second 5 dB lower") << twoTones(1500.3, 0.56);
    QTest::newRow("two equal tones") << twoTones(3333.3, 1.0);
    QTest::newRow("two tones 40 bins apart") << twoTones(1007.0, 0.9);
    QTest::newRow("linear sweep 20 Hz to 20 kHz") << sweep(20.0, 20000.0, false);
    QTest::newRow("exponential sweep 20 Hz to 20 kHz") << sweep(20.0, 20000.0, true);
    QTest::newRow("slow sweep 1000 Hz to 1100 Hz") << sweep(1000.0, 1100.0, false);
    QTest::newRow("speech-like") << speechLike();
    QTest::newRow("a tone that stops in the last quarter") << toneThatStops();
}

void TestMeasureStatus::noTone_isSaid()
{
    QFETCH(Samples, samples);
    QCOMPARE(read(samples).status, ReadingStatus::NoTone);
}

void TestMeasureStatus::noise_isNeverATone_data()
{
    QTest::addColumn<int>("count");
    for (const int count : {64, 500, 4800, 19200, 96000}) {
        QTest::addRow("%d samples", count) << count;
    }
}

void TestMeasureStatus::noise_isNeverATone()
{
    QFETCH(int, count);
    const int runs = count > 20000 ? 20 : 200;
    for (int run = 0; run < runs; ++run) {
        const auto seed = static_cast<std::uint64_t>(run + 1);
        const auto length = static_cast<std::size_t>(count);
        const auto white = read(tests::whiteNoise(0.1, length, seed)).status;
        QVERIFY2(white == ReadingStatus::NoTone, qPrintable(QString::number(run)));
        // Of a short stretch of pink noise the strongest line may well be a slow one: too short to tell.
        const auto pink = read(tests::pinkNoise(0.1, length, seed)).status;
        QVERIFY2(pink == ReadingStatus::NoTone || pink == ReadingStatus::TooShort,
                 qPrintable(QString::number(run)));
    }
}

void TestMeasureStatus::toneInNoise_isStillATone()
{
    // 10 dB below white noise in 20 Hz to 20 kHz.
    for (std::uint64_t seed = 1; seed <= 20; ++seed) {
        const double toneRms = 0.01;
        const double noiseRms =
            toneRms * core::ratioFromDecibels(10.0) * std::sqrt(24000.0 / 19980.0);
        const Reading reading = read(tests::sum(
            tests::tone({.frequencyHz = 1234.5, .amplitude = toneRms * std::numbers::sqrt2},
                        kCount),
            tests::whiteNoise(noiseRms, kCount, seed)));
        QCOMPARE(reading.status, ReadingStatus::Ok);
        QCOMPARE_LE(std::abs(*reading.frequencyHz - 1234.5), 0.01);
        QCOMPARE_LE(std::abs(*reading.snrDb + 10.0),
                    0.3); // the tone's level itself scatters by 0.06 dB
    }
}

void TestMeasureStatus::fewSamplesOrPeriods_areTooShort_data()
{
    QTest::addColumn<Samples>("samples");
    QTest::addColumn<bool>("isTooShort");
    QTest::newRow("no samples") << Samples{} << true;
    QTest::newRow("one sample") << Samples{0.5} << true;
    QTest::newRow("63 samples, 10 periods")
        << tests::tone({.frequencyHz = kRateHz * 10.0 / 63.0}, 63) << true;
    QTest::newRow("64 samples, 10 periods")
        << tests::tone({.frequencyHz = kRateHz * 10.0 / 64.0}, 64) << false;
    QTest::newRow("3.9 periods") << tests::tone({.frequencyHz = 39.0}, 4800) << true;
    QTest::newRow("3.2 periods") << tests::tone({.frequencyHz = 32.0}, 4800) << true;
    QTest::newRow("2 periods") << tests::tone({.frequencyHz = 20.0}, 4800) << true;
    QTest::newRow("4 periods to the sample") << tests::tone({.frequencyHz = 40.0}, 4800) << false;
}

void TestMeasureStatus::fewSamplesOrPeriods_areTooShort()
{
    QFETCH(Samples, samples);
    QFETCH(bool, isTooShort);
    QCOMPARE(read(samples).status, isTooShort ? ReadingStatus::TooShort : ReadingStatus::Ok);
}

void TestMeasureStatus::statusOtherThanOk_leavesFiguresEmpty()
{
    for (const auto& samples :
         {Samples(kCount, 0.0), tests::tone({.frequencyHz = 20.0}, 4800), twoTones(1500.3, 0.8)}) {
        const Reading reading = read(samples);
        QVERIFY(reading.status == ReadingStatus::NoTone ||
                reading.status == ReadingStatus::TooShort);
        QVERIFY(reading.dcFs && reading.peakFs);
        QVERIFY(!reading.frequencyHz && !reading.frequencyStdHz && !reading.levelDbfs &&
                !reading.levelVrms);
        QVERIFY(!reading.thdRatio && !reading.thdRRatio && !reading.thdnRatio && !reading.sinadDb);
        QVERIFY(!reading.snrDb && !reading.noiseDbfs && !reading.mainsHumDbc &&
                reading.harmonics.empty());
    }
}

void TestMeasureStatus::overload_isSeen_data()
{
    QTest::addColumn<Samples>("samples");
    const auto clipped = [](double amplitude, double level) {
        return tests::shaped({.frequencyHz = 997.0, .amplitude = 1.0}, kCount, [=](double x) {
            return std::clamp(amplitude * x, -level, level);
        });
    };
    QTest::newRow("16-bit converter, 0.1 dB over") << tests::quantised(clipped(1.0116, 2.0), 16);
    QTest::newRow("24-bit converter, 0.1 dB over") << tests::quantised(clipped(1.0116, 2.0), 24);
    QTest::newRow("float capture held at full scale") << clipped(1.05, 1.0);
    QTest::newRow("float capture held at minus full scale alone")
        << tests::shaped({.frequencyHz = 997.0, .amplitude = 1.0}, kCount, [](double x) {
               return std::max(0.8 * x - 0.3, -1.0);
           });
    QTest::newRow("flat top below full scale, double") << clipped(0.6, 0.55);
    QTest::newRow("flat top below full scale, 16 bit") << tests::quantised(clipped(0.6, 0.55), 16);
}

void TestMeasureStatus::overload_isSeen()
{
    QFETCH(Samples, samples);
    const Reading reading = read(samples);
    QCOMPARE(reading.status, ReadingStatus::Overload);
    QVERIFY(has(reading, Warning::InputOverload));
    QVERIFY(reading.thdRatio && reading.frequencyHz &&
            reading.levelDbfs); // given, but not to be trusted
}

void TestMeasureStatus::honestTake_isNoOverload_data()
{
    QTest::addColumn<Samples>("samples");
    QTest::addColumn<double>("rateHz");
    QTest::newRow("slow 16-bit tone, -1 dBFS, 20 Hz at 192 kHz")
        << tests::quantised(
               tests::tone({.rateHz = 192000.0, .frequencyHz = 20.0, .amplitude = 0.891}, 384000),
               16)
        << 192000.0;
    QTest::newRow("slow 16-bit tone, -60 dBFS, 20 Hz at 192 kHz")
        << tests::quantised(
               tests::tone({.rateHz = 192000.0, .frequencyHz = 20.0, .amplitude = 0.001}, 384000),
               16)
        << 192000.0;
    QTest::newRow("quiet 16-bit tone, -80 dBFS")
        << tests::quantised(tests::tone({.amplitude = 1e-4}, kCount), 16) << kRateHz;
    QTest::newRow("16-bit tone at -0.1 dBFS")
        << tests::quantised(tests::tone({.amplitude = 0.98855}, kCount), 16) << kRateHz;
    QTest::newRow("full-scale sine in double")
        << tests::tone({.amplitude = 1.0 - 1e-9}, kCount) << kRateHz;
    QTest::newRow("a quarter of the rate, two equal samples a peak")
        << tests::tone({.frequencyHz = 12000.0, .phaseRad = std::numbers::pi / 4.0}, kCount)
        << kRateHz;
    QTest::newRow("8-bit tone with dither")
        << tests::quantised(tests::sum(tests::tone({.amplitude = 0.8}, kCount),
                                       tests::triangularDither(8, kCount, 4)),
                            8)
        << kRateHz;
}

void TestMeasureStatus::honestTake_isNoOverload()
{
    QFETCH(Samples, samples);
    QFETCH(double, rateHz);
    const Reading reading = read(samples, rateHz);
    QCOMPARE(reading.status, ReadingStatus::Ok);
    QVERIFY(!has(reading, Warning::InputOverload));
}

void TestMeasureStatus::warnings_data()
{
    QTest::addColumn<Samples>("samples");
    QTest::addColumn<QList<int>>("expected");
    const auto moving = [](double levelChange, double frequencyChange, double noise) {
        Samples samples(kCount);
        for (std::size_t n = 0; n < kCount; ++n) {
            const double tau = static_cast<double>(n) / kCount;
            const double turns =
                997.0 * static_cast<double>(n) / kRateHz * (1.0 + frequencyChange * tau / 2.0);
            samples[n] = 0.4 * (1.0 - levelChange * tau) * std::sin(kTurn * turns);
        }
        return tests::sum(std::move(samples), tests::whiteNoise(noise, kCount, 9));
    };
    const int level = static_cast<int>(Warning::UnsteadyLevel);
    const int frequency = static_cast<int>(Warning::UnsteadyFrequency);
    QTest::newRow("steady: none") << moving(0.0, 0.0, 1e-5) << QList<int>{};
    QTest::newRow("steady in much noise: none") << moving(0.0, 0.0, 0.1) << QList<int>{};
    QTest::newRow("level by 0.8 %: none") << moving(0.008, 0.0, 1e-5) << QList<int>{};
    QTest::newRow("level by 1.2 %") << moving(0.012, 0.0, 1e-5) << QList<int>{level};
    QTest::newRow("frequency by 80 ppm: none") << moving(0.0, 80e-6, 1e-5) << QList<int>{};
    QTest::newRow("frequency by 120 ppm") << moving(0.0, 120e-6, 1e-5) << QList<int>{frequency};
    QTest::newRow("both") << moving(0.05, 500e-6, 1e-5) << QList<int>{level, frequency};
    QTest::newRow("DC of 0.9 %: none") << tests::tone({.dc = -0.009}, kCount) << QList<int>{};
    QTest::newRow("DC of 1.1 %") << tests::tone({.dc = -0.011}, kCount)
                                 << QList<int>{static_cast<int>(Warning::DcOffset)};
    QTest::newRow("ten harmonics of 1990 Hz in 20 kHz: none")
        << tests::tone({.frequencyHz = 1990.0}, kCount) << QList<int>{};
    QTest::newRow("the tenth of 2010 Hz beyond 20 kHz")
        << tests::tone({.frequencyHz = 2010.0}, kCount)
        << QList<int>{static_cast<int>(Warning::HarmonicsAboveBand)};
}

void TestMeasureStatus::warnings()
{
    QFETCH(Samples, samples);
    QFETCH(QList<int>, expected);
    const Reading reading = read(samples);
    QCOMPARE(reading.status, ReadingStatus::Ok);
    QList<int> found;
    for (const Warning warning : reading.warnings) {
        found.push_back(static_cast<int>(warning));
    }
    QCOMPARE(found, expected);
}

void TestMeasureStatus::harmonics_beyondTheBandAreNotCounted()
{
    const tests::ToneSpec spec{.frequencyHz = 7000.0, .partials = {{2, 0.01, 0.0}, {3, 0.01, 0.0}}};
    const Reading reading = read(tests::tone(spec, kCount));
    QCOMPARE(reading.harmonics.size(), std::size_t{2}); // the fourth would lie above half the rate
    QVERIFY(reading.harmonics[0].inBand && !reading.harmonics[1].inBand);
    QCOMPARE_LE(std::abs(reading.harmonics[1].ratio - 0.01), 1e-9);
    QCOMPARE_LE(std::abs(*reading.thdRatio - 0.01), 1e-9);

    const Reading none = read(tests::tone({.frequencyHz = 11000.0}, kCount));
    QVERIFY(!none.thdRatio && !none.thdRRatio);
    QVERIFY(none.thdnRatio && none.snrDb);
    QVERIFY(has(none, Warning::HarmonicsAboveBand));
}

void TestMeasureStatus::settings_areApplied()
{
    const tests::ToneSpec spec{.partials = {{2, 0.003, 0.0}, {3, 0.004, 0.0}}};
    const auto samples = tests::tone(spec, kCount);
    core::MeasureSettings settings;
    settings.harmonicCount = 2;
    settings.fullScaleVrms = 4.0;
    const Reading second = read(samples, kRateHz, settings);
    QCOMPARE(second.harmonics.size(), std::size_t{1});
    QCOMPARE_LE(std::abs(*second.thdRatio - 0.003), 1e-9);
    QCOMPARE_LE(std::abs(*second.thdnRatio - 0.005 / std::sqrt(1.0 + 25e-6)),
                1e-9);                                    // the third is in the rest
    QCOMPARE_LE(std::abs(*second.levelVrms - 2.0), 1e-6); // half of full scale, whose rms is 4 V

    settings.band = {1500.0, 2500.0}; // the fundamental lies outside: no total to refer to
    const Reading narrow = read(samples, kRateHz, settings);
    QVERIFY(!narrow.thdnRatio && !narrow.thdRRatio && !narrow.sinadDb);
    QCOMPARE_LE(std::abs(*narrow.thdRatio - 0.003), 1e-9);

    settings.band = {20.0, 1e6}; // limited to half the rate
    QCOMPARE_LE(std::abs(*read(samples, kRateHz, settings).thdRatio - 0.003), 1e-9);
}

void TestMeasureStatus::figures_areNeverNaN_data()
{
    QTest::addColumn<Samples>("samples");
    for (const int count : {1, 2, 63, 64, 65, 127, 1000}) {
        const auto length = static_cast<std::size_t>(count);
        QTest::addRow("constant, %d samples", count) << Samples(length, 1.0);
        QTest::addRow("alternating at half the rate, %d samples", count)
            << tests::tone({.frequencyHz = kRateHz / 2.0, .phaseRad = 1.0}, length);
        QTest::addRow("one pulse, %d samples", count) << [length] {
            Samples pulse(length, 0.0);
            pulse[length / 2] = 1.0;
            return pulse;
        }();
        QTest::addRow("tiny, %d samples", count) << tests::tone({.amplitude = 1e-300}, length);
        QTest::addRow("huge, %d samples", count) << tests::tone({.amplitude = 1e300}, length);
        QTest::addRow("square wave, %d samples", count) << tests::shaped(
            {.frequencyHz = 4000.0}, length, [](double x) { return x < 0.0 ? -1.0 : 1.0; });
        QTest::addRow("ramp, %d samples", count) << [length] {
            Samples ramp(length);
            for (std::size_t n = 0; n < length; ++n) {
                ramp[n] = static_cast<double>(n) / static_cast<double>(length);
            }
            return ramp;
        }();
    }
}

void TestMeasureStatus::figures_areNeverNaN()
{
    QFETCH(Samples, samples);
    const Reading reading = read(samples);
    for (const auto& figure : {reading.frequencyHz,
                               reading.frequencyStdHz,
                               reading.levelDbfs,
                               reading.levelVrms,
                               reading.dcFs,
                               reading.peakFs,
                               reading.thdRatio,
                               reading.thdRRatio,
                               reading.thdnRatio,
                               reading.sinadDb,
                               reading.snrDb,
                               reading.noiseDbfs,
                               reading.mainsHumDbc}) {
        QVERIFY(!figure || std::isfinite(*figure));
    }
    for (const auto& harmonic : reading.harmonics) {
        QVERIFY(std::isfinite(harmonic.ratio) && std::isfinite(harmonic.phaseDeg));
    }
}

QTEST_APPLESS_MAIN(TestMeasureStatus)
#include "tst_measure_status.moc"
