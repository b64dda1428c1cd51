// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/figure_text.h"

#include <QTest>

#include <limits>

namespace sinewright::ui {

using namespace Qt::StringLiterals;

class TestFigureText final : public QObject
{
    Q_OBJECT
private slots:
    void init()
    {
        QTest::failOnWarning(QRegularExpression(u".*"_s));
        QLocale::setDefault(QLocale::c());
    }

    void percent_keepsSignificantDigits_data()
    {
        QTest::addColumn<double>("ratio");
        QTest::addColumn<int>("digits");
        QTest::addColumn<QString>("text");
        QTest::newRow("trailing zero stays") << 0.0011 << 3 << u"0.110"_s;
        QTest::newRow("two digits of a quick reading") << 0.00114 << 2 << u"0.11"_s;
        QTest::newRow("above one percent") << 0.01234 << 3 << u"1.23"_s;
        QTest::newRow("rounding up to the next decade keeps the digits")
            << 0.009996 << 3 << u"1.00"_s;
        QTest::newRow("hundred") << 1.0 << 3 << u"100"_s;
        QTest::newRow("more than hundred") << 1.234 << 2 << u"123"_s;
        QTest::newRow("very clean") << 3.21e-7 << 3 << u"0.0000321"_s;
        QTest::newRow("zero") << 0.0 << 3 << u"0"_s;
    }
    void percent_keepsSignificantDigits()
    {
        QFETCH(const double, ratio);
        QFETCH(const int, digits);
        QFETCH(const QString, text);
        QCOMPARE(percentFigure(ratio, digits).value, text);
        QCOMPARE(percentFigure(ratio, digits).unit, u"%"_s);
    }

    void absentFigures_areADash()
    {
        QCOMPARE(percentFigure(std::nullopt).value, QString(kAbsent));
        QCOMPARE(decibelFigure(std::nullopt, 1, u"dB"_s).value, QString(kAbsent));
        QCOMPARE(frequencyFigure(std::nullopt, std::nullopt).value, QString(kAbsent));
        QCOMPARE(voltFigure(std::nullopt).value, QString(kAbsent));
        QCOMPARE(ratioDecibelFigure(0.0, 1, u"dB"_s).value, QString(kAbsent));
    }

    void notFinite_isNeverPrinted()
    {
        for (const double bad : {std::numeric_limits<double>::quiet_NaN(),
                                 std::numeric_limits<double>::infinity(),
                                 -std::numeric_limits<double>::infinity()}) {
            QCOMPARE(percentFigure(bad).value, QString(kAbsent));
            QCOMPARE(decibelFigure(bad, 1, u"dB"_s).value, QString(kAbsent));
            QCOMPARE(frequencyFigure(bad, 0.1).value, QString(kAbsent));
            QCOMPARE(voltFigure(bad).value, QString(kAbsent));
        }
    }

    void frequency_isCutWhereItsDeviationReaches_data()
    {
        QTest::addColumn<double>("deviation");
        QTest::addColumn<QString>("text");
        QTest::newRow("half a millihertz") << 5e-4 << u"1189.235"_s;
        QTest::newRow("two millihertz") << 2e-3 << u"1189.235"_s;
        QTest::newRow("fifty millihertz") << 5e-2 << u"1189.23"_s;
        QTest::newRow("half a hertz") << 0.5 << u"1189.2"_s;
        QTest::newRow("seven hertz") << 7.0 << u"1189"_s;
    }
    void frequency_isCutWhereItsDeviationReaches()
    {
        QFETCH(const double, deviation);
        QFETCH(const QString, text);
        QCOMPARE(frequencyFigure(1189.2346, deviation).value, text);
    }

    void frequencySpread_isNeverRoundedToNothing()
    {
        QCOMPARE(joined(frequencySpreadFigure(0.25)), u"250\u00A0mHz"_s);
        QCOMPARE(joined(frequencySpreadFigure(1.23e-3)), u"1.2\u00A0mHz"_s);
        QCOMPARE(joined(frequencySpreadFigure(1.234e-5)), u"12\u00A0\u00B5Hz"_s);
        QCOMPARE(joined(frequencySpreadFigure(1.234e-8)), u"0.012\u00A0\u00B5Hz"_s);
        QCOMPARE(frequencySpreadFigure(0.0).value, QString(kAbsent));
        QCOMPARE(frequencySpreadFigure(std::nullopt).value, QString(kAbsent));
    }

    void decibels_haveATrueMinusAndNoMinusZero()
    {
        QCOMPARE(decibelFigure(-84.04, 1, u"dBc"_s).value, u"\u221284.0"_s);
        QCOMPARE(decibelFigure(-0.04, 1, u"dB"_s).value, u"0.0"_s);
        // 20 log10 0.001 = -60 exactly.
        QCOMPARE(ratioDecibelFigure(0.001, 1, u"dB"_s).value, u"\u221260.0"_s);
    }

    void volts_turnToMillivoltsBelowATenth()
    {
        QCOMPARE(joined(voltFigure(2.5031)), u"2.503\u00A0V"_s);
        QCOMPARE(joined(voltFigure(0.0473)), u"47.30\u00A0mV"_s);
    }

    void decimalMark_isTheUsers()
    {
        QLocale::setDefault(QLocale(QLocale::German));
        QCOMPARE(percentFigure(0.0011).value, u"0,110"_s);
        QCOMPARE(frequencyFigure(11892.3, 0.05).value, u"11892,30"_s);
        QLocale::setDefault(QLocale::c());
    }

    void rates_readAsTheTradeWritesThem()
    {
        QCOMPARE(rateText(96000.0), u"96\u00A0kHz"_s);
        QCOMPARE(rateText(44100.0), u"44.1\u00A0kHz"_s);
        QCOMPARE(rateText(11025.0), u"11.025\u00A0kHz"_s);
        QCOMPARE(roundFrequencyText(1189.2), u"1.19\u00A0kHz"_s);
        QCOMPARE(roundFrequencyText(999.7), u"1000\u00A0Hz"_s);
        QCOMPARE(roundFrequencyText(15.2), u"15.2\u00A0Hz"_s);
    }
};

} // namespace sinewright::ui

QTEST_GUILESS_MAIN(sinewright::ui::TestFigureText)
#include "tst_figure_text.moc"
