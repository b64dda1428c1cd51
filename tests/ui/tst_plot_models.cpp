// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/bars_model.h"
#include "ui/cycle_model.h"
#include "ui/level_meter.h"
#include "ui/pace.h"
#include "ui/range_choice.h"
#include "ui/reading_choice.h"
#include "ui/spectrum_model.h"
#include "ui/trend_model.h"

#include <QSignalSpy>
#include <QTest>

#include <cmath>
#include <limits>

#include "tests/support/fake_frames.h"

namespace sinewright::ui {

using namespace Qt::StringLiterals;

namespace {

constexpr double kNan = std::numeric_limits<double>::quiet_NaN();

/// A flat floor with single bins raised above it.
std::shared_ptr<core::Frame> frameWithLines(const std::vector<std::pair<std::size_t, float>>& lines)
{
    constexpr std::size_t kBins = 24001;
    auto view = std::make_shared<core::SpectrumView>();
    view->binHz = 2.0;
    view->levelDbfs.assign(kBins, -150.0F);
    for (const auto& [bin, level] : lines) {
        view->levelDbfs[bin] = level;
    }
    auto frame = std::make_shared<core::Frame>();
    frame->rate = core::SampleRate{96000.0};
    frame->spectrum = view;
    frame->quick.status = core::ReadingStatus::NoTone;
    return frame;
}

bool holds(const std::vector<QPointF>& points, double x, double y)
{
    return std::any_of(points.begin(), points.end(), [&](const QPointF& p) {
        return std::abs(p.x() - x) < 1e-9 && std::abs(p.y() - y) < 1e-4; // floats of the spectrum
    });
}

} // namespace

class TestPlotModels final : public QObject
{
    Q_OBJECT
private slots:
    void init() { QTest::failOnWarning(QRegularExpression(u".*"_s)); }

    void steps_followOneTwoFive_data()
    {
        QTest::addColumn<double>("value");
        QTest::addColumn<double>("below");
        QTest::addColumn<double>("above");
        QTest::newRow("between") << 0.13 << 0.1 << 0.2;
        QTest::newRow("a step itself") << 0.2 << 0.2 << 0.2;
        QTest::newRow("a decade itself") << 0.001 << 0.001 << 0.001;
        QTest::newRow("nine") << 9.0 << 5.0 << 10.0;
        QTest::newRow("large") << 3.1e7 << 2e7 << 5e7;
    }
    void steps_followOneTwoFive()
    {
        QFETCH(const double, value);
        QFETCH(const double, below);
        QFETCH(const double, above);
        QCOMPARE(stepBelow(value), below);
        QCOMPARE(stepAbove(value), above);
    }

    void logRange_holdsTheDataAndADecadeAtLeast()
    {
        for (const auto& [low, high] : {std::pair(0.1, 0.12),
                                        std::pair(0.1, 5.0),
                                        std::pair(3e-5, 30.0),
                                        std::pair(1.0, 1.0)}) {
            const AxisRange range = logRange(low, high, {});
            QVERIFY(range.low < low && range.high > high);
            QCOMPARE_GE(range.high / range.low, 10.0 * (1.0 - 1e-9));
        }
    }

    void ranges_keepStillUntilTheyMustMove()
    {
        const AxisRange first = logRange(0.1, 3.0, {});
        QCOMPARE(logRange(0.09, 2.5, first), first);
        QVERIFY(logRange(0.1, 60.0, first) != first);
        const AxisRange level = linearRange(-6.0, -4.0, 2.0, {});
        QCOMPARE(linearRange(-5.5, -4.5, 2.0, level), level);
        QVERIFY(linearRange(-30.0, -4.0, 2.0, level).low <= -30.0);
        const double end = symmetricEnd(0.3, 0.0);
        QCOMPARE(end, 0.5);
        QCOMPARE(symmetricEnd(0.25, end), end);
        QCOMPARE(symmetricEnd(0.01, end), 0.02);
        QCOMPARE(symmetricEnd(1.0, 5.0), 2.0); // one step too wide is already hard to read
    }

    void columns_keepExtremesAndHoles()
    {
        const std::vector<QPointF> points{
            {0.1, 5.0}, {0.2, 9.0}, {0.3, 1.0}, {0.9, 4.0}, {1.5, kNan}, {2.2, 3.0}, {2.3, 3.5}};
        const std::vector<QPointF> reduced = reduceToColumns(points, 1.0);
        QCOMPARE(reduced.size(), std::size_t{5});
        QCOMPARE(reduced[0], QPointF(0.2, 9.0));
        QCOMPARE(reduced[1], QPointF(0.3, 1.0));
        QVERIFY(std::isnan(reduced[2].y()));
        QCOMPARE(reduced[3], QPointF(2.2, 3.0));
        QCOMPARE(reduced[4], QPointF(2.3, 3.5));
    }

