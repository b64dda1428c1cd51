// SPDX-License-Identifier: GPL-3.0-or-later
// Figures of the bench as a whole, through the real program: see tests/figures.sh.
#include "core/measure/analyser.h"
#include "core/oscillator/lamp_oscillator.h"

#include <QCoreApplication>
#include <QElapsedTimer>
#include <QJsonArray>
#include <QJsonDocument>
#include <QJsonObject>
#include <QProcess>
#include <QRegularExpression>
#include <QTemporaryDir>

#include <algorithm>
#include <array>
#include <cmath>
#include <cstdio>
#include <ctime>
#include <numbers>
#include <span>
#include <vector>

#include "tests/support/figure.h"
#include "tests/support/virtual_card.h"
#include <sndfile.h>

using namespace sinewright;
using namespace Qt::StringLiterals;

namespace {

bool allMet = true;

void row(const QString& name, const QString& value, const QString& bar, bool isMet)
{
    allMet = allMet && isMet;
    std::puts(qPrintable(tests::figureLine(name, value, bar, isMet)));
    std::fflush(stdout);
}

QString number(double value, int decimals)
{
    return QString::number(value, 'f', decimals);
}

/// A sine of amplitude 0.5 with harmonics, `frames` long.
struct Tone
{
    double frequencyHz = 1000.0;
    double secondDbc = -80.0;
    double thirdDbc = -90.0;

