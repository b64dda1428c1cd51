// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/measure/analyser.h"
#include "core/measure/measure.h"

#include <QTest>

#include <algorithm>
#include <cmath>
#include <limits>
#include <numbers>

#include "tests/support/signals.h"

using namespace sinewright;
using core::Frame;
using core::Reading;
using core::ReadingStatus;

using Frames = std::vector<std::shared_ptr<const Frame>>;

class TestAnalyser : public QObject
{
    Q_OBJECT

private slots:
    void readings_comeOftenEnough();
    void blockSize_changesNothing_data();
    void blockSize_changesNothing();
    void fullReading_isMeasureOfTheSameStretch();
    void quickReading_isMeasureOfTheSameStretch();
    void slowTone_getsEightPeriods_data();
    void slowTone_getsEightPeriods();
    void gap_isNeverSpanned_data();
    void gap_isNeverSpanned();
    void badSamples_countAsLost();
    void jumpInNumbers_isAGap();
    void spectrum_showsLevelAndFloor();
    void cycle_showsWhereTheHarmIsDone();
    void meter_showsPeakAndRms();
    void settings_takeEffectFromTheNextReading();
    void best_isHeldAndReset();
    void silence_givesFramesWithoutFigures();
};

namespace {

constexpr double kRateHz = 48000.0;

core::AnalyserConfig config(double rateHz = kRateHz)
{
    core::AnalyserConfig made;
    made.rate = {rateHz};
    return made;
}

void append(Frames& frames, Frames more)
{
    frames.insert(frames.end(), more.begin(), more.end());
}

/// Feeds samples in blocks of one size, numbered from `first`.
Frames feed(core::Analyser& analyser,
            std::span<const double> samples,
            std::size_t blockSize,
            std::uint64_t first = 0)
{
    Frames frames;
    for (std::size_t start = 0; start < samples.size(); start += blockSize) {
        const auto part = samples.subspan(start, std::min(blockSize, samples.size() - start));
        append(frames,
               analyser.feed({.firstFrame = first + start, .lostBefore = 0, .samples = part}));
    }
    return frames;
}

std::vector<double> noisyTone(std::size_t count, double frequencyHz = 997.0)
{
    return tests::sum(
        tests::tone({.frequencyHz = frequencyHz, .partials = {{2, 1e-4, 0.0}}}, count),
        tests::whiteNoise(1e-5, count, 21));
}

bool isSame(const Reading& a, const Reading& b)
{
    const auto sameHarmonic = [](const core::HarmonicReading& x, const core::HarmonicReading& y) {
        return x.order == y.order && x.frequencyHz == y.frequencyHz && x.ratio == y.ratio &&
               x.phaseDeg == y.phaseDeg && x.inBand == y.inBand;
    };
    return a.status == b.status && a.warnings == b.warnings && a.startS == b.startS &&
           a.lengthS == b.lengthS && a.frequencyHz == b.frequencyHz &&
           a.frequencyStdHz == b.frequencyStdHz && a.levelDbfs == b.levelDbfs &&
           a.levelVrms == b.levelVrms && a.dcFs == b.dcFs && a.peakFs == b.peakFs &&
           a.thdRatio == b.thdRatio && a.thdRRatio == b.thdRRatio && a.thdnRatio == b.thdnRatio &&
           a.sinadDb == b.sinadDb && a.snrDb == b.snrDb && a.noiseDbfs == b.noiseDbfs &&
           a.mainsHumDbc == b.mainsHumDbc &&
           std::ranges::equal(a.harmonics, b.harmonics, sameHarmonic);
}

bool isSame(const Frame& a, const Frame& b)
{
    const bool sameFull =
        a.full.has_value() == b.full.has_value() && (!a.full || isSame(*a.full, *b.full));
    const bool sameSpectrum = (a.spectrum == nullptr) == (b.spectrum == nullptr) &&
                              (!a.spectrum || a.spectrum->levelDbfs == b.spectrum->levelDbfs);
    const bool sameCycle =
        (a.cycle == nullptr) == (b.cycle == nullptr) &&
        (!a.cycle || (a.cycle->residual == b.cycle->residual && a.cycle->cycle == b.cycle->cycle));
    return a.serial == b.serial && a.timeS == b.timeS && a.peakFs == b.peakFs &&
           a.rmsFs == b.rmsFs && isSame(a.quick, b.quick) && sameFull &&
           a.isFullNew == b.isFullNew && sameSpectrum && sameCycle &&
           a.framesLost == b.framesLost && a.gaps == b.gaps &&
           a.trend->points.size() == b.trend->points.size();
}

} // namespace

