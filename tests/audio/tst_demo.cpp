// SPDX-License-Identifier: GPL-3.0-or-later
#include "audio/demo.h"
#include "audio/demo_pace.h"
#include "audio/sample_ring.h"
#include "audio/virtual_bench.h"

#include <QRegularExpression>
#include <QTest>

#include <algorithm>
#include <cmath>
#include <memory>
#include <vector>

#include "tests/support/harmonic_fit.h"

using namespace sinewright;
using namespace sinewright::audio;

namespace {

constexpr double kSettleS = 8.0;

/// A second of the settled demo, fitted with the harmonics that a reading counts.
tests::HarmonicFit settledDemo(const DemoSettings& settings)
{
    const auto second = static_cast<std::size_t>(settings.rate.hz);
    return tests::fitHarmonics(renderDemo(settings, kSettleS, second), settings.rate.hz, 10);
}

double dbfs(const tests::HarmonicFit& fit)
{
    return 20.0 * std::log10(fit.levelRms * std::numbers::sqrt2);
}

DemoSettings trimmedTo(double ohm)
{
    DemoSettings settings;
    settings.trimmerOhm = ohm;
    return settings;
}

} // namespace

class DemoTest : public QObject
{
    Q_OBJECT

private slots:
    void init() { QTest::failOnWarning(QRegularExpression(QStringLiteral(".*"))); }

    void defaults_areAHealthyOscillator()
    {
        const tests::HarmonicFit fit = settledDemo(DemoSettings{});
        // 2.3155 V into 4 V full scale, by an independent program's table for this trimmer.
        QCOMPARE_LE(std::abs(dbfs(fit) - 20.0 * std::log10(2.3155 / 4.0)), 0.01);
        QCOMPARE_GE(fit.thd(), 0.0005);
        QCOMPARE_LE(fit.thd(), 0.002);
    }

    void trimmerTravel_reachesFromSilenceToHeavyClipping()
    {
        const std::vector<double> dead =
            renderDemo(trimmedTo(kDemoTrimmerLowestOhm), kSettleS, 9600);
        // An offset of a few millivolts and the noise; no swing.
        QCOMPARE_LE(*std::max_element(dead.begin(), dead.end()), 1e-3);
        const tests::HarmonicFit clipped = settledDemo(trimmedTo(kDemoTrimmerHighestOhm));
        QCOMPARE_GE(clipped.thd(), 0.1);
        // In the oscillator, not in the interface: full scale is never touched.
        const std::vector<double> samples =
            renderDemo(trimmedTo(kDemoTrimmerHighestOhm), kSettleS, 9600);
        const auto [lowest, highest] = std::minmax_element(samples.begin(), samples.end());
        QCOMPARE_LE(std::max(-*lowest, *highest), 0.85);
    }

    void smallFullScale_clipsLikeAConverter()
    {
        DemoSettings settings;
        settings.fullScaleVrms = 2.0; // the oscillator gives 2.3
        const std::vector<double> samples = renderDemo(settings, kSettleS, 9600);
        const auto [lowest, highest] = std::minmax_element(samples.begin(), samples.end());
        QCOMPARE(*highest, 1.0);
        QCOMPARE(*lowest, -1.0);
        // A sine of 1.158 times full scale is beyond it for 1 - 2 asin(1 / 1.158) / pi of the time: 34 %.
        const auto atTop = std::count_if(
            samples.begin(), samples.end(), [](double x) { return std::abs(x) == 1.0; });
        const double share = static_cast<double>(atTop) / static_cast<double>(samples.size());
        QCOMPARE_LE(std::abs(share - (1.0 - 2.0 / std::numbers::pi * std::asin(2.0 / 2.3155))),
                    0.01);
    }

