// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/measure/frame.h"
#include "core/measure/reading.h"
#include "core/units.h"

#include <cstddef>
#include <memory>
#include <span>
#include <vector>

namespace sinewright::core {

class StretchWorkspace;

/// A reading and, when asked for, the cycle that goes with it.
struct Measurement
{
    Reading reading;
    std::shared_ptr<const CycleView> cycle; ///< null without a tone
};

/// measure() with its plans, windows and buffers kept from one stretch to the next.
///
/// What it returns depends on the samples alone, not on what it measured before.
///
/// @thread  one; not synchronised.
class Meter final
{
public:
    Meter();
    ~Meter();
    Meter(const Meter&) = delete;
    Meter& operator=(const Meter&) = delete;

    /// @param samples, rate, settings  as for measure().
    [[nodiscard]] Measurement measure(std::span<const double> samples,
                                      SampleRate rate,
                                      const MeasureSettings& settings,
                                      bool withCycle = false);

private:
    [[nodiscard]] StretchWorkspace& workspaceFor(std::size_t samples);

    std::vector<std::unique_ptr<StretchWorkspace>> m_workspaces; ///< the one used last stands last
};

} // namespace sinewright::core
