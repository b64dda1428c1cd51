// SPDX-License-Identifier: GPL-3.0-or-later
#include "app/command_line.h"
#include "app/commands.h"

#include <QTest>

#include <cmath>
#include <set>

using namespace sinewright;
using namespace sinewright::app;
using namespace Qt::StringLiterals;

namespace {

/// The words of a line; no word here has a space in it.
core::Result<Invocation> parsed(const QString& line)
{
    return parseCommandLine(line.split(u' ', Qt::SkipEmptyParts));
}

template <typename T>
std::optional<T> parsedAs(const QString& line)
{
    const auto invocation = parsed(line);
    if (!invocation || !std::holds_alternative<T>(*invocation)) {
        return std::nullopt;
    }
    return std::get<T>(*invocation);
}

/// Every "--option" in a text.
std::set<QString> optionsIn(const QString& text)
{
    static const QRegularExpression kOption(u"--([a-z][a-z-]*)"_s);
    std::set<QString> options;
    auto matches = kOption.globalMatch(text);
    while (matches.hasNext()) {
        options.insert(matches.next().captured(1));
    }
    return options;
}

} // namespace

class TestCommandLine : public QObject
{
    Q_OBJECT

private slots:
    void init() { QTest::failOnWarning(QRegularExpression(u".?"_s)); }

    void noWords_openTheWindowWithTheSourceOfLastTime()
    {
        const auto window = parsedAs<WindowOptions>({});
        QVERIFY(window);
        QVERIFY(!window->source);
    }

    void sourceWords_nameASource_data()
    {
        QTest::addColumn<QString>("word");
        QTest::addColumn<int>("kind");
        QTest::addColumn<QString>("name");
        QTest::addColumn<QString>("hostApi");
        const auto row = [](const char* tag,
                            const char* word,
                            ui::SourceKind kind,
                            const char* name,
                            const char* host) {
            QTest::newRow(tag) << QString::fromLatin1(word) << static_cast<int>(kind)
                               << QString::fromLatin1(name) << QString::fromLatin1(host);
        };
        row("command contract: demo", "demo", ui::SourceKind::Demo, "", "");
        row("command contract: card", "card", ui::SourceKind::Card, "", "");
        row("command contract: card:NAME", "card:usb", ui::SourceKind::Card, "usb", "");
        row("a name with colons in it",
            "card:usb (hw:1,0)",
            ui::SourceKind::Card,
            "usb (hw:1,0)",
            "");
        row("host API before the name",
            "card:JACK::system",
            ui::SourceKind::Card,
            "system",
            "JACK");
        row("default input of a host API", "card:ALSA::", ui::SourceKind::Card, "", "ALSA");
        row("command contract: FILE", "take.wav", ui::SourceKind::Take, "take.wav", "");
        row("a file called demo", "./demo", ui::SourceKind::Take, "./demo", "");
        row("a file that begins like a card", "cards.wav", ui::SourceKind::Take, "cards.wav", "");
    }

    void sourceWords_nameASource()
    {
        QFETCH(QString, word);
        QFETCH(int, kind);
        QFETCH(QString, name);
        QFETCH(QString, hostApi);
        const auto invocation = parseCommandLine({u"--source"_s, word});
        QVERIFY(invocation);
        const auto& source = std::get<WindowOptions>(*invocation).source;
        QVERIFY(source);
        QCOMPARE(static_cast<int>(source->kind), kind);
        QCOMPARE(source->name, name);
        QCOMPARE(source->hostApi, hostApi);
        QCOMPARE(textFromSource(*source), word);
    }

    void window_takesSourceRateAndChannel()
    {
        const auto window =
            parsedAs<WindowOptions>(u"--source card:usb --rate 192000 --channel 2"_s);
        QVERIFY(window && window->source);
        QCOMPARE(window->source->rateHz, 192000.0);
        QCOMPARE(window->source->channel, 2);
    }

    void measure_hasTheDefaultsOfTheContract()
    {
        const auto measure = parsedAs<MeasureOptions>(u"measure take.wav"_s);
        QVERIFY(measure);
        QCOMPARE(measure->asJson, false);
        QCOMPARE(measure->startS, 0.0);
        QVERIFY(!measure->secondsS);
        QCOMPARE(measure->source.channel, 1);
        QCOMPARE(measure->settings.band.lowHz, 20.0);
        QCOMPARE(measure->settings.band.highHz, 20000.0);
        QCOMPARE(measure->settings.harmonicCount, 10);
        QVERIFY(measure->settings.weighting == core::Weighting::None);
        QVERIFY(!measure->settings.fullScaleVrms);
    }