void TestAnalyser::readings_comeOftenEnough()
{
    core::Analyser analyser(config());
    const auto frames = feed(analyser, noisyTone(5 * 48000), 480);
    QCOMPARE_GE(frames.size(), std::size_t{5 * 20 - 2}); // all but those of the first 0.1 s
    int fulls = 0;
    for (std::size_t n = 0; n < frames.size(); ++n) {
        QCOMPARE(frames[n]->serial, n + 1);
        QCOMPARE(frames[n]->quick.status, ReadingStatus::Ok);
        QCOMPARE_LE(std::abs(*frames[n]->quick.frequencyHz - 997.0), 0.01);
        fulls += frames[n]->isFullNew ? 1 : 0;
        QCOMPARE(frames[n]->full.has_value(), frames[n]->timeS > 1.99);
    }
    QCOMPARE(fulls, 7); // at 2 s, 2.5 s .. 5 s
    QCOMPARE_LE(std::abs(frames.back()->timeS - 5.0), 1e-9);
}

void TestAnalyser::blockSize_changesNothing_data()
{
    QTest::addColumn<int>("blockSize");
    for (const int size : {1, 64, 1000, 1024, 2401, 48000, 200000}) {
        QTest::addRow("blocks of %d", size) << size;
    }
}

void TestAnalyser::blockSize_changesNothing()
{
    QFETCH(int, blockSize);
    auto samples = noisyTone(3 * 48000);
    samples[70000] = std::numeric_limits<double>::quiet_NaN();
    core::Analyser reference(config());
    const auto expected = feed(reference, samples, 256);
    core::Analyser analyser(config());
    const auto frames = feed(analyser, samples, static_cast<std::size_t>(blockSize));
    QCOMPARE(frames.size(), expected.size());
    for (std::size_t n = 0; n < frames.size(); ++n) {
        QVERIFY2(isSame(*frames[n], *expected[n]), qPrintable(QString::number(n)));
    }
}

void TestAnalyser::fullReading_isMeasureOfTheSameStretch()
{
    const auto samples = noisyTone(4 * 48000);
    core::Analyser analyser(config());
    int compared = 0;
    for (const auto& frame : feed(analyser, samples, 777)) {
        if (!frame->isFullNew) {
            continue;
        }
        const auto start = static_cast<std::size_t>(std::llround(frame->full->startS * kRateHz));
        const auto length = static_cast<std::size_t>(std::llround(frame->full->lengthS * kRateHz));
        QCOMPARE(length, std::size_t{96000});
        QCOMPARE_LE(std::abs(static_cast<double>(start + length) / kRateHz - frame->timeS), 1e-9);
        Reading offline = core::measure(std::span(samples).subspan(start, length), {kRateHz}, {});
        offline.startS = frame->full->startS;
        QVERIFY(isSame(offline, *frame->full)); // to the last bit
        ++compared;
    }
    QCOMPARE(compared, 5);
}

void TestAnalyser::quickReading_isMeasureOfTheSameStretch()
{
    const auto samples = noisyTone(48000, 130.0);
    core::Analyser analyser(config());
    for (const auto& frame : feed(analyser, samples, 777)) {
        const auto start = static_cast<std::size_t>(std::llround(frame->quick.startS * kRateHz));
        const auto length = static_cast<std::size_t>(std::llround(frame->quick.lengthS * kRateHz));
        Reading offline = core::measure(std::span(samples).subspan(start, length), {kRateHz}, {});
        offline.startS = frame->quick.startS;
        QVERIFY(isSame(offline, frame->quick));
    }
}

void TestAnalyser::slowTone_getsEightPeriods_data()
{
    QTest::addColumn<double>("rateHz");
    QTest::addColumn<double>("frequencyHz");
    for (const double rate : {44100.0, 192000.0}) {
        for (const double frequency : {15.0, 20.0, 33.3, 77.0}) {
            QTest::addRow("%.0f Hz, tone %.1f Hz", rate, frequency) << rate << frequency;
        }
    }
}

void TestAnalyser::slowTone_getsEightPeriods()
{
    QFETCH(double, rateHz);
    QFETCH(double, frequencyHz);
    const tests::ToneSpec spec{
        .rateHz = rateHz, .frequencyHz = frequencyHz, .partials = {{3, 1e-3, 0.5}}};
    const auto count = static_cast<std::size_t>(1.5 * rateHz);
    const auto samples = tests::sum(tests::tone(spec, count), tests::whiteNoise(1e-6, count, 8));
    core::Analyser analyser(config(rateHz));
    int settled = 0;
    for (const auto& frame : feed(analyser, samples, 960)) {
        const double longEnough = 8.0 / frequencyHz + 0.1;
        if (frame->timeS < longEnough) {
            continue;
        }
        QCOMPARE(frame->quick.status, ReadingStatus::Ok);
        QCOMPARE_GE(frame->quick.lengthS * frequencyHz, 8.0 - 1e-6);
        QCOMPARE_LE(frame->quick.lengthS, longEnough);
        QCOMPARE_LE(std::abs(*frame->quick.thdRatio / 1e-3 - 1.0), 0.03);
        ++settled;
    }
    QCOMPARE_GE(settled, 15);
}

