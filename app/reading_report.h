// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "app/source_spec.h"
#include "core/measure/reading.h"
#include "core/units.h"

#include <string>

namespace sinewright::app {

/// A reading with where it came from: all that a report of it needs.
struct MeasuredReading
{
    SourceSpec source{};
    core::SampleRate rate{};
    core::MeasureSettings settings{};
    core::Reading reading{};
};

/// One JSON object, schema "sinewright.reading/1", on one line with its line end.
///
/// A figure that cannot be had is null.
[[nodiscard]] std::string readingAsJson(const MeasuredReading& measured);

/// The same as an aligned table for people, warnings as sentences. Plain ASCII but for names; C locale.
[[nodiscard]] std::string readingAsTable(const MeasuredReading& measured);

/// One line: frequency, level, THD and THD+N, or why there is no reading.
[[nodiscard]] std::string readingAsLine(const core::Reading& reading);

} // namespace sinewright::app
