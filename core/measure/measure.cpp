// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/measure/measure.h"

#include "core/measure/meter.h"

namespace sinewright::core {

Reading measure(std::span<const double> samples, SampleRate rate, const MeasureSettings& settings)
{
    return Meter().measure(samples, rate, settings).reading;
}

} // namespace sinewright::core