void TestAnalyser::gap_isNeverSpanned_data()
{
    QTest::addColumn<int>("lost");
    for (const int lost : {1, 17, 48000}) {
        QTest::addRow("%d samples lost", lost) << lost;
    }
}

void TestAnalyser::gap_isNeverSpanned()
{
    QFETCH(int, lost);
    const auto missing = static_cast<std::uint64_t>(lost);
    const auto samples = noisyTone(8 * 48000);
    core::Analyser analyser(config());
    constexpr std::size_t kGapAt = 3 * 48000 + 1234;
    auto frames = feed(analyser, std::span(samples).first(kGapAt), 1000);
    QCOMPARE(frames.back()->framesLost, std::uint64_t{0});
    QVERIFY(frames.back()->full.has_value());
    const auto rest = std::span(samples).subspan(kGapAt + missing);
    append(frames,
           analyser.feed({.firstFrame = kGapAt + missing, .lostBefore = missing, .samples = rest}));

    const double gapStartS = kGapAt / kRateHz;
    const double gapEndS = static_cast<double>(kGapAt + missing) / kRateHz;
    bool isFirstAfter = true;
    for (const auto& frame : frames) {
        for (const Reading* reading : {&frame->quick, frame->full ? &*frame->full : nullptr}) {
            if (reading != nullptr) {
                QVERIFY(reading->startS + reading->lengthS <= gapStartS + 1e-9 ||
                        reading->startS >= gapEndS - 1e-9);
                QCOMPARE(reading->status, ReadingStatus::Ok);
            }
        }
        if (frame->timeS > gapEndS) {
            QCOMPARE(frame->framesLost, missing);
            QCOMPARE(frame->gaps, std::uint64_t{1});
            QCOMPARE(frame->full.has_value(), frame->timeS - gapEndS > 2.0 - 1e-9);
            QCOMPARE(frame->trend->points.back().afterGap, isFirstAfter);
            isFirstAfter = false;
        }
    }
    QVERIFY(!isFirstAfter);
}

void TestAnalyser::badSamples_countAsLost()
{
    auto samples = noisyTone(2 * 48000);
    samples[48000] = std::numeric_limits<double>::quiet_NaN();
    samples[48001] = std::numeric_limits<double>::infinity();
    samples[48500] = -std::numeric_limits<double>::infinity();
    core::Analyser analyser(config());
    const auto frames = feed(analyser, samples, 100);
    QCOMPARE(frames.back()->framesLost, std::uint64_t{3});
    QCOMPARE(frames.back()->gaps, std::uint64_t{2});
    for (const auto& frame : frames) {
        QCOMPARE(frame->quick.status, ReadingStatus::Ok);
        QVERIFY(std::isfinite(frame->peakFs) && std::isfinite(frame->rmsFs));
        const double endS = frame->quick.startS + frame->quick.lengthS;
        QVERIFY(endS <= 1.0 + 1e-9 || frame->quick.startS >= 48501.0 / kRateHz - 1e-9);
    }
}

void TestAnalyser::jumpInNumbers_isAGap()
{
    const auto samples = noisyTone(48000);
    core::Analyser analyser(config());
    auto frames = feed(analyser, std::span(samples).first(24000), 500, 7000);
    QCOMPARE(frames.back()->gaps, std::uint64_t{0}); // a source may begin at any number
    QCOMPARE_LE(std::abs(frames.back()->timeS - 31000.0 / kRateHz), 1e-9);
    frames = feed(analyser, std::span(samples).last(24000), 500, 31040);
    QCOMPARE(frames.back()->gaps, std::uint64_t{1});
    QCOMPARE(frames.back()->framesLost, std::uint64_t{40});
}