    void measure_takesEveryOption()
    {
        const auto measure = parsedAs<MeasureOptions>(
            u"measure --json take.wav --channel 3 --start 1.5 --seconds 2.25 --band "
            "10:80000 --harmonics 7 --weighting 468 --full-scale 4.2"_s);
        QVERIFY(measure);
        QCOMPARE(measure->asJson, true);
        QCOMPARE(measure->source.name, u"take.wav"_s);
        QCOMPARE(measure->source.channel, 3);
        QCOMPARE(measure->startS, 1.5);
        QCOMPARE(measure->secondsS.value_or(0.0), 2.25);
        QCOMPARE(measure->settings.band.lowHz, 10.0);
        QCOMPARE(measure->settings.band.highHz, 80000.0);
        QCOMPARE(measure->settings.harmonicCount, 7);
        QVERIFY(measure->settings.weighting == core::Weighting::Itu468);
        QCOMPARE(measure->settings.fullScaleVrms.value_or(0.0), 4.2);
        const auto demo =
            parsedAs<MeasureOptions>(u"measure demo --rate 48000 --weighting a --trimmer 300"_s);
        QVERIFY(demo);
        QCOMPARE(demo->source.rateHz, 48000.0);
        QCOMPARE(demo->trimmerOhm, 300.0);
        QVERIFY(demo->settings.weighting == core::Weighting::A);
    }

    void picture_takesEveryOption()
    {
        const auto picture =
            parsedAs<PictureOptions>(u"--picture out.png --source demo --rate 192000 --after 12 "
                                     u"--size 1920x1080 --theme dusk --page warm-up "
                                     "--scale 2 --trimmer 340,352.5 --report-load"_s);
        QVERIFY(picture);
        QCOMPARE(picture->file, u"out.png"_s);
        QCOMPARE(picture->source.rateHz, 192000.0);
        QCOMPARE(picture->afterS, 12.0);
        QCOMPARE(picture->size, QSize(1920, 1080));
        QVERIFY(picture->theme == ui::ThemeName::Dusk);
        QVERIFY(picture->page == ui::Page::WarmUp);
        QCOMPARE(picture->scale, 2);
        QCOMPARE(picture->trimmerOhm, (std::vector<double>{340.0, 352.5}));
        QCOMPARE(picture->reportsLoad, true);
    }

    void picture_showsTheDemoUnlessToldOtherwise()
    {
        const auto picture = parsedAs<PictureOptions>(u"--picture out.png"_s);
        QVERIFY(picture);
        QVERIFY(picture->source == SourceSpec());
        QCOMPARE(picture->afterS, 8.0);
    }

    void cards_takesJson()
    {
        QCOMPARE(parsedAs<CardsOptions>(u"cards"_s).value().asJson, false);
        QCOMPARE(parsedAs<CardsOptions>(u"cards --json"_s).value().asJson, true);
    }

    void help_isGivenForTheCommandItStandsAt_data()
    {
        QTest::addColumn<QString>("line");
        QTest::addColumn<int>("topic");
        using Topic = HelpRequest::Topic;
        QTest::newRow("program") << u"--help"_s << static_cast<int>(Topic::Program);
        QTest::newRow("short") << u"-h"_s << static_cast<int>(Topic::Program);
        QTest::newRow("measure") << u"measure --help"_s << static_cast<int>(Topic::Measure);
        QTest::newRow("measure, among wrong words")
            << u"measure --nonsense --help"_s << static_cast<int>(Topic::Measure);
        QTest::newRow("cards") << u"cards --help"_s << static_cast<int>(Topic::Cards);
    }

    void help_isGivenForTheCommandItStandsAt()
    {
        QFETCH(QString, line);
        QFETCH(int, topic);
        const auto help = parsedAs<HelpRequest>(line);
        QVERIFY(help);
        QCOMPARE(static_cast<int>(help->topic), topic);
    }

    /// What help names is understood, and what is understood is named: an option that exists is never "unknown".
    void help_namesExactlyTheOptionsThereAre_data()
    {
        QTest::addColumn<int>("topic");
        QTest::addColumn<QStringList>("options");
        using Topic = HelpRequest::Topic;
        QTest::newRow("program") << static_cast<int>(Topic::Program)
                                 << QStringList{u"after"_s,
                                                u"channel"_s,
                                                u"help"_s,
                                                u"json"_s,
                                                u"page"_s,
                                                u"picture"_s,
                                                u"rate"_s,
                                                u"report-load"_s,
                                                u"scale"_s,
                                                u"size"_s,
                                                u"source"_s,
                                                u"theme"_s,
                                                u"trimmer"_s,
                                                u"version"_s};
        QTest::newRow("measure") << static_cast<int>(Topic::Measure)
                                 << QStringList{u"band"_s,
                                                u"channel"_s,
                                                u"full-scale"_s,
                                                u"harmonics"_s,
                                                u"help"_s,
                                                u"json"_s,
                                                u"rate"_s,
                                                u"seconds"_s,
                                                u"start"_s,
                                                u"trimmer"_s,
                                                u"weighting"_s};
        QTest::newRow("cards") << static_cast<int>(Topic::Cards)
                               << QStringList{u"json"_s, u"rate"_s, u"source"_s};
    }

