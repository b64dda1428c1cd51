// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/measure/envelope.h"
#include "core/measure/line_fit.h"

#include <complex>
#include <cstddef>
#include <memory>
#include <span>
#include <vector>

namespace sinewright::core {

/// A fitted tone laid over its stretch block by block, so that each sample costs a few multiplications and no sine.
///
/// Sines and cosines of one block are tabulated once; every other block needs them turned by a phase of its own,
/// which is a matrix product. The phase is computed afresh for each block, so that no error grows along a take.
class ToneBlocks final
{
public:
    ToneBlocks(const ToneModel& model, std::size_t samples);
    ~ToneBlocks();
    ToneBlocks(const ToneBlocks&) = delete;
    ToneBlocks& operator=(const ToneBlocks&) = delete;

    [[nodiscard]] const BlockGrid& grid() const { return m_grid; }

    /// Amplitude and phase of the fundamental in each block against the model's frequency; DC, harmonics and the
    /// fundamental's own image taken out exactly.
    [[nodiscard]] std::vector<std::complex<double>>
    fundamentalPhasors(std::span<const double> samples) const;

    /// Writes signal minus DC, harmonics and fundamental into `residual`, which is as long as `samples`. The
    /// fundamental follows the envelope, the harmonics turn and swell with it.
    void subtract(std::span<const double> samples,
                  const Envelope& envelope,
                  std::span<double> residual) const;

private:
    struct Tables;
    struct Leaks;

    ToneModel m_model;
    BlockGrid m_grid;
    std::unique_ptr<Tables> m_tables;
};

} // namespace sinewright::core