    [[nodiscard]] double at(double seconds) const
    {
        const double angle = 2.0 * std::numbers::pi * frequencyHz * seconds;
        return 0.5 *
               (std::sin(angle) + std::pow(10.0, secondDbc / 20.0) * std::sin(2.0 * angle + 0.4) +
                std::pow(10.0, thirdDbc / 20.0) * std::sin(3.0 * angle - 1.1));
    }
    [[nodiscard]] double thdDb() const
    {
        return 10.0 *
               std::log10(std::pow(10.0, secondDbc / 10.0) + std::pow(10.0, thirdDbc / 10.0));
    }
};

bool writeTake(
    const QString& file, const Tone& tone, int rateHz, int channels, int seconds, int format)
{
    SF_INFO info{};
    info.samplerate = rateHz;
    info.channels = channels;
    info.format = format;
    SNDFILE* const take = ::sf_open(file.toUtf8().constData(), SFM_WRITE, &info);
    if (take == nullptr) {
        return false;
    }
    std::vector<double> second(static_cast<std::size_t>(rateHz * channels));
    bool isWritten = true;
    for (int s = 0; s < seconds; ++s) {
        for (std::size_t i = 0; i < second.size(); ++i) {
            const auto frame = static_cast<double>(i / static_cast<std::size_t>(channels));
            second[i] = tone.at(s + frame / rateHz);
        }
        const auto count = static_cast<sf_count_t>(second.size());
        isWritten = isWritten && ::sf_write_double(take, second.data(), count) == count;
    }
    return ::sf_close(take) == 0 && isWritten;
}

struct Run
{
    int exitCode = -1;
    double seconds = 0.0;
    QByteArray output;
};

Run runProgram(const QStringList& arguments)
{
    constexpr int kLongestMs = 180'000;
    QProcess process;
    process.setProcessChannelMode(QProcess::ForwardedErrorChannel);
    QElapsedTimer watch;
    watch.start();
    process.start(QStringLiteral(SINEWRIGHT_PROGRAM), arguments);
    Run run;
    if (process.waitForFinished(kLongestMs) && process.exitStatus() == QProcess::NormalExit) {
        run.exitCode = process.exitCode();
    }
    run.seconds = static_cast<double>(watch.nsecsElapsed()) * 1e-9;
    run.output = process.readAllStandardOutput();
    return run;
}

double harmonicDbc(const QJsonObject& reading, int order)
{
    for (const QJsonValue harmonic : reading[u"harmonics"].toArray()) {
        if (harmonic[u"order"].toInt() == order) {
            return harmonic[u"dbc"].toDouble();
        }
    }
    return std::numeric_limits<double>::quiet_NaN();
}

void measureTake(const QString& folder)
{
    const Tone tone;
    const QString file = folder + u"/tone.wav"_s;
    if (!writeTake(file, tone, 96000, 1, 10, SF_FORMAT_WAV | SF_FORMAT_PCM_24)) {
        row(u"take of 10 s, 24 bit, 96 kHz"_s, u"cannot be written"_s, u"written"_s, false);
        return;
    }
    std::array<double, 5> seconds{};
    Run run;
    for (double& wall : seconds) {
        run = runProgram({u"measure"_s, file, u"--json"_s});
        wall = run.seconds;
    }
    std::sort(seconds.begin(), seconds.end());
    const QJsonObject reading = QJsonDocument::fromJson(run.output).object();
    const double second = harmonicDbc(reading, 2) - tone.secondDbc;
    const double third = harmonicDbc(reading, 3) - tone.thirdDbc;
    const double hertz = reading[u"frequencyHz"].toDouble() - tone.frequencyHz;
    row(u"measure, 2nd harmonic at -80 dBc, error"_s,
        number(second, 4) + u" dB"_s,
        u"0.05 dB"_s,
        std::abs(second) <= 0.05);
    row(u"measure, 3rd harmonic at -90 dBc, error"_s,
        number(third, 4) + u" dB"_s,
        u"0.05 dB"_s,
        std::abs(third) <= 0.05);
    row(u"measure, frequency, error"_s,
        number(hertz * 1e3, 6) + u" mHz"_s,
        u"1 mHz"_s,
        std::abs(hertz) <= 1e-3);
    row(u"measure, 10 s take, whole command, median of 5"_s,
        number(seconds[2], 3) + u" s"_s,
        u"0.5 s"_s,
        seconds[2] < 0.5);
}

void captureTone(const QString& folder)
{
    constexpr int kPlayS = 60;
    const Tone tone{.frequencyHz = 997.0, .secondDbc = -70.0, .thirdDbc = -76.0};
    const QString file = folder + u"/played.wav"_s;
    tests::VirtualCard card;
    card.useInThisProcess();
    if (!writeTake(file, tone, 96000, 2, kPlayS, SF_FORMAT_WAV | SF_FORMAT_FLOAT) ||
        !card.start() || !card.play(file)) {
        row(u"virtual card"_s, card.whatFailed(), u"starts and plays"_s, false);
        return;
    }
    // The head of what is played may come late: ask again while there is nothing to hear yet.
    Run run;
    for (int tries = 0; tries < 5 && run.exitCode != 0; ++tries) {
        run = runProgram({u"measure"_s, u"card"_s, u"--rate"_s, u"96000"_s, u"--json"_s});
    }
    const QJsonObject reading = QJsonDocument::fromJson(run.output).object();
    const double error = reading[u"thdDb"].toDouble() - tone.thdDb();
    row(u"card capture, THD at %1 dB, error"_s.arg(number(tone.thdDb(), 1)),
        number(error, 4) + u" dB"_s,
        u"0.1 dB"_s,
        run.exitCode == 0 && std::abs(error) <= 0.1);
}

void loadOfTheWindow(const QString& folder)
{
    const QString file = folder + u"/stereo.wav"_s;
    if (!writeTake(file, Tone{}, 192000, 2, 30, SF_FORMAT_WAV | SF_FORMAT_FLOAT)) {
        row(u"take of 30 s, 192 kHz stereo"_s, u"cannot be written"_s, u"written"_s, false);
        return;
    }
    for (const QString& size : {u"1280x800"_s, u"1920x1080"_s}) {
        const Run run = runProgram({u"--source"_s,
                                    file,
                                    u"--picture"_s,
                                    folder + u"/load.png"_s,
                                    u"--size"_s,
                                    size,
                                    u"--after"_s,
                                    u"20"_s,
                                    u"--report-load"_s});
        static const QRegularExpression pattern(
            u"analysis ([\\d.]+) %, drawing ([\\d.]+) %, total ([\\d.]+) %"_s);
        const auto match = pattern.match(QString::fromUtf8(run.output));
        const double total = match.hasMatch() ? match.captured(3).toDouble() : 100.0;
        row(u"live window %1, 192 kHz stereo: analysis + drawing = all threads"_s.arg(size),
            match.hasMatch() ? u"%1 % + %2 % = %3 % of a core"_s.arg(
                                   match.captured(1), match.captured(2), match.captured(3))
                             : u"no report"_s,
            u"40 % in total"_s,
            total < 40.0);
    }
}

double processorSeconds()
{
    timespec now{};
    ::clock_gettime(CLOCK_THREAD_CPUTIME_ID, &now);
    return static_cast<double>(now.tv_sec) + 1e-9 * static_cast<double>(now.tv_nsec);
}

void speedOfTheDemo()
{
    constexpr double kRateHz = 192e3;
    constexpr double kSeconds = 10.0;
    core::LampOscillator oscillator({}, core::SampleRate{kRateHz}, 1);
    oscillator.startSettled(370.0);
    std::vector<double> volts(static_cast<std::size_t>(kRateHz / 100.0));
    const double from = processorSeconds();
    for (int block = 0; block < static_cast<int>(kSeconds * 100.0); ++block) {
        oscillator.run(370.0, volts);
    }
    const double factor = kSeconds / (processorSeconds() - from);
    row(u"demo oscillator at 192 kHz, one core"_s,
        number(factor, 0) + u" x real time"_s,
        u"20 x"_s,
        factor >= 20.0);
}

void paceOfTheReadings()
{
    constexpr double kRateHz = 192e3;
    constexpr int kSeconds = 20;
    core::AnalyserConfig config;
    config.rate = core::SampleRate{kRateHz};
    core::Analyser analyser(config);
    const Tone tone;
    std::vector<double> block(static_cast<std::size_t>(kRateHz / 100.0));
    int quick = 0;
    int full = 0;
    std::uint64_t frame = 0;
    for (int i = 0; i < kSeconds * 100; ++i) {
        for (std::size_t j = 0; j < block.size(); ++j) {
            block[j] = tone.at(static_cast<double>(frame + j) / kRateHz);
        }
        for (const auto& made :
             analyser.feed({.firstFrame = frame, .lostBefore = 0, .samples = block})) {
            ++quick;
            full += made->isFullNew ? 1 : 0;
        }
        frame += block.size();
    }
    const double perSecond = static_cast<double>(quick) / kSeconds;
    row(u"quick readings (full ones beside them)"_s,
        u"%1 a second (%2)"_s.arg(number(perSecond, 1),
                                  number(static_cast<double>(full) / kSeconds, 1)),
        u"10 a second"_s,
        perSecond >= 10.0 && full > 0);
}

} // namespace

int main(int argc, char** argv)
{
    const QCoreApplication application(argc, argv);
    const QTemporaryDir folder;
    measureTake(folder.path());
    paceOfTheReadings();
    speedOfTheDemo();
    loadOfTheWindow(folder.path());
    captureTone(folder.path());
    return allMet ? 0 : 1;
}
