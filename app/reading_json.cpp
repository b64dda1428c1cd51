// SPDX-License-Identifier: GPL-3.0-or-later
#include "app/json_writer.h"
#include "app/reading_report.h"
#include "app/words.h"
#include "core/units.h"

#include <algorithm>
#include <optional>

namespace sinewright::app {

using ui::SourceKind;

namespace {

constexpr double kPercent = 100.0;

constexpr Words<SourceKind, 3> kKindWords{
    {{"demo", SourceKind::Demo}, {"card", SourceKind::Card}, {"take", SourceKind::Take}}};

constexpr Words<core::ReadingStatus, 4> kStatusWords{{{"ok", core::ReadingStatus::Ok},
                                                      {"no-tone", core::ReadingStatus::NoTone},
                                                      {"too-short", core::ReadingStatus::TooShort},
                                                      {"overload", core::ReadingStatus::Overload}}};

constexpr Words<core::Warning, 7> kWarningWords{
    {{"input-overload", core::Warning::InputOverload},
     {"harmonics-above-band", core::Warning::HarmonicsAboveBand},
     {"unsteady-level", core::Warning::UnsteadyLevel},
     {"unsteady-frequency", core::Warning::UnsteadyFrequency},
     {"mains-hum", core::Warning::MainsHum},
     {"dc-offset", core::Warning::DcOffset},
     {"card-limited", core::Warning::CardLimited}}};

std::optional<double> percent(std::optional<double> ratio)
{
    return ratio ? std::optional(*ratio * kPercent) : std::nullopt;
}

/// Of a ratio of zero there is no figure in decibels: the writer makes null of minus infinity.
std::optional<double> decibels(std::optional<double> ratio)
{
    return ratio ? std::optional(core::decibelsFromRatio(*ratio)) : std::nullopt;
}

void writeSource(JsonWriter& json, const MeasuredReading& measured)
{
    const std::string name = measured.source.kind == SourceKind::Take
                                 ? measured.source.name.toStdString()
                                 : textFromSource(measured.source).toStdString();
    json.key("source").beginObject();
    json.key("kind").text(wordOf(kKindWords, measured.source.kind));
    json.key("name").text(name);
    json.key("sampleRateHz").number(measured.rate.hz);
    json.key("channel").wholeNumber(measured.source.channel);
    json.key("startS").number(measured.reading.startS);
    json.key("lengthS").number(measured.reading.lengthS);
    json.endObject();
}

void writeSettings(JsonWriter& json, const MeasuredReading& measured)
{
    const core::MeasureSettings& settings = measured.settings;
    json.key("settings").beginObject();
    json.key("bandHz").beginArray().number(settings.band.lowHz);
    json.number(std::min(settings.band.highHz, measured.rate.nyquist().value)).endArray();
    json.key("harmonicCount").wholeNumber(settings.harmonicCount);
    json.key("weighting").text(wordOf(kWeightingWords, settings.weighting));
    json.key("fullScaleVrms").number(settings.fullScaleVrms);
    json.endObject();
}

void writeFigures(JsonWriter& json, const core::Reading& reading)
{
    json.key("frequencyHz").number(reading.frequencyHz);
    json.key("frequencyStdHz").number(reading.frequencyStdHz);
    json.key("levelDbfs").number(reading.levelDbfs);
    json.key("levelVrms").number(reading.levelVrms);
    json.key("dcFs").number(reading.dcFs);
    json.key("thdPercent").number(percent(reading.thdRatio));
    json.key("thdDb").number(decibels(reading.thdRatio));
    json.key("thdRPercent").number(percent(reading.thdRRatio));
    json.key("thdnPercent").number(percent(reading.thdnRatio));
    json.key("thdnDb").number(decibels(reading.thdnRatio));
    json.key("sinadDb").number(reading.sinadDb);
    json.key("snrDb").number(reading.snrDb);
    json.key("noiseDbfs").number(reading.noiseDbfs);
}

void writeHarmonics(JsonWriter& json, const core::Reading& reading)
{
    json.key("harmonics").beginArray();
    for (const core::HarmonicReading& harmonic : reading.harmonics) {
        json.beginObject();
        json.key("order").wholeNumber(harmonic.order);
        json.key("frequencyHz").number(harmonic.frequencyHz);
        json.key("dbc").number(decibels(harmonic.ratio));
        json.key("percent").number(percent(harmonic.ratio));
        json.key("phaseDeg").number(harmonic.phaseDeg);
        json.key("inBand").boolean(harmonic.inBand);
        json.endObject();
    }
    json.endArray();
}

} // namespace

std::string readingAsJson(const MeasuredReading& measured)
{
    JsonWriter json;
    json.beginObject();
    json.key("schema").text("sinewright.reading/1");
    writeSource(json, measured);
    writeSettings(json, measured);
    json.key("status").text(wordOf(kStatusWords, measured.reading.status));
    json.key("warnings").beginArray();
    for (const core::Warning warning : measured.reading.warnings) {
        json.text(wordOf(kWarningWords, warning));
    }
    json.endArray();
    writeFigures(json, measured.reading);
    writeHarmonics(json, measured.reading);
    json.key("mainsHumDbc").number(measured.reading.mainsHumDbc);
    json.endObject();
    return json.line() + '\n';
}

} // namespace sinewright::app
