// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/signal/window.h"

#include <QTest>

#include <cmath>
#include <complex>
#include <numbers>

using namespace sinewright;

class TestWindow : public QObject
{
    Q_OBJECT

private slots:
    void figures_agreeWithPublishedTables_data();
    void figures_agreeWithPublishedTables();
    void mainLobe_endsAtNumberOfTerms_data();
    void mainLobe_endsAtNumberOfTerms();
    void transform_isSumOverSamples_data();
    void transform_isSumOverSamples();
    void samples_areSymmetricAndPeakInTheMiddle();
    void names_areUnique();
};

namespace {

void row(
    const char* tag, const char* window, double sidelobeDb, double noiseBandwidth, double scallopDb)
{
    QTest::newRow(tag) << window << sidelobeDb << noiseBandwidth << scallopDb;
}

} // namespace

void TestWindow::figures_agreeWithPublishedTables_data()
{
    QTest::addColumn<QString>("name");
    QTest::addColumn<double>("sidelobeDb");
    QTest::addColumn<double>("noiseBandwidthBins");
    QTest::addColumn<double>("scallopDb"); // NaN: the source does not print it

    const double none = std::nan("");
    // Harris prints to 2 or 3 digits; the digits beyond are recomputed from the closed-form transform.
    row("Harris 1978, Table 1: rectangular -13 / 1.00 / 3.92", "rectangular", -13.26, 1.0, 3.9224);
    row("Harris 1978, Table 1: Hann -32 / 1.50 / 1.42", "Hann", -31.47, 1.5, 1.4236);
    row("Harris 1978, Table 1: Hamming -43 / 1.36 (scallop recomputed)",
        "Hamming",
        -42.68,
        1.362826,
        1.7514);
    row("Harris 1978, Table 1: Blackman -58 / 1.73 / 1.10", "Blackman", -58.11, 1.726757, 1.0989);
    row("Harris 1978, Table 1: 3-term, sidelobe recomputed",
        "Blackman-Harris 3",
        -70.83,
        1.708538,
        1.1287);
    row("Harris 1978, Table 1: 4-term -92 / 2.00 / 0.83",
        "Blackman-Harris 4",
        -92.01,
        2.004353,
        0.8256);

    const char* n3c3 = "Nuttall 3, third derivative continuous";
    row("Nuttall 1981: 3-term, third derivative 46.7 / 1.9444", n3c3, -46.741, 1.944444, 0.86305);
    const char* n3c1 = "Nuttall 3, first derivative continuous";
    row("Nuttall 1981: 3-term, first derivative 64.2 / 1.7721", n3c1, -64.187, 1.772127, 1.04531);
    row("Nuttall 1981: 3-term 71.5 / 1.7037",
        "Nuttall 3, minimum sidelobe",
        -71.483,
        1.703713,
        1.13525);
    const char* n4c5 = "Nuttall 4, fifth derivative continuous";
    row("Nuttall 1981: 4-term, fifth derivative 60.9 / 2.31", n4c5, -60.949, 2.31, 0.61836);
    const char* n4c3 = "Nuttall 4, third derivative continuous";
    row("Nuttall 1981: 4-term, third derivative 82.6 / 2.1253", n4c3, -82.603, 2.125311, 0.73205);
    const char* n4c1 = "Nuttall 4, first derivative continuous";
    row("Nuttall 1981: 4-term, first derivative 93.3 / 2.0212", n4c1, -93.324, 2.021233, 0.81176);
    row("Nuttall 1981: 4-term 98.1 / 1.9761",
        "Nuttall 4, minimum sidelobe",
        -98.167,
        1.976109,
        0.85056);

    row("Heinzel 2002: HFT70", "HFT70", -70.4, 3.4129, none);
    row("Heinzel 2002: HFT95", "HFT95", -95.0, 3.8112, none);
    row("Heinzel 2002: HFT90D", "HFT90D", -90.2, 3.8832, none);
    row("Heinzel 2002: HFT116D", "HFT116D", -116.8, 4.2186, none);
    row("Heinzel 2002: HFT144D", "HFT144D", -144.1, 4.5386, none);
    row("Heinzel 2002: HFT169D", "HFT169D", -169.5, 4.8347, none);
    row("Heinzel 2002: HFT196D", "HFT196D", -196.2, 5.1134, none);
    row("Heinzel 2002: HFT223D", "HFT223D", -223.0, 5.3888, none);
    row("Heinzel 2002: HFT248D", "HFT248D", -248.4, 5.6512, none);

    row("Albrecht 2010, Table 2: 2 terms", "Albrecht 2", -43.187, 1.36766, 1.73868);
    row("Albrecht 2010, Table 2: 3 terms", "Albrecht 3", -71.482, 1.70371, 1.13525);
    row("Albrecht 2010, Table 2: 4 terms", "Albrecht 4", -98.173, 1.97611, 0.85056);
    row("Albrecht 2010, Table 2: 5 terms", "Albrecht 5", -125.427, 2.21535, 0.68006);
    row("Albrecht 2010, Table 2: 6 terms", "Albrecht 6", -153.566, 2.43390, 0.56526);
    row("Albrecht 2010, Table 2: 7 terms", "Albrecht 7", -180.468, 2.63025, 0.48523);
    row("Albrecht 2010, Table 2: 8 terms", "Albrecht 8", -207.512, 2.81292, 0.42506);
    row("Albrecht 2010, Table 2: 9 terms", "Albrecht 9", -234.734, 2.98588, 0.37780);
    row("Albrecht 2010, Table 2: 10 terms", "Albrecht 10", -262.871, 3.15168, 0.33950);
    row("Albrecht 2010, Table 2: 11 terms", "Albrecht 11", -289.635, 3.30480, 0.30908);
}

