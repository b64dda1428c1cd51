// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/reading_choice.h"

#include <algorithm>

namespace sinewright::ui {

bool hasWarning(const core::Reading& reading, core::Warning warning)
{
    return std::find(reading.warnings.begin(), reading.warnings.end(), warning) !=
           reading.warnings.end();
}

ShownReading shownReading(const core::Frame& frame)
{
    const bool isQuickGood = frame.quick.status == core::ReadingStatus::Ok;
    if (!frame.full || frame.full->status != core::ReadingStatus::Ok ||
        hasWarning(*frame.full, core::Warning::UnsteadyLevel) ||
        hasWarning(*frame.full, core::Warning::UnsteadyFrequency)) {
        return {&frame.quick, false};
    }
    // A quick reading that found no tone while the full one still holds the old one: the tone is gone.
    return isQuickGood ? ShownReading{&*frame.full, true} : ShownReading{&frame.quick, false};
}

bool isOverloaded(const core::Frame& frame)
{
    return frame.quick.status == core::ReadingStatus::Overload ||
           hasWarning(frame.quick, core::Warning::InputOverload);
}

} // namespace sinewright::ui
