// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/theme.h"

#include <QFontInfo>
#include <QFontMetricsF>
#include <QTest>

namespace sinewright::ui {

using namespace Qt::StringLiterals;

class TestTheme final : public QObject
{
    Q_OBJECT
private slots:
    void init() { QTest::failOnWarning(QRegularExpression(u".*"_s)); }

    void contrast_ofKnownPairs()
    {
        // Black on white is 21:1 and a colour on itself 1:1 by the definition.
        QCOMPARE_LE(std::abs(contrastRatio(Qt::black, Qt::white) - 21.0), 1e-9);
        QCOMPARE(contrastRatio(Qt::red, Qt::red), 1.0);
        // #767676 is the lightest grey that reaches 4.5:1 on white (W3C, from memory): 4.54.
        QCOMPARE_LE(std::abs(contrastRatio(QColor(0x76, 0x76, 0x76), Qt::white) - 4.54), 0.01);
    }

    void everyText_standsOutFromEveryGround_data()
    {
        QTest::addColumn<QColor>("text");
        QTest::addColumn<QColor>("ground");
        for (const auto& [name, which] :
             {std::pair("paper", ThemeName::Paper), std::pair("dusk", ThemeName::Dusk)}) {
            const Theme& t = theme(which);
            const QPalette palette = paletteOf(t);
            const std::pair<const char*, QColor> texts[] = {
                {"ink", t.ink},
                {"soft ink", t.inkSoft},
                {"copper", t.copper},
                {"verdigris", t.verdigris},
                {"slate", t.slate},
                {"alert", t.alert},
                {"placeholder", palette.color(QPalette::PlaceholderText)},
                {"disabled", palette.color(QPalette::Disabled, QPalette::Text)}};
            for (const auto& [text, colour] : texts) {
                for (const auto& [ground, behind] :
                     {std::pair("page", t.page), std::pair("rail", t.rail)}) {
                    QTest::addRow("%s: %s on %s", name, text, ground) << colour << behind;
                }
            }
            QTest::addRow("%s: selected text", name)
                << palette.color(QPalette::HighlightedText) << palette.color(QPalette::Highlight);
            QTest::addRow("%s: text on a pressed button", name) << t.ink << t.wash;
        }
    }
    void everyText_standsOutFromEveryGround()
    {
        QFETCH(const QColor, text);
        QFETCH(const QColor, ground);
        // WCAG 2.1, success criterion 1.4.3, from memory: 4.5:1 for text of ordinary size.
        QCOMPARE_GE(contrastRatio(text, ground), 4.5);
    }

    void digits_areOfOneWidth_data()
    {
        QTest::addColumn<QFont>("font");
        for (const int pixels : {11, 12, 13, 27, 46, 200}) {
            QTest::addRow("figures, %d pixels", pixels) << figureFont(pixels);
            QTest::addRow("display, %d pixels", pixels) << displayFont(pixels);
        }
    }
    void digits_areOfOneWidth()
    {
        QFETCH(const QFont, font);
        const QFontMetricsF metrics(font);
        const double zero = metrics.horizontalAdvance(u'0');
        for (char16_t digit = u'1'; digit <= u'9'; ++digit) {
            QCOMPARE(metrics.horizontalAdvance(QChar(digit)), zero);
        }
    }

    void styleSheet_hasNoColourLeftUnset()
    {
        for (const ThemeName name : {ThemeName::Paper, ThemeName::Dusk}) {
            QVERIFY(!styleSheetOf(theme(name)).contains(u'@'));
        }
    }
};

} // namespace sinewright::ui

QTEST_MAIN(sinewright::ui::TestTheme)
#include "tst_theme.moc"