void TestWindow::figures_agreeWithPublishedTables()
{
    QFETCH(QString, name);
    QFETCH(double, sidelobeDb);
    QFETCH(double, noiseBandwidthBins);
    QFETCH(double, scallopDb);
    const auto* window = core::findCosineWindow(name.toStdString());
    QVERIFY(window != nullptr);
    const auto figures = core::windowFigures(*window);
    // Half of the last digit printed by any of the sources; the two longest Albrecht sets have sidelobes
    // near the rounding of a double, about 1e-14 of the peak's terms.
    const double sidelobeTolerance = sidelobeDb < -240.0 ? 0.6 : 0.06;
    QCOMPARE_LE(std::abs(figures.sidelobeDb - sidelobeDb), sidelobeTolerance);
    QCOMPARE_LE(std::abs(figures.noiseBandwidthBins - noiseBandwidthBins), 6e-5);
    if (!std::isnan(scallopDb)) {
        QCOMPARE_LE(std::abs(figures.scallopDb - scallopDb), 6e-5);
    }
}

void TestWindow::mainLobe_endsAtNumberOfTerms_data()
{
    QTest::addColumn<int>("terms");
    for (int terms = 2; terms <= 11; ++terms) {
        QTest::addRow("Albrecht 2010: null at %d bins", terms) << terms;
    }
}

void TestWindow::mainLobe_endsAtNumberOfTerms()
{
    QFETCH(int, terms);
    const core::WindowTransform transform(core::minimumSidelobeWindow(terms), 4096);
    const double peak = transform.value(0.0);
    // Exactly 0 but for rounding, some 1e-16 of each of up to 21 terms.
    QCOMPARE_LE(std::abs(transform.value(terms)) / peak, 1e-14);
    QVERIFY(transform.value(terms - 0.5) > 0.0);
}

void TestWindow::transform_isSumOverSamples_data()
{
    QTest::addColumn<int>("terms");
    QTest::addColumn<int>("count");
    QTest::addRow("definition: 2 terms, even length") << 2 << 64;
    QTest::addRow("definition: 5 terms, odd length") << 5 << 101;
    QTest::addRow("definition: 9 terms, even length") << 9 << 1000;
}

void TestWindow::transform_isSumOverSamples()
{
    QFETCH(int, terms);
    QFETCH(int, count);
    const auto& window = core::minimumSidelobeWindow(terms);
    const auto samples = core::windowSamples(window, static_cast<std::size_t>(count));
    const core::WindowTransform transform(window, samples.size());
    for (const double bins : {0.0, 1e-4, 0.37, 1.0, 4.0 + 1e-5, 7.2, 31.9}) {
        std::complex<double> sum;
        std::complex<double> moment;
        for (std::size_t n = 0; n < samples.size(); ++n) {
            const double t = static_cast<double>(n) - (count - 1.0) / 2.0;
            const double angle = 2.0 * std::numbers::pi * t / count;
            sum += samples[n] * std::polar(1.0, -bins * angle);
            moment +=
                std::complex<double>(0.0, -angle) * samples[n] * std::polar(1.0, -bins * angle);
        }
        // A thousand roundings of 1e-16 on a sum of a thousand; the slope's series is good to 1e-9.
        QCOMPARE_LE(std::abs(sum - transform.value(bins)), 1e-12 * count);
        QCOMPARE_LE(std::abs(moment - transform.slope(bins)), 1e-8 * count);
    }
}

void TestWindow::samples_areSymmetricAndPeakInTheMiddle()
{
    for (const auto& window : core::cosineWindows()) {
        double sum = 0.0;
        for (const double term : window.terms) {
            sum += term;
        }
        const auto samples = core::windowSamples(window, 257);
        for (std::size_t n = 0; n < samples.size(); ++n) {
            QCOMPARE(samples[n], samples[samples.size() - 1 - n]);
            QCOMPARE_LE(samples[n], sum * (1.0 + 1e-15));
        }
        QCOMPARE_LE(std::abs(samples[128] - sum), 1e-15 * sum);
    }
}

void TestWindow::names_areUnique()
{
    for (const auto& window : core::cosineWindows()) {
        QCOMPARE(core::findCosineWindow(window.name), &window);
    }
    QVERIFY(core::findCosineWindow("no such window") == nullptr);
}

QTEST_APPLESS_MAIN(TestWindow)
#include "tst_window.moc"
