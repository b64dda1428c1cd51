// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "audio/demo.h"
#include "audio/source.h"
#include "core/result.h"
#include "ui/bench_state.h"

#include <QString>

#include <memory>

namespace sinewright::app {

/// A source as a person names it, and what is wanted of it.
struct SourceSpec
{
    ui::SourceKind kind = ui::SourceKind::Demo;
    QString
        name{}; ///< card: its name or part of it, empty for the default; take: the file; demo: empty
    QString hostApi{};   ///< card: only among this host API's; empty: any
    double rateHz = 0.0; ///< 0: the source's own
    int channel = 1;     ///< from 1
    friend bool operator==(const SourceSpec&, const SourceSpec&) = default;
};

/// Rates the demo oscillator can be run at [Hz]; also what audio interfaces commonly offer.
inline constexpr double kDemoLowestRateHz = 44100.0;
inline constexpr double kDemoHighestRateHz = 192000.0;
inline constexpr double kDemoRateHz = 96000.0; ///< unless another is asked for

/// Reads `demo`, `card`, `card:NAME`, `card:HOST::NAME` or a file's path; rate and channel keep their defaults.
///
/// A file called "demo" or "card" is meant by "./demo".
/// @error InvalidArgument for empty text.
[[nodiscard]] core::Result<SourceSpec> sourceFromText(const QString& text);

/// What sourceFromText() would read as this source.
[[nodiscard]] QString textFromSource(const SourceSpec& spec);

/// What the source is called in a line for people: the file's name without its folder, the card's name, "demo".
[[nodiscard]] QString sourceLabel(const SourceSpec& spec);

/// The demo's settings for this source, with the trimmer where it is told to start [ohm].
[[nodiscard]] audio::DemoSettings demoSettings(const SourceSpec& spec, double trimmerOhm);

/// The source itself, not yet open. `trimmer` is the knob of a demo and ignored by the others.
[[nodiscard]] std::unique_ptr<audio::Source>
makeSource(const SourceSpec& spec, std::shared_ptr<const audio::DemoTrimmer> trimmer);

} // namespace sinewright::app