    void help_namesExactlyTheOptionsThereAre()
    {
        QFETCH(int, topic);
        QFETCH(QStringList, options);
        const Outcome help = runHelp({static_cast<HelpRequest::Topic>(topic)});
        QVERIFY(help.status == ExitStatus::Good);
        QCOMPARE(optionsIn(QString::fromStdString(help.output)),
                 (std::set<QString>(options.begin(), options.end())));
    }

    void help_fitsATerminal()
    {
        using Topic = HelpRequest::Topic;
        constexpr qsizetype kColumns = 80;
        for (const Topic topic : {Topic::Program, Topic::Measure, Topic::Cards}) {
            const QStringList lines = QString::fromStdString(runHelp({topic}).output).split(u'\n');
            for (const QString& line : lines) {
                QVERIFY2(line.size() <= kColumns, qPrintable(line));
            }
        }
    }

    void version_isPrinted()
    {
        QVERIFY(parsedAs<VersionRequest>(u"--version"_s));
        const QString line = QString::fromStdString(runVersion().output);
        QVERIFY2(QRegularExpression(u"^sinewright \\d+\\.\\d+\\.\\d+\\n$"_s).match(line).hasMatch(),
                 qPrintable(line));
    }

    void wrongWords_areSaidInOneLineWithTheWayToHelp_data()
    {
        QTest::addColumn<QString>("line");
        QTest::addColumn<QString>("mentions");
        const auto row = [](const char* line, const char* mentions) {
            QTest::newRow(line) << QString::fromLatin1(line) << QString::fromLatin1(mentions);
        };
        row("listen", "unknown command 'listen'");
        row("take.wav", "--source FILE");
        row("--nonsense", "unknown option --nonsense");
        row("-x", "unknown option -x");
        row("--rate 96000", "--source");
        row("--source", "source");
        row("--source demo --rate 1", "44100");
        row("--source card --rate nan", "--rate nan");
        row("--source take.wav --rate 96000", "its own rate");
        row("--source demo --channel 0", "--channel 0");
        row("--source demo --channel 1.5", "--channel 1.5");
        row("--size 1280x800", "--picture");
        row("--report-load", "--picture");
        row("--picture p.png --size 1280", "--size 1280");
        row("--picture p.png --size 9x9", "--size 9x9");
        row("--picture p.png --theme blue", "paper, dusk");
        row("--picture p.png --page scope", "trim");
        row("--picture p.png --scale 3", "--scale 3");
        row("--picture p.png --after 0", "--after 0");
        row("--picture p.png --trimmer 100", "226");
        row("--picture p.png --source a.wav --trimmer 300", "only the demo");
        row("measure", "wants a source");
        row("measure a.wav b.wav", "b.wav");
        row("measure a.wav --nonsense", "unknown option --nonsense");
        row("measure a.wav --start", "missing value after '--start'; try");
        row("measure a.wav --json=yes", "json");
        row("measure a.wav --seconds -1", "--seconds -1");
        row("measure a.wav --seconds inf", "--seconds inf");
        row("measure a.wav --seconds 0", "--seconds 0");
        row("measure a.wav --start -0.5", "--start");
        row("measure demo --start 1", "only a take");
        row("measure a.wav --band 20", "--band 20");
        row("measure a.wav --band 20:", "--band 20:");
        row("measure a.wav --band 2000:20", "--band 2000:20");
        row("measure a.wav --band nan:20", "--band nan:20");
        row("measure a.wav --band 20:200:2000", "--band 20:200:2000");
        row("measure a.wav --harmonics 1", "--harmonics 1");
        row("measure a.wav --harmonics 33", "--harmonics 33");
        row("measure a.wav --weighting c", "none, a, 468");
        row("measure a.wav --full-scale 0", "--full-scale 0");
        row("measure a.wav --rate 96000", "its own rate");
        row("measure demo --trimmer 300,310", "one place");
        row("cards usb", "usb");
        row("cards --rate 1", "unknown option --rate");
    }

    void wrongWords_areSaidInOneLineWithTheWayToHelp()
    {
        QFETCH(QString, line);
        QFETCH(QString, mentions);
        const auto invocation = parsed(line);
        QVERIFY(!invocation);
        QVERIFY(invocation.error().code == core::ErrorCode::InvalidArgument);
        const QString detail = QString::fromStdString(invocation.error().detail);
        QVERIFY2(detail.contains(mentions), qPrintable(detail));
        QVERIFY2(detail.contains(u"--help'"_s), qPrintable(detail));
        QVERIFY(!detail.contains(u'\n'));
    }

    void aWordWithALineBreak_staysOnOneLine()
    {
        const auto invocation = parseCommandLine({u"two\nlines"_s});
        QVERIFY(!invocation);
        QVERIFY(!QString::fromStdString(invocation.error().detail).contains(u'\n'));
    }
};

QTEST_APPLESS_MAIN(TestCommandLine)
#include "tst_command_line.moc"
