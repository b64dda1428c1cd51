// SPDX-License-Identifier: GPL-3.0-or-later
#include "app/capture.h"
#include "app/commands.h"
#include "app/reading_report.h"
#include "audio/demo.h"
#include "audio/take.h"
#include "core/measure/measure.h"

#include <algorithm>
#include <cmath>
#include <filesystem>
#include <string>

#include <tl/expected.hpp>

namespace sinewright::app {

using ui::SourceKind;

namespace {

/// The demo starts on the orbit of a linear amplifier; by then rails and dead zone have had their say.
constexpr double kDemoSettleS = 5.0;

/// What is going to be measured.
struct SampleStretch
{
    core::SampleRate rate;
    std::vector<double> samples; ///< one channel, 1.0 = full scale
};

/// It, or the outcome that says why there is none.
using Stretch = tl::expected<SampleStretch, Outcome>;

tl::unexpected<Outcome> refused(ExitStatus status, std::string line)
{
    return tl::unexpected<Outcome>(complaint(status, std::move(line)));
}

std::uint64_t framesOf(double seconds, core::SampleRate rate)
{
    return static_cast<std::uint64_t>(std::llround(seconds * rate.hz));
}

std::string secondsText(double seconds)
{
    return QString::number(seconds, 'f', 1).toStdString();
}

/// Whether so long a stretch can be measured, and the band lies where this rate has anything.
tl::expected<void, Outcome> checkRequest(const MeasureOptions& options, core::SampleRate rate)
{
    const double longestS = static_cast<double>(core::kLongestReading) / rate.hz;
    if (options.secondsS && *options.secondsS > longestS) {
        return refused(ExitStatus::WrongUsage,
                       "--seconds is too long: at this rate at most " + secondsText(longestS) +
                           " s are measured at once");
    }
    if (options.settings.band.lowHz >= rate.nyquist().value) {
        return refused(ExitStatus::WrongUsage,
                       "--band begins above half the sample rate (" +
                           QString::number(rate.nyquist().value).toStdString() +
                           " Hz), where there is nothing: begin lower");
    }
    return {};
}

Stretch stretchOfTake(const MeasureOptions& options)
{
    const std::filesystem::path file(options.source.name.toStdString());
    const auto info = audio::takeInfo(file);
    if (!info) {
        return refused(ExitStatus::NoSource, info.error().detail);
    }
    if (auto fits = checkRequest(options, info->rate); !fits) {
        return tl::unexpected<Outcome>(std::move(fits.error()));
    }
    const double wantedS = options.secondsS.value_or(MeasureOptions::kTakeSeconds);
    const auto frames =
        std::min<std::uint64_t>(framesOf(wantedS, info->rate), core::kLongestReading);
    auto samples =
        audio::readTake(file, options.source.channel, framesOf(options.startS, info->rate), frames);
    if (!samples) {
        return refused(ExitStatus::NoSource, samples.error().detail);
    }
    return SampleStretch{info->rate, std::move(*samples)};
}

tl::unexpected<Outcome> noChannel(const SourceSpec& spec, int channels)
{
    return refused(ExitStatus::NoSource,
                   textFromSource(spec).toStdString() + ": there is no channel " +
                       std::to_string(spec.channel) + ", only " + std::to_string(channels) +
                       "; choose another --channel");
}

Stretch stretchOfDemo(const MeasureOptions& options)
{
    if (options.source.channel != 1) {
        return noChannel(options.source, 1);
    }
    const audio::DemoSettings settings = demoSettings(options.source, options.trimmerOhm);
    if (auto fits = checkRequest(options, settings.rate); !fits) {
        return tl::unexpected<Outcome>(std::move(fits.error()));
    }
    const double seconds = options.secondsS.value_or(MeasureOptions::kLiveSeconds);
    return SampleStretch{
        settings.rate, audio::renderDemo(settings, kDemoSettleS, framesOf(seconds, settings.rate))};
}

Stretch stretchOfCard(const MeasureOptions& options)
{
    const auto source = makeSource(options.source, nullptr);
    const auto format = source->open();
    if (!format) {
        return refused(ExitStatus::NoSource, format.error().detail);
    }
    if (options.source.channel > format->channels) {
        return noChannel(options.source, format->channels);
    }
    if (auto fits = checkRequest(options, format->rate); !fits) {
        return tl::unexpected<Outcome>(std::move(fits.error()));
    }
    const double seconds = options.secondsS.value_or(MeasureOptions::kLiveSeconds);
    auto samples = captureStretch(*source, *format, options.source.channel, seconds);
    if (!samples) {
        return refused(samples.error().isInterrupted ? ExitStatus::Unusable : ExitStatus::NoSource,
                       textFromSource(options.source).toStdString() + ": " +
                           samples.error().detail);
    }
    return SampleStretch{format->rate, std::move(*samples)};
}

Stretch stretchOf(const MeasureOptions& options)
{
    switch (options.source.kind) {
    case SourceKind::Demo:
        return stretchOfDemo(options);
    case SourceKind::Card:
        return stretchOfCard(options);
    case SourceKind::Take:
        break;
    }
    return stretchOfTake(options);
}

} // namespace

Outcome runMeasure(const MeasureOptions& options)
{
    const Stretch stretch = stretchOf(options);
    if (!stretch) {
        return stretch.error();
    }
    MeasuredReading measured{.source = options.source,
                             .rate = stretch->rate,
                             .settings = options.settings,
                             .reading =
                                 core::measure(stretch->samples, stretch->rate, options.settings)};
    measured.reading.startS = options.startS;
    Outcome outcome;
    outcome.output = options.asJson ? readingAsJson(measured) : readingAsTable(measured);
    outcome.status = measured.reading.status == core::ReadingStatus::Ok ? ExitStatus::Good
                                                                        : ExitStatus::Unusable;
    return outcome;
}

} // namespace sinewright::app
