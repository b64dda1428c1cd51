// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "app/command_line.h"
#include "app/outcome.h"

namespace sinewright::app {

/// One full reading of a source. Needs no display.
[[nodiscard]] Outcome runMeasure(const MeasureOptions& options);

/// The audio interfaces and what they can do. Needs no display.
[[nodiscard]] Outcome runCards(const CardsOptions& options);

/// The text of `--help`.
[[nodiscard]] Outcome runHelp(const HelpRequest& request);

[[nodiscard]] Outcome runVersion();

} // namespace sinewright::app
