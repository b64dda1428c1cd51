// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/bars_plot.h"
#include "ui/cycle_plot.h"
#include "ui/spectrum_plot.h"
#include "ui/trend_plot.h"

#include <QImage>
#include <QTest>

#include <cmath>

#include "tests/support/fake_frames.h"

namespace sinewright::ui {

using namespace Qt::StringLiterals;

namespace {

const Theme& paper()
{
    return theme(ThemeName::Paper);
}

/// Draws the plot now, at a fixed size, and returns its pixels.
template <typename PlotType>
QImage pictureOf(PlotType& plot)
{
    plot.replot(QCustomPlot::rpImmediateRefresh);
    return plot.grab().toImage().convertToFormat(QImage::Format_RGB32);
}

/// First row from the top of `column`, within the axes, that has the colour; -1 when there is none.
int topRow(const QImage& image, const QRect& inside, int column, const QColor& colour)
{
    for (int y = inside.top(); y <= inside.bottom(); ++y) {
        if (image.pixelColor(column, y) == colour) {
            return y;
        }
    }
    return -1;
}

bool isClose(const QColor& a, const QColor& b)
{
    constexpr int kTolerance = 60; // antialiased edges
    return std::abs(a.red() - b.red()) + std::abs(a.green() - b.green()) +
               std::abs(a.blue() - b.blue()) <
           kTolerance;
}

bool columnHas(const QImage& image, const QRect& inside, int column, const QColor& colour)
{
    for (int y = inside.top(); y <= inside.bottom(); ++y) {
        if (isClose(image.pixelColor(column, y), colour)) {
            return true;
        }
    }
    return false;
}

template <typename PlotType>
void prepare(PlotType& plot, QSize size)
{
    plot.resize(size);
    plot.setTheme(paper());
    plot.show();
}

} // namespace

class TestPlots final : public QObject
{
    Q_OBJECT
private slots:
    void init() { QTest::failOnWarning(QRegularExpression(u"^(?!This plugin).*"_s)); }

    void bar_endsOnTheRowOfItsLevel_data()
    {
        QTest::addColumn<double>("ratio");
        QTest::addColumn<double>("dbc");
        QTest::newRow("-60 dBc") << 1e-3 << -60.0;
        QTest::newRow("-100 dBc") << 1e-5 << -100.0;
        QTest::newRow("-20 dBc") << 0.1 << -20.0;
    }
    void bar_endsOnTheRowOfItsLevel()
    {
        QFETCH(const double, ratio);
        QFETCH(const double, dbc);
        auto frame = std::make_shared<core::Frame>();
        frame->quick.status = core::ReadingStatus::Ok;
        frame->quick.harmonics = {{2, 2000.0, ratio, 0.0, true}, {3, 3000.0, 1e-6, 0.0, true}};
        BarsPlot plot;
        prepare(plot, QSize(400, 320));
        plot.setFrame(frame);
        const QImage image = pictureOf(plot);
        const QRect inside = plot.axisRect()->rect();
        const AxisRange range = plot.model().range();
        // The axis is linear in dB: its low end is the bottom row, its high end the inside's height above that.
        const double expected =
            inside.bottom() - inside.height() * (dbc - range.low) / range.span();
        const int column = static_cast<int>(std::lround(plot.xAxis->coordToPixel(2.0)));
        const int actual = topRow(image, inside, column, paper().slate);
        QVERIFY(actual >= 0);
        QCOMPARE_LE(std::abs(actual - expected), 1.0); // a pixel is what a row can be told to
    }

    void outOfBandBar_isHollow()
    {
        auto frame = std::make_shared<core::Frame>();
        frame->quick.status = core::ReadingStatus::Ok;
        frame->quick.harmonics = {{2, 2000.0, 1e-2, 0.0, true}, {3, 30000.0, 1e-2, 0.0, false}};
        BarsPlot plot;
        prepare(plot, QSize(300, 320));
        plot.setFrame(frame);
        const QImage image = pictureOf(plot);
        const int row =
            static_cast<int>(plot.yAxis->coordToPixel(-90.0)); // between two lines of the grid
        const int solid = static_cast<int>(std::lround(plot.xAxis->coordToPixel(2.0)));
        const int hollow = static_cast<int>(std::lround(plot.xAxis->coordToPixel(3.0)));
        QCOMPARE(image.pixelColor(solid, row), paper().slate);
        QVERIFY(image.pixelColor(hollow, row) != paper().slate);
    }