void TestAnalyser::spectrum_showsLevelAndFloor()
{
    core::Analyser analyser(config());
    const double binHz = kRateHz / 16384.0;
    // On a bin, so that the line reads its level.
    const tests::ToneSpec spec{.frequencyHz = 400.0 * binHz, .amplitude = 0.1};
    const auto frames = feed(analyser, tests::tone(spec, 48000), 480);
    QVERIFY(frames.front()->spectrum == nullptr); // 0.1 s do not fill it
    const auto& spectrum = *frames.back()->spectrum;
    QCOMPARE(spectrum.levelDbfs.size(), std::size_t{8193});
    QCOMPARE_LE(std::abs(spectrum.binHz - binHz), 1e-12);
    QCOMPARE_LE(std::abs(static_cast<double>(spectrum.levelDbfs[400]) + 20.0), 1e-4);
    QCOMPARE_LE(static_cast<double>(*std::ranges::max_element(spectrum.levelDbfs.begin() + 410,
                                                              spectrum.levelDbfs.end())),
                -195.0);
    QCOMPARE_GE(*std::ranges::min_element(spectrum.levelDbfs), core::SpectrumView::kFloorDbfs);
}

void TestAnalyser::cycle_showsWhereTheHarmIsDone()
{
    core::Analyser analyser(config());
    // 1 kHz at 48 kHz meets only 48 phases: the cycle must be whole all the same.
    const tests::ToneSpec spec{
        .frequencyHz = 1000.0, .phaseRad = 2.2, .partials = {{2, 1e-3, 0.0}, {3, 5e-4, 1.0}}};
    const auto frames = feed(analyser, tests::tone(spec, 24000), 480);
    const auto& view = *frames.back()->cycle;
    for (std::size_t point = 0; point < view.residual.size(); ++point) {
        const double theta =
            2.0 * std::numbers::pi * static_cast<double>(point) / core::CycleView::kPoints;
        const double residual = 1e-3 * std::sin(2.0 * theta) + 5e-4 * std::sin(3.0 * theta + 1.0);
        QCOMPARE_LE(std::abs(static_cast<double>(view.residual[point]) - residual), 1e-8);
        QCOMPARE_LE(std::abs(static_cast<double>(view.cycle[point]) - std::sin(theta) - residual),
                    1e-6); // float
    }
}

void TestAnalyser::meter_showsPeakAndRms()
{
    core::Analyser analyser(config());
    const auto frames =
        feed(analyser,
             tests::tone({.frequencyHz = 1000.0, .amplitude = 0.5, .phaseRad = 0.0}, 24000),
             480);
    QCOMPARE_LE(std::abs(frames.back()->peakFs - 0.5), 1e-9);
    QCOMPARE_LE(std::abs(frames.back()->rmsFs - 0.5 / std::numbers::sqrt2), 1e-9);
}

void TestAnalyser::settings_takeEffectFromTheNextReading()
{
    core::Analyser analyser(config());
    const auto samples = noisyTone(48000);
    QCOMPARE(feed(analyser, std::span(samples).first(24000), 480).back()->quick.harmonics.size(),
             std::size_t{9});
    core::MeasureSettings settings;
    settings.harmonicCount = 5;
    analyser.setSettings(settings);
    const auto frames = feed(analyser, std::span(samples).last(24000), 480, 24000);
    QCOMPARE(frames.front()->quick.harmonics.size(), std::size_t{4});
    QCOMPARE(frames.front()->gaps, std::uint64_t{0}); // the collected samples stay
}

void TestAnalyser::best_isHeldAndReset()
{
    core::Analyser analyser(config());
    auto frames = feed(analyser, noisyTone(3 * 48000), 480);
    QVERIFY(frames.back()->trend->best.has_value());
    analyser.resetBest();
    frames = feed(analyser, noisyTone(3 * 48000), 480, 3 * 48000);
    QVERIFY(!frames.front()->trend->best);
    QVERIFY(frames.back()->trend->best.has_value());
    QCOMPARE_GE(frames.back()->trend->best->timeS,
                4.0 - 1e-9); // the middle of 2 s that began at 3 s
}

void TestAnalyser::silence_givesFramesWithoutFigures()
{
    core::Analyser analyser(config());
    const auto frames = feed(analyser, std::vector<double>(3 * 48000, 0.0), 480);
    QCOMPARE(frames.size(), std::size_t{59});
    for (const auto& frame : frames) {
        QCOMPARE(frame->quick.status, ReadingStatus::NoTone);
        QVERIFY(frame->cycle == nullptr);
        QVERIFY(frame->trend != nullptr);
    }
    QCOMPARE(frames.back()->full->status, ReadingStatus::NoTone);
    QCOMPARE(*std::ranges::max_element(frames.back()->spectrum->levelDbfs),
             core::SpectrumView::kFloorDbfs);
}

QTEST_APPLESS_MAIN(TestAnalyser)
#include "tst_analyser.moc"
