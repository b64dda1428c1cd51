// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/units.h"

#include <cmath>
#include <numbers>

namespace sinewright::core {

double decibelsFromRatio(double ratio)
{
    return 20.0 * std::log10(ratio);
}

double ratioFromDecibels(double decibels)
{
    return std::pow(10.0, decibels / 20.0);
}

double dbfsFromRms(double rms)
{
    return decibelsFromRatio(rms * std::numbers::sqrt2);
}

double rmsFromDbfs(double dbfs)
{
    return ratioFromDecibels(dbfs) / std::numbers::sqrt2;
}

} // namespace sinewright::core