    void dashes_partAFlatLineAndLeaveAStepWhole()
    {
        std::vector<QPointF> points;
        for (int i = 0; i < 20; ++i) {
            points.emplace_back(i + 0.5, i < 12 ? 1.0 : 5.0);
        }
        const std::vector<QPointF> line = dashed(points, 1.0, 4, 3, 0.5);
        const auto isIn = [&line](const QPointF& point) {
            return std::find(line.begin(), line.end(), point) != line.end();
        };
        QVERIFY(isIn(points[3]));
        QVERIFY(!isIn(points[5])); // columns 4 to 6 are a gap
        QVERIFY(isIn(points[11])); // 11 to 13 would be one, but the line steps from here
        QVERIFY(isIn(points[12]));
        QVERIFY(!isIn(points[13]));
        QVERIFY(isIn(points[14]));
    }

    void trendWithoutAFigure_isEmpty()
    {
        tests::FakeBench bench;
        TrendModel model;
        model.setColumns(400);
        model.setFrame(bench.nextWithoutTone());
        QVERIFY(model.isEmpty());
        model.setFrame(bench.next(2.5));
        QVERIFY(!model.isEmpty());
        QCOMPARE(model.spanS(), TrendModel::kShortSpanS);
        model.setFrame(bench.trimFor(70.0));
        QCOMPARE(model.spanS(), core::Trend::kSpanS);
    }

    void spectrum_keepsEveryLineHoweverManyBinsAColumnHas()
    {
        // Single bins at either end of the axis and in the crowded top octave, over 300 columns for 24000 bins.
        const std::vector<std::pair<std::size_t, float>> lines{
            {25, -60.0F}, {9000, -70.0F}, {9003, -75.0F}, {20011, -80.0F}};
        SpectrumModel model;
        model.setColumns(300);
        model.setFrame(frameWithLines(lines));
        QVERIFY(holds(model.highest(), 50.0, -60.0));
        QVERIFY(holds(model.highest(), 18000.0, -70.0));
        QVERIFY(holds(model.highest(), 40022.0, -80.0));
        QCOMPARE_LE(model.highest().size(), std::size_t{300});
        QCOMPARE(model.lowest().size(), model.highest().size());
        for (std::size_t i = 0; i < model.highest().size(); ++i) {
            QVERIFY(model.lowest()[i].y() <= model.highest()[i].y());
            QCOMPARE_GE(model.highest()[i].x(), 20.0); // no DC on a log axis
        }
    }

    void spectrum_withoutToneFallsBackToDbfs()
    {
        SpectrumModel model;
        model.setColumns(200);
        model.setFrame(frameWithLines({}));
        QCOMPARE(model.unit(), LevelUnit::Dbc);
        QCOMPARE(model.shownUnit(), LevelUnit::Dbfs);
        QVERIFY(model.stems().empty());
    }

    void spectrum_stemsStandAtHarmonicsInTheShownUnit()
    {
        tests::FakeBench bench;
        const auto frame = bench.next(2.5);
        SpectrumModel model;
        model.setColumns(400);
        model.setFrame(frame);
        QCOMPARE(model.shownUnit(), LevelUnit::Dbc);
        QCOMPARE(model.stems().size(), frame->quick.harmonics.size() + 1);
        QCOMPARE(model.stems().front().levelDb, 0.0);
        QCOMPARE(model.stems()[2].levelDb, 20.0 * std::log10(frame->quick.harmonics[1].ratio));
        model.setUnit(LevelUnit::Dbfs);
        QCOMPARE(model.stems().front().levelDb, *frame->quick.levelDbfs);
        // The fundamental's line itself moves along with the unit.
        const auto highest =
            std::max_element(model.highest().begin(),
                             model.highest().end(),
                             [](const QPointF& a, const QPointF& b) { return a.y() < b.y(); });
        QCOMPARE_LE(std::abs(highest->y() - *frame->quick.levelDbfs),
                    1.5); // half a bin off in the invented line
    }

