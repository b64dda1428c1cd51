// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <cstddef>
#include <span>
#include <vector>

namespace sinewright::core {

/// Takes every `factor`th sample behind a low-pass, as a converter does.
///
/// Flat up to 0.45 of the output rate, -110 dB from 0.55 on. A factor of 1 passes samples through.
///
/// @thread one.   @realtime next() neither allocates nor locks.
/// @source Sinc under a Kaiser window: Kaiser 1974, from memory.
class Decimator final
{
public:
    /// @param factor  1 and up.
    explicit Decimator(std::size_t factor);

    /// One output sample from the next `factor` input samples.
    [[nodiscard]] double next(std::span<const double> input) noexcept;

    /// Input samples that shape one output sample; after as many a start from zero is forgotten.
    [[nodiscard]] std::size_t length() const noexcept { return m_taps.size(); }

private:
    std::vector<double> m_taps; // symmetric
    std::vector<double>
        m_history; // the latest inputs twice over, so that any stretch of them lies in one piece
    std::size_t m_at = 0; // where the next input goes, 0 .. length() - 1
};

} // namespace sinewright::core
