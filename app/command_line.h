// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "app/source_spec.h"
#include "core/measure/reading.h"
#include "core/result.h"
#include "ui/main_window.h"

#include <QSize>
#include <QString>
#include <QStringList>

#include <optional>
#include <variant>
#include <vector>

namespace sinewright::app {

/// `sinewright`: the window.
struct WindowOptions
{
    std::optional<SourceSpec> source; ///< none: the one of last time
};

/// `sinewright --picture FILE`: the window off screen, saved after a while.
struct PictureOptions
{
    QString file;
    SourceSpec source;
    double afterS = 8.0;   ///< [s] of signal
    QSize size{1280, 800}; ///< [logical pixels] of the window; the caption comes below it
    ui::ThemeName theme = ui::ThemeName::Paper;
    ui::Page page = ui::Page::Trim;
    int scale = 1; ///< 1 or 2
    std::vector<double>
        trimmerOhm; ///< demo: stops of the virtual trimmer, gone through evenly; empty: its own place
    bool reportsLoad = false; ///< also print what analysis and drawing cost
};

/// `sinewright measure SOURCE`: one full reading.
struct MeasureOptions
{
    SourceSpec source;
    bool asJson = false;
    double startS = 0.0; ///< [s]
    std::optional<double>
        secondsS; ///< [s] none: kTakeSeconds of a take at the most, kLiveSeconds of the others
    double trimmerOhm = 355.0; ///< demo: where the virtual trimmer stands
    core::MeasureSettings settings;

    static constexpr double kTakeSeconds = 60.0;
    static constexpr double kLiveSeconds = 4.0;
};

/// `sinewright cards`: the audio interfaces.
struct CardsOptions
{
    bool asJson = false;
};

/// `--help`, of one command or of the program.
struct HelpRequest
{
    enum class Topic { Program, Measure, Cards };
    Topic topic = Topic::Program;
};

/// `--version`.
struct VersionRequest
{};

using Invocation = std::variant<WindowOptions,
                                PictureOptions,
                                MeasureOptions,
                                CardsOptions,
                                HelpRequest,
                                VersionRequest>;

/// What the words of the command line ask for. Nothing is opened.
///
/// @param arguments  without the program's name.
/// @error InvalidArgument: one line that says which word is wrong, why, and where help is.
[[nodiscard]] core::Result<Invocation> parseCommandLine(const QStringList& arguments);

} // namespace sinewright::app
