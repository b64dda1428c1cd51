// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <algorithm>
#include <cassert>
#include <cstddef>
#include <span>
#include <vector>

namespace sinewright::core {

/// The newest samples, in one piece.
///
/// Twice the room that is asked for, so that moving the samples to the front costs at most one copy of each.
class SampleHistory final
{
public:
    explicit SampleHistory(std::size_t capacity) : m_capacity(capacity)
    {
        m_samples.reserve(2 * capacity);
    }

    void clear() { m_samples.clear(); }

    /// Appends samples; the oldest beyond the capacity are forgotten.
    void append(std::span<const double> samples)
    {
        const auto newest = samples.last(std::min(samples.size(), m_capacity));
        if (m_samples.size() + newest.size() > 2 * m_capacity) {
            const std::size_t kept = m_capacity - newest.size();
            m_samples.erase(m_samples.begin(), m_samples.end() - static_cast<std::ptrdiff_t>(kept));
        }
        m_samples.insert(m_samples.end(), newest.begin(), newest.end());
    }

    [[nodiscard]] std::size_t size() const { return std::min(m_samples.size(), m_capacity); }

    /// @param count  at most size().
    [[nodiscard]] std::span<const double> newest(std::size_t count) const
    {
        assert(count <= m_samples.size());
        return std::span(m_samples).last(count);
    }

private:
    std::size_t m_capacity;
    std::vector<double> m_samples;
};

} // namespace sinewright::core