    void interfaceNoise_isAsLoudAsSaid()
    {
        DemoSettings settings;
        settings.trimmerOhm = kDemoTrimmerLowestOhm; // no tone
        settings.parts.offsetVolt = 0.0;
        settings.parts.noiseVoltPerRootHz = 1e-12;
        settings.interfaceNoiseDbfs = -90.0;
        const std::vector<double> samples = renderDemo(settings, 2.0, 1U << 16U);
        double sum = 0.0;
        for (const double x : samples) {
            sum += x * x;
        }
        const double rms = std::sqrt(sum / static_cast<double>(samples.size()));
        // 2^16 values give the rms to 0.3 % (one sigma), 0.024 dB.
        QCOMPARE_LE(std::abs(20.0 * std::log10(rms * std::numbers::sqrt2) + 90.0), 0.1);
    }

    void humAtTheOutput_isAsLoudAsSaid()
    {
        DemoSettings settings;
        settings.trimmerOhm = kDemoTrimmerLowestOhm;
        settings.humAtOutputVrms = 0.1;
        settings.parts.humHz = 60.0;
        const tests::HarmonicFit fit =
            tests::fitHarmonics(renderDemo(settings, 2.0, 96'000), 96e3, 2);
        QCOMPARE_LE(std::abs(fit.frequencyHz - 60.0), 1e-3);
        QCOMPARE_LE(std::abs(dbfs(fit) - 20.0 * std::log10(0.1 / 4.0)), 1e-3);
    }

    void warmUpSpeedUp_hurriesTheDrift()
    {
        DemoSettings settings;
        settings.parts.warmUpKelvin = 9.0;
        settings.parts.deadZoneVolt = 0.0; // its pull on the frequency would change with the level
        const double cold = settledDemo(settings).frequencyHz;
        settings.warmUpSpeedUp = 540.0; // a second's time constant: over after eight
        const double warm = settledDemo(settings).frequencyHz;
        // 540 ppm in all, of which the slow one has gone 1.6 %; the amplifier's pull eats 0.5 %.
        QCOMPARE_LE(std::abs((warm / cold - 1.0) * 1e6 - 531.0), 6.0);
    }

    void hand_takesItsTime()
    {
        VirtualBench bench(DemoSettings{}, kDemoTrimmerLowestOhm);
        std::vector<double> block(480); // 5 ms
        int blocks = 0;
        while (bench.trimmerOhm() < kDemoTrimmerHighestOhm && blocks < 1000) {
            bench.render(kDemoTrimmerHighestOhm, block);
            ++blocks;
        }
        QCOMPARE(blocks, 60); // 0.3 s for the whole travel
        bench.render(kDemoTrimmerHighestOhm - 1.0, block);
        QCOMPARE(bench.trimmerOhm(), kDemoTrimmerHighestOhm - 1.0); // a small turn is done at once
    }

    void pace_catchesUpWithALittleAndGivesUpALot()
    {
        DemoPace pace(96e3);
        QCOMPARE_LE(std::abs(pace.dueS(480) - 0.005), 1e-12);
        QCOMPARE(pace.giveUp(0.005), std::uint64_t{0});
        pace.pass(480);
        QCOMPARE(pace.giveUp(0.2), std::uint64_t{0}); // caught up with
        QCOMPARE_LE(std::abs(pace.dueS(480) - 0.010), 1e-12);
        const std::uint64_t lost = pace.giveUp(2.005); // two seconds after the last block
        QCOMPARE_LE(std::abs(static_cast<double>(lost) - 192e3), 1.0);
        QCOMPARE_LE(std::abs(pace.dueS(480) - 2.010), 1e-4); // on time again
        QCOMPARE(pace.giveUp(2.01), std::uint64_t{0});
    }

    // A ring outlives its source: it stands before it.

    void source_pushesWhatRenderDemoMakes()
    {
        DemoSettings settings;
        settings.rate = core::SampleRate{48e3};
        const auto trimmer = std::make_shared<DemoTrimmer>();
        trimmer->ohm = settings.trimmerOhm;
        SampleRing ring(1, 48'000);
        const auto source = makeDemoSource(settings, trimmer);
        const auto format = source->open();
        QVERIFY(format.has_value());
        QCOMPARE(format->channels, 1);
        QCOMPARE(format->rate.hz, 48e3);

        QVERIFY(source->start(ring).has_value());
        QCOMPARE(source->status().condition, SourceCondition::Running);
        QTRY_VERIFY(ring.framesSeen() >= 9600);
        source->stop();
        QCOMPARE(source->status().condition, SourceCondition::Idle);
        const std::uint64_t seen = ring.framesSeen();

        std::vector<float> got;
        std::uint64_t lost = 0;
        while (const auto block = ring.pop()) {
            lost += block->lostBefore;
            got.insert(got.end(), block->interleaved.begin(), block->interleaved.end());
        }
        QCOMPARE(got.size() + lost,
                 seen); // every frame is there or counted, and none came after stop()
        const std::vector<double> expected = renderDemo(settings, 0.0, got.size());
        QVERIFY(std::equal(got.begin(), got.end(), expected.begin(), [](float a, double b) {
            return a == static_cast<float>(b);
        }));
        QVERIFY(source->start(ring).has_value()); // and may go on
        QTRY_VERIFY(ring.framesSeen() > seen);
    }

    void source_keepsToTheClock()
    {
        const auto trimmer = std::make_shared<DemoTrimmer>();
        SampleRing ring(1, 96'000);
        const auto source = makeDemoSource(DemoSettings{}, trimmer);
        QVERIFY(source->open().has_value());
        const auto begin = std::chrono::steady_clock::now();
        QVERIFY(source->start(ring).has_value());
        QTRY_VERIFY(ring.framesSeen() >= 48'000);
        const std::chrono::duration<double> took = std::chrono::steady_clock::now() - begin;
        // Never ahead of time; how far behind is the machine's affair.
        QCOMPARE_GE(took.count(), 0.499);
    }

    void fullRing_countsWhatItDrops()
    {
        const auto trimmer = std::make_shared<DemoTrimmer>();
        SampleRing ring(1, 1000); // two blocks; nobody pops
        const auto source = makeDemoSource(DemoSettings{}, trimmer);
        QVERIFY(source->open().has_value());
        QVERIFY(source->start(ring).has_value());
        QTRY_VERIFY(ring.framesLost() >= 960);
    }

    void movedTrimmer_isHeard()
    {
        const auto trimmer = std::make_shared<DemoTrimmer>();
        SampleRing ring(1, 9600);
        const auto source = makeDemoSource(DemoSettings{}, trimmer);
        QVERIFY(source->open().has_value());
        float peak = 0.0F;
        const auto listen = [&] {
            while (const auto block = ring.pop()) {
                peak = 0.0F;
                for (const float x : block->interleaved) {
                    peak = std::max(peak, std::abs(x));
                }
            }
            return peak;
        };
        QVERIFY(source->start(ring).has_value());
        QTRY_VERIFY(listen() > 0.5F); // 2.3 V of 4
        trimmer->ohm = kDemoTrimmerLowestOhm;
        QTRY_VERIFY(ring.framesSeen() > 0 && listen() < 0.1F); // it dies
    }

    void unknownRate_isRefused_data()
    {
        QTest::addColumn<double>("rateHz");
        QTest::newRow("invented: too low") << 8000.0;
        QTest::newRow("invented: none") << 0.0;
        QTest::newRow("invented: no number") << std::nan("");
        QTest::newRow("invented: too high") << 1e9;
    }

    void unknownRate_isRefused()
    {
        QFETCH(double, rateHz);
        DemoSettings settings;
        settings.rate = core::SampleRate{rateHz};
        const auto opened = makeDemoSource(settings, std::make_shared<DemoTrimmer>())->open();
        QVERIFY(!opened.has_value());
        QCOMPARE(opened.error().code, core::ErrorCode::InvalidArgument);
    }
};

QTEST_GUILESS_MAIN(DemoTest)
#include "tst_demo.moc"
