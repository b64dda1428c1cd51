// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/bars_plot.h"
#include "ui/picture.h"

#include <QLabel>
#include <QTest>

#include "tests/support/fake_frames.h"

namespace sinewright::ui {

using namespace Qt::StringLiterals;

namespace {

BenchState demo()
{
    BenchState state;
    state.source.label = u"Demo oscillator"_s;
    state.rateHz = 96000.0;
    return state;
}

const QDateTime kWhen(QDate(2031, 2, 3), QTime(14, 15, 16), Qt::OffsetFromUTC, 3600);

} // namespace

class TestPicture final : public QObject
{
    Q_OBJECT
private slots:
    void init()
    {
        QTest::failOnWarning(QRegularExpression(u"^(?!This plugin).*"_s));
        QLocale::setDefault(QLocale::c());
    }

    void caption_tellsWhenWhatAndHowMeasured()
    {
        tests::FakeBench bench;
        const auto frame = bench.trimFor(30.0);
        core::MeasureSettings settings;
        settings.fullScaleVrms = 4.0;
        const PictureCaption caption = captionFor(u"Trim"_s, frame.get(), demo(), settings, kWhen);
        QCOMPARE(caption.when, u"2031-02-03 14:15:16+01:00"_s);
        QVERIFY(caption.source.contains(u"Demo oscillator"_s));
        QVERIFY(caption.source.contains(u"96\u00A0kHz"_s));
        QVERIFY(caption.settings.contains(u"20000"_s));
        QVERIFY(caption.settings.contains(u"4.000\u00A0V"_s));
        QVERIFY(caption.figures.contains(u"THD "_s));
        QVERIFY(caption.figures.contains(u"1189"_s));
    }

    void captionWithoutAFrame_saysSo()
    {
        QVERIFY(!captionFor(u"Trim"_s, nullptr, demo(), {}, kWhen).figures.isEmpty());
    }

    void picture_isTwiceAsLargeAtScaleTwo()
    {
        tests::FakeBench bench;
        const auto frame = bench.next(2.5);
        BarsPlot plot;
        plot.resize(400, 240);
        plot.setTheme(theme(ThemeName::Paper));
        plot.setFrame(frame);
        const PictureCaption caption = captionFor(u"Harmonics"_s, frame.get(), demo(), {}, kWhen);
        const QImage once = composePicture(&plot, caption, 1);
        const QImage twice = composePicture(&plot, caption, 2);
        QCOMPARE(twice.size(), once.size() * 2);
        QCOMPARE_GT(once.height(), 240 + 40); // the strip is there
        QCOMPARE_GE(once.width(), 400);
        QCOMPARE(once.devicePixelRatio(), 1.0);
        QCOMPARE(plot.bufferDevicePixelRatio(), plot.devicePixelRatio()); // left as it was found
    }

    void plotAtScaleTwo_isDrawnFineNotEnlarged()
    {
        tests::FakeBench bench;
        BarsPlot plot;
        plot.resize(400, 240);
        plot.setTheme(theme(ThemeName::Paper));
        plot.setFrame(bench.next(2.5));
        const QImage twice = composePicture(&plot, {}, 2);
        // Enlarging makes blocks of 2 x 2 equal pixels only; text drawn fine does not.
        int odd = 0;
        for (int y = 0; y + 1 < 2 * 240; y += 2) {
            for (int x = 0; x + 1 < twice.width(); x += 2) {
                odd += twice.pixel(x, y) != twice.pixel(x + 1, y) ||
                               twice.pixel(x, y) != twice.pixel(x, y + 1)
                           ? 1
                           : 0;
            }
        }
        QCOMPARE_GT(odd, 200);
    }

    void strip_hasTheCaptionInIt()
    {
        QLabel subject(u"x"_s);
        subject.resize(500, 60);
        PictureCaption caption;
        caption.title = u"Title"_s;
        caption.figures = u"THD 0.110 %"_s;
        const QImage with = composePicture(&subject, caption, 1);
        const QImage without = composePicture(&subject, {}, 1);
        QCOMPARE_GT(with.height(), without.height());
        int inked = 0;
        for (int y = 60 + 40; y < with.height(); ++y) {
            for (int x = 0; x < with.width(); ++x) {
                inked += with.pixelColor(x, y) != subject.palette().color(QPalette::Window) ? 1 : 0;
            }
        }
        QCOMPARE_GT(inked, 100);
    }
};

} // namespace sinewright::ui

QTEST_MAIN(sinewright::ui::TestPicture)
#include "tst_picture.moc"
