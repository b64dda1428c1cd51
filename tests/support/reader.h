// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/measure/meter.h"

#include <vector>

namespace sinewright::tests {

/// Measures stretch after stretch with one meter, so that a test does not plan every transform anew.
class Reader
{
public:
    [[nodiscard]] core::Reading operator()(const std::vector<double>& samples,
                                           double rateHz = 48000.0,
                                           const core::MeasureSettings& settings = {})
    {
        return m_meter.measure(samples, {rateHz}, settings).reading;
    }

private:
    core::Meter m_meter;
};

} // namespace sinewright::tests