    void trendLine_isThereWhereReadingsAreAndBrokenWhereNot()
    {
        auto trend = std::make_shared<core::TrendSnapshot>();
        for (int i = 0; i <= 1800; ++i) {
            const double at = 0.1 * i;
            const bool isHole = at > 60.0 && at < 120.0;
            core::TrendPoint point;
            point.timeS = at;
            if (!isHole) {
                point.thdRatio = 0.002;
            }
            trend->points.push_back(point);
        }
        auto frame = std::make_shared<core::Frame>();
        frame->timeS = 180.0;
        frame->trend = trend;
        TrendPlot plot;
        prepare(plot, QSize(700, 300));
        plot.setFrame(frame);
        const QImage image = pictureOf(plot);
        const QRect inside = plot.axisRect()->rect();
        const double expectedRow = plot.yAxis->coordToPixel(0.2);
        for (int column = inside.left() + 2; column < inside.right() - 8; ++column) {
            const double ago = -plot.xAxis->pixelToCoord(column);
            if (ago > 61.0 && ago < 119.0) {
                QVERIFY2(!columnHas(image, inside, column, paper().copper),
                         qPrintable(QString::number(column)));
            } else if (ago < 59.0 || ago > 121.0) {
                QVERIFY2(
                    isClose(image.pixelColor(column, static_cast<int>(std::round(expectedRow))),
                            paper().copper) ||
                        isClose(
                            image.pixelColor(column, static_cast<int>(std::round(expectedRow)) - 1),
                            paper().copper),
                    qPrintable(QString::number(column)));
            }
        }
    }

    void bestSoFar_isARuleAcross()
    {
        tests::FakeBench bench;
        TrendPlot plot;
        prepare(plot, QSize(700, 300));
        plot.setFrame(bench.trimFor(120.0));
        QVERIFY(plot.model().best());
        const QImage image = pictureOf(plot);
        const QRect inside = plot.axisRect()->rect();
        // 60 s of the axis are still without readings: there the rule stands alone; it is dashed, so most, not all.
        int found = 0;
        int looked = 0;
        for (int column = inside.left() + 2; column < plot.xAxis->coordToPixel(-122.0);
             ++column, ++looked) {
            found += columnHas(image, inside, column, paper().verdigris) ? 1 : 0;
        }
        QCOMPARE_GT(looked, 50);
        QCOMPARE_GT(found, looked / 2);
        QCOMPARE_LT(found, looked);
    }

    void stems_standAtTheHarmonicsFrequencies()
    {
        tests::FakeBench bench;
        const auto frame = bench.next(2.6);
        SpectrumPlot plot;
        prepare(plot, QSize(900, 320));
        plot.setFrame(frame);
        const QImage image = pictureOf(plot);
        const QRect inside = plot.axisRect()->rect();
        // Log axis from its low end to half the sample rate.
        const AxisRange range = plot.model().frequencyRange();
        for (const int order : {2, 3}) {
            const double share = std::log(order * *frame->quick.frequencyHz / range.low) /
                                 std::log(range.high / range.low);
            const double column = inside.left() + inside.width() * share;
            const int left = static_cast<int>(std::floor(column)) - 1;
            QVERIFY(columnHas(image, inside, left, paper().slate) ||
                    columnHas(image, inside, left + 1, paper().slate));
            QVERIFY(!columnHas(image, inside, left - 9, paper().slate));
        }
    }

    void residual_peaksWhereTheHarmIsDone()
    {
        auto view = std::make_shared<core::CycleView>();
        view->residual.fill(0.0F);
        view->residual[64] = 0.004F; // a spike at 90 degrees
        auto frame = std::make_shared<core::Frame>();
        frame->cycle = view;
        CyclePlot plot;
        prepare(plot, QSize(400, 300));
        plot.setFrame(frame);
        const QImage image = pictureOf(plot);
        const QRect inside = plot.axisRect()->rect();
        const double column = inside.left() + inside.width() * 0.25;
        const double row = inside.top() + inside.height() * (plot.model().residualEnd() - 0.4) /
                                              (2.0 * plot.model().residualEnd());
        int highest = inside.bottom();
        int at = 0;
        for (int x = inside.left() + 2; x < inside.right() - 2; ++x) {
            for (int y = inside.top(); y < highest; ++y) {
                if (isClose(image.pixelColor(x, y), paper().copper)) {
                    highest = y;
                    at = x;
                }
            }
        }
        QCOMPARE_LE(std::abs(at - column), 1.5);
        QCOMPARE_LE(std::abs(highest - row),
                    2.0); // the tip of a line 1.5 wide is cut by antialiasing
    }

    void hiddenPlot_isNotDrawn()
    {
        tests::FakeBench bench;
        BarsPlot plot;
        prepare(plot, QSize(300, 200));
        plot.setFrame(bench.next(2.5));
        const int before = plot.drawCount();
        QCOMPARE_GT(before, 0);
        plot.hide();
        plot.setFrame(bench.next(2.5));
        QCOMPARE(plot.drawCount(), before);
    }
};

} // namespace sinewright::ui

QTEST_MAIN(sinewright::ui::TestPlots)
#include "tst_plots.moc"
