// SPDX-License-Identifier: GPL-3.0-or-later
#include "app/source_spec.h"

#include "audio/card.h"
#include "audio/take.h"

#include <QFileInfo>

#include <filesystem>
#include <utility>

namespace sinewright::app {

namespace {

constexpr QLatin1StringView kDemoWord{"demo"};
constexpr QLatin1StringView kCardWord{"card"};
constexpr QLatin1StringView kCardPrefix{"card:"};
constexpr QLatin1StringView kHostSeparator{"::"};

/// Two channels are opened where there are two; a higher one is reached by opening that many.
int channelsToOpen(int wantedChannel)
{
    return wantedChannel > 2 ? wantedChannel : 0;
}

} // namespace

core::Result<SourceSpec> sourceFromText(const QString& text)
{
    if (text.isEmpty()) {
        return core::failure(core::ErrorCode::InvalidArgument,
                             "no source is named: give 'demo', 'card', 'card:NAME' or a file");
    }
    SourceSpec spec;
    if (text == kDemoWord) {
        return spec;
    }
    if (text == kCardWord || text.startsWith(kCardPrefix)) {
        spec.kind = ui::SourceKind::Card;
        spec.name = text.mid(kCardPrefix.size());
        if (const auto at = spec.name.indexOf(kHostSeparator); at >= 0) {
            spec.hostApi = spec.name.left(at);
            spec.name = spec.name.mid(at + kHostSeparator.size());
        }
        return spec;
    }
    spec.kind = ui::SourceKind::Take;
    spec.name = text;
    return spec;
}

QString textFromSource(const SourceSpec& spec)
{
    switch (spec.kind) {
    case ui::SourceKind::Demo:
        return kDemoWord;
    case ui::SourceKind::Card:
        if (!spec.hostApi.isEmpty()) {
            return kCardPrefix + spec.hostApi + kHostSeparator + spec.name;
        }
        return spec.name.isEmpty() ? QString(kCardWord) : QString(kCardPrefix + spec.name);
    case ui::SourceKind::Take:
        break;
    }
    return spec.name;
}

QString sourceLabel(const SourceSpec& spec)
{
    return spec.kind == ui::SourceKind::Take ? QFileInfo(spec.name).fileName()
                                             : textFromSource(spec);
}

audio::DemoSettings demoSettings(const SourceSpec& spec, double trimmerOhm)
{
    audio::DemoSettings settings;
    settings.rate = core::SampleRate{spec.rateHz > 0.0 ? spec.rateHz : kDemoRateHz};
    settings.trimmerOhm = trimmerOhm;
    return settings;
}

std::unique_ptr<audio::Source> makeSource(const SourceSpec& spec,
                                          std::shared_ptr<const audio::DemoTrimmer> trimmer)
{
    switch (spec.kind) {
    case ui::SourceKind::Demo: {
        const double startOhm = trimmer->ohm.load();
        return audio::makeDemoSource(demoSettings(spec, startOhm), std::move(trimmer));
    }
    case ui::SourceKind::Card:
        return audio::makeCardSource({.hostApi = spec.hostApi.toStdString(),
                                      .name = spec.name.toStdString(),
                                      .rateHz = spec.rateHz,
                                      .channels = channelsToOpen(spec.channel)});
    case ui::SourceKind::Take:
        break;
    }
    return audio::makeTakeSource(std::filesystem::path(spec.name.toStdString()));
}

} // namespace sinewright::app