    void trend_countsBackFromNowAndPartsAtGapsAndHoles()
    {
        auto trend = std::make_shared<core::TrendSnapshot>();
        trend->points = {{100.0, 0.001, 0.0011, -6.0, false},
                         {101.0, 0.001, 0.0011, -6.0, false},
                         {102.0, std::nullopt, std::nullopt, std::nullopt, false},
                         {103.0, 0.002, 0.0021, -5.0, false},
                         {104.0, 0.002, 0.0021, -5.0, true}};
        trend->best = core::BestReading{90.0, 0.0009, 0.001, -6.2, std::nullopt, 1000.0};
        auto frame = std::make_shared<core::Frame>();
        frame->timeS = 105.0;
        frame->trend = trend;
        TrendModel model;
        model.setColumns(1800);
        model.setFrame(frame);
        QCOMPARE(model.thd().size(), std::size_t{6});
        QCOMPARE(model.thd().front(), QPointF(-5.0, 0.1));
        QVERIFY(std::isnan(model.thd()[2].y()));
        QVERIFY(std::isnan(model.thd()[4].y()));
        QCOMPARE(model.level().back(), QPointF(-1.0, -5.0));
        QCOMPARE(model.best()->agoS, 15.0);
        QVERIFY(model.percentRange().low <= 0.09 && model.percentRange().high >= 0.21);
    }

    void bars_haveARowForEveryHarmonic()
    {
        auto frame = std::make_shared<core::Frame>();
        frame->quick.status = core::ReadingStatus::Ok;
        frame->quick.harmonics = {{2, 2000.0, 0.001, 0.0, true},
                                  {3, 3000.0, 0.0, 0.0, true},
                                  {4, 24000.0, 1e-8, 0.0, false}};
        BarsModel model;
        model.setFrame(frame);
        QCOMPARE(model.bars().size(), std::size_t{3});
        QCOMPARE(*model.bars()[0].dbc, -60.0);
        QVERIFY(!model.bars()[1].dbc);
        QVERIFY(!model.bars()[2].inBand);
        QCOMPARE_LE(model.range().low, -160.0);
    }

    void cycle_closesAtAFullTurn()
    {
        tests::FakeBench bench;
        CycleModel model;
        const QSignalSpy spy(&model, &CycleModel::changed);
        const auto frame = bench.next(2.5);
        model.setFrame(frame);
        model.setFrame(frame);
        QCOMPARE(spy.count(), 1); // the same view is no change
        QCOMPARE(model.residual().size(), std::size_t{core::CycleView::kPoints + 1});
        QCOMPARE(model.residual().front().y(), model.residual().back().y());
        QCOMPARE(model.residual().back().x(), 360.0);
    }

    void meter_holdsPeaksAndOverloads()
    {
        MeterModel meter;
        meter.feed(0.5, 0.5 / std::sqrt(2.0), false, 0);
        // A sine of half full scale: -6.02 dBFS by peak and, after AES17, by rms too.
        QCOMPARE_LE(std::abs(*meter.peakDbfs() + 6.0206), 1e-4);
        QCOMPARE_LE(std::abs(*meter.rmsDbfs() + 6.0206), 1e-4);
        meter.feed(0.1, 0.05, true, 500);
        QCOMPARE_LE(std::abs(*meter.peakDbfs() + 6.0206), 1e-4);
        QVERIFY(meter.isOver());
        meter.feed(0.1, 0.05, false, 1600);
        QCOMPARE_LE(std::abs(*meter.peakDbfs() + 20.0), 1e-9);
        QVERIFY(meter.isOver());
        meter.feed(0.0, 0.0, false, 4000);
        QVERIFY(!meter.isOver());
        QVERIFY(!meter.peakDbfs()); // silence is no figure
    }

    void shownReading_isFullOnlyWhileSteady()
    {
        core::Frame frame;
        frame.quick.status = core::ReadingStatus::Ok;
        QVERIFY(!shownReading(frame).isFull);
        frame.full = core::Reading();
        frame.full->status = core::ReadingStatus::Ok;
        QVERIFY(shownReading(frame).isFull);
        frame.full->warnings = {core::Warning::UnsteadyLevel};
        QVERIFY(!shownReading(frame).isFull);
        frame.full->warnings.clear();
        frame.quick.status = core::ReadingStatus::NoTone;
        QVERIFY(!shownReading(frame).isFull);
    }

    void pace_halvesWhenDrawingIsCostly()
    {
        Pace pace;
        for (int i = 0; i < 4; ++i) {
            QVERIFY(pace.isDue(2.0));
        }
        int drawn = 0;
        for (int i = 0; i < 10; ++i) {
            drawn += pace.isDue(Pace::kCostlyMs + 1.0) ? 1 : 0;
        }
        QCOMPARE(drawn, 5);
    }
};

} // namespace sinewright::ui

QTEST_GUILESS_MAIN(sinewright::ui::TestPlotModels)
#include "tst_plot_models.moc"
