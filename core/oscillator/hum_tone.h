// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <cmath>
#include <numbers>

namespace sinewright::core {

/// A sine made sample by sample by turning a pointer, for hum.
class HumTone final
{
public:
    HumTone(double amplitude, double frequencyHz, double rateHz)
        : m_amplitude(amplitude)
        , m_turnCos(std::cos(2.0 * std::numbers::pi * frequencyHz / rateHz))
        , m_turnSin(std::sin(2.0 * std::numbers::pi * frequencyHz / rateHz))
    {}

    double next() noexcept
    {
        const double value = m_amplitude * m_sin;
        const double turned = m_cos * m_turnCos - m_sin * m_turnSin;
        m_sin = m_sin * m_turnCos + m_cos * m_turnSin;
        m_cos = turned;
        // One step of Newton's square root holds the pointer's length against rounding over days.
        const double keep = 1.5 - 0.5 * (m_cos * m_cos + m_sin * m_sin);
        m_cos *= keep;
        m_sin *= keep;
        return value;
    }

private:
    double m_amplitude;
    double m_turnCos;
    double m_turnSin;
    double m_cos = 1.0;
    double m_sin = 0.0;
};

} // namespace sinewright::core
