// SPDX-License-Identifier: GPL-3.0-or-later
#include "app/command_line.h"

#include "app/limits.h"
#include "app/option_reader.h"
#include "app/words.h"

#include <algorithm>
#include <utility>

namespace sinewright::app {

using namespace Qt::StringLiterals;
using ui::SourceKind;

namespace {

constexpr double kLongestS = 3600.0;
constexpr double kLatestStartS = 1e7;
constexpr int kSmallestEdge = 320;
constexpr int kLargestEdge = 8192;

bool isHelpWord(const QString& word)
{
    return word == u"--help" || word == u"-h";
}

/// Rate and channel go with every source but a take, which has its own rate.
void readRateAndChannel(OptionReader& options, SourceSpec& spec)
{
    if (const auto channel = options.wholeNumber(u"channel", 1, kHighestChannel)) {
        spec.channel = *channel;
    }
    if (!options.has(u"rate")) {
        return;
    }
    if (spec.kind == SourceKind::Take) {
        options.complainAbout(u"rate", u"a take has its own rate; leave the option out"_s);
        return;
    }
    const bool isDemo = spec.kind == SourceKind::Demo;
    const auto rateHz = options.number(u"rate",
                                       isDemo ? kDemoLowestRateHz : kLowestRateHz,
                                       isDemo ? kDemoHighestRateHz : kHighestRateHz);
    spec.rateHz = rateHz.value_or(0.0);
}

SourceSpec readSource(OptionReader& options, const QString& text)
{
    const auto spec = sourceFromText(text);
    if (!spec) {
        options.complain(QString::fromStdString(spec.error().detail));
        return {};
    }
    SourceSpec result = *spec;
    readRateAndChannel(options, result);
    return result;
}

void readBand(OptionReader& options, core::Band& band)
{
    if (!options.has(u"band")) {
        return;
    }
    const QStringList edges = options.text(u"band").split(u':');
    bool isLowNumber = false;
    bool isHighNumber = false;
    const core::Band wanted{.lowHz = edges.first().toDouble(&isLowNumber),
                            .highHz = edges.last().toDouble(&isHighNumber)};
    // Written so that a NaN fails every comparison.
    const bool isBand = edges.size() == 2 && isLowNumber && isHighNumber && wanted.lowHz >= 0.0 &&
                        wanted.highHz > wanted.lowHz && wanted.highHz <= kHighestBandHz;
    if (!isBand) {
        options.complainAbout(
            u"band", u"two frequencies in Hz are wanted, the lower first, as in 20:20000"_s);
        return;
    }
    band = wanted;
}

core::MeasureSettings readMeasureSettings(OptionReader& options)
{
    core::MeasureSettings settings;
    readBand(options, settings.band);
    settings.harmonicCount =
        options.wholeNumber(u"harmonics", kLowestHarmonicCount, kHighestHarmonicCount)
            .value_or(settings.harmonicCount);
    settings.weighting = options.choice(u"weighting", kWeightingWords).value_or(settings.weighting);
    settings.fullScaleVrms =
        options.number(u"full-scale", kLowestFullScaleVrms, kHighestFullScaleVrms);
    return settings;
}

/// Stops of the virtual trimmer, "355" or "340,352,355".
std::vector<double> readTrimmer(OptionReader& options, const SourceSpec& spec)
{
    std::vector<double> stops;
    if (!options.has(u"trimmer")) {
        return stops;
    }
    if (spec.kind != SourceKind::Demo) {
        options.complainAbout(u"trimmer", u"only the demo has a virtual trimmer"_s);
        return stops;
    }
    const QStringList words = options.text(u"trimmer").split(u',');
    for (const QString& word : words) {
        bool isNumber = false;
        const double ohm = word.toDouble(&isNumber);
        if (!isNumber ||
            !(ohm >= audio::kDemoTrimmerLowestOhm && ohm <= audio::kDemoTrimmerHighestOhm)) {
            options.complainAbout(
                u"trimmer",
                u"the virtual trimmer goes from %1 to %2 ohms"_s.arg(audio::kDemoTrimmerLowestOhm)
                    .arg(audio::kDemoTrimmerHighestOhm));
            return {};
        }
        stops.push_back(ohm);
    }
    return stops;
}

QSize readSize(OptionReader& options, QSize fallback)
{
    if (!options.has(u"size")) {
        return fallback;
    }
    const QStringList edges = options.text(u"size").split(u'x');
    const QSize size(edges.first().toInt(), edges.last().toInt());
    const auto fits = [](int edge) {
        return edge >= kSmallestEdge && edge <= kLargestEdge;
    };
    if (edges.size() != 2 || !fits(size.width()) || !fits(size.height())) {
        options.complainAbout(
            u"size",
            u"width and height in pixels are wanted, %1 to %2, as in 1280x800"_s.arg(kSmallestEdge)
                .arg(kLargestEdge));
        return fallback;
    }
    return size;
}

/// What an option reader makes of a command, or its complaint.
core::Result<Invocation> finished(const OptionReader& options, Invocation invocation)
{
    if (auto error = options.error()) {
        return tl::unexpected<core::Error>(std::move(*error));
    }
    return invocation;
}

core::Result<Invocation> parseMeasure(const QStringList& arguments)
{
    OptionReader options(u"sinewright measure --help"_s,
                         {{"json", false},
                          {"rate"},
                          {"channel"},
                          {"start"},
                          {"seconds"},
                          {"band"},
                          {"harmonics"},
                          {"weighting"},
                          {"full-scale"},
                          {"trimmer"}},
                         arguments);
    MeasureOptions measure;
    const QStringList words = options.words();
    if (words.size() != 1) {
        options.complain(
            words.isEmpty() ? u"measure wants a source: 'demo', 'card', 'card:NAME' or a file"_s
                            : u"measure wants one source, but '%1' came too"_s.arg(words.value(1)));
        return finished(options, measure);
    }
    measure.source = readSource(options, words.first());
    measure.asJson = options.has(u"json");
    measure.settings = readMeasureSettings(options);
    measure.secondsS = options.number(u"seconds", 1e-3, kLongestS);
    if (options.has(u"start") && measure.source.kind != SourceKind::Take) {
        options.complainAbout(u"start", u"only a take has a start to count from"_s);
    }
    measure.startS = options.number(u"start", 0.0, kLatestStartS).value_or(0.0);
    const std::vector<double> stops = readTrimmer(options, measure.source);
    if (stops.size() > 1) {
        options.complainAbout(u"trimmer", u"measure wants one place of the trimmer"_s);
    } else if (!stops.empty()) {
        measure.trimmerOhm = stops.front();
    }
    return finished(options, measure);
}

core::Result<Invocation> parseCards(const QStringList& arguments)
{
    OptionReader options(u"sinewright cards --help"_s, {{"json", false}}, arguments);
    if (!options.words().isEmpty()) {
        options.complain(u"cards takes no word, but '%1' came"_s.arg(options.words().constFirst()));
    }
    return finished(options, CardsOptions{.asJson = options.has(u"json")});
}

PictureOptions readPicture(OptionReader& options)
{
    PictureOptions picture;
    picture.file = options.text(u"picture");
    if (picture.file.isEmpty()) {
        options.complain(u"--picture wants the name of a file"_s);
    }
    picture.source =
        readSource(options, options.has(u"source") ? options.text(u"source") : u"demo"_s);
    picture.afterS = options.number(u"after", 0.1, kLongestS).value_or(picture.afterS);
    picture.size = readSize(options, picture.size);
    picture.theme = options.choice(u"theme", kThemeWords).value_or(picture.theme);
    picture.page = options.choice(u"page", kPageWords).value_or(picture.page);
    picture.scale = options.wholeNumber(u"scale", 1, kLargestPictureScale).value_or(picture.scale);
    picture.trimmerOhm = readTrimmer(options, picture.source);
    picture.reportsLoad = options.has(u"report-load");
    return picture;
}

/// The window itself has no use for what only an unattended picture needs.
WindowOptions readWindow(OptionReader& options)
{
    for (const QStringView name :
         {u"after", u"size", u"theme", u"page", u"scale", u"trimmer", u"report-load"}) {
        if (options.has(name)) {
            options.complain(u"--%1 goes with --picture only"_s.arg(name));
        }
    }
    WindowOptions window;
    if (options.has(u"source")) {
        window.source = readSource(options, options.text(u"source"));
    } else if (options.has(u"rate") || options.has(u"channel")) {
        options.complain(u"--rate and --channel need --source to say of which source"_s);
    }
    return window;
}

core::Result<Invocation> parseWindow(const QStringList& arguments)
{
    OptionReader options(u"sinewright --help"_s,
                         {{"source"},
                          {"rate"},
                          {"channel"},
                          {"picture"},
                          {"after"},
                          {"size"},
                          {"theme"},
                          {"page"},
                          {"scale"},
                          {"trimmer"},
                          {"report-load", false}},
                         arguments);
    if (!options.words().isEmpty()) {
        options.complain(u"unknown command '%1' (a file is opened with --source FILE)"_s.arg(
            options.words().constFirst()));
    }
    if (options.has(u"picture")) {
        return finished(options, readPicture(options));
    }
    return finished(options, readWindow(options));
}

} // namespace

core::Result<Invocation> parseCommandLine(const QStringList& arguments)
{
    const QString command = arguments.isEmpty() ? QString() : arguments.first();
    const bool wantsHelp = std::any_of(arguments.begin(), arguments.end(), isHelpWord);
    const bool isMeasure = command == u"measure";
    const bool isCards = command == u"cards";
    if (wantsHelp) {
        using Topic = HelpRequest::Topic;
        return HelpRequest{isMeasure ? Topic::Measure : isCards ? Topic::Cards : Topic::Program};
    }
    if (command == u"--version") {
        return VersionRequest{};
    }
    if (isMeasure) {
        return parseMeasure(arguments.mid(1));
    }
    if (isCards) {
        return parseCards(arguments.mid(1));
    }
    return parseWindow(arguments);
}

} // namespace sinewright::app
