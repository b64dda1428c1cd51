// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/measure/tone_blocks.h"

#include <algorithm>
#include <array>
#include <cassert>
#include <cmath>
#include <numbers>

#include <Eigen/Dense>

namespace sinewright::core {

namespace {

using Complex = std::complex<double>;
constexpr double kPi = std::numbers::pi;

/// The envelope within a block is a cubic through its values at Chebyshev's four points, [-1, 1] being the block.
constexpr Eigen::Index kCubic = 4;
constexpr std::array<double, kCubic> kNodes{
    -0.92387953251128674, -0.38268343236508977, 0.38268343236508977, 0.92387953251128674};

/// From values at the four points to coefficients of 1, v, v^2, v^3.
Eigen::Matrix4d cubicFromNodes()
{
    Eigen::Matrix4d powers;
    for (Eigen::Index row = 0; row < kCubic; ++row) {
        const double node = kNodes[static_cast<std::size_t>(row)];
        powers.row(row) << 1.0, node, node * node, node * node * node;
    }
    return powers.inverse();
}

/// exp(2 pi i turns), whole turns taken off first.
Complex unitPhasor(double turns)
{
    return std::polar(1.0, 2.0 * kPi * (turns - std::floor(turns)));
}

/// Sum of exp(2 pi i turns u) over the first `length` samples of a block whose full length is `full`.
Complex blockSum(double turns, std::size_t length, std::size_t full)
{
    const double count = static_cast<double>(length);
    const double narrow = std::sin(kPi * turns);
    const double sum = std::abs(narrow) < 1e-12 ? count * std::cos(kPi * turns * (count - 1.0))
                                                : std::sin(kPi * turns * count) / narrow;
    return sum * unitPhasor(turns * (count - static_cast<double>(full)) / 2.0);
}

/// How many blocks one matrix product takes: enough to keep it busy, few enough to stay in the cache.
constexpr std::size_t kBlocksAtOnce = 16;

using ConstBlockMap = Eigen::Map<const Eigen::MatrixXd>;
using BlockMap = Eigen::Map<Eigen::MatrixXd>;

} // namespace

/// Columns: cos and -sin of the fundamental times 1, v, v^2, v^3; cos and -sin of each harmonic; ones for DC. A
/// phasor's real and imaginary part are then the factors of a column pair.
struct ToneBlocks::Tables
{
    Eigen::MatrixXd columns;
    Eigen::Matrix4d cubic = cubicFromNodes();

    Tables(const BlockGrid& grid, double turnsPerSample, std::size_t orders)
        : columns(static_cast<Eigen::Index>(grid.length),
                  2 * kCubic + 2 * static_cast<Eigen::Index>(orders - 1) + 1)
    {
        const double middle = (static_cast<double>(grid.length) - 1.0) / 2.0;
        for (std::size_t n = 0; n < grid.length; ++n) {
            const double u = static_cast<double>(n) - middle;
            const double v = 2.0 * u / static_cast<double>(grid.length);
            const Complex turn = unitPhasor(turnsPerSample * u);
            const auto row = static_cast<Eigen::Index>(n);
            double power = 1.0;
            for (Eigen::Index p = 0; p < kCubic; ++p) {
                columns(row, 2 * p) = power * turn.real();
                columns(row, 2 * p + 1) = -power * turn.imag();
                power *= v;
            }
            Complex harmonic = turn;
            for (Eigen::Index column = 2 * kCubic; column + 1 < columns.cols(); column += 2) {
                harmonic *= turn;
                columns(row, column) = harmonic.real();
                columns(row, column + 1) = -harmonic.imag();
            }
            columns(row, columns.cols() - 1) = 1.0;
        }
    }
};

ToneBlocks::ToneBlocks(const ToneModel& model, std::size_t samples)
    : m_model(model)
    , m_grid(samples, model.periods)
    , m_tables(std::make_unique<Tables>(
          m_grid, model.periods / static_cast<double>(samples), model.phasors.size()))
{}

ToneBlocks::~ToneBlocks() = default;

/// What every other component adds to a block's sum against exp(-i w u): the same for all blocks of one length, but for
/// the component's phase.
struct ToneBlocks::Leaks
{
    double count = 0.0;
    Complex dc;
    Complex image;                 ///< of the fundamental, at minus its frequency
    std::vector<Complex> direct;   ///< of harmonics 2, 3, ..
    std::vector<Complex> mirrored; ///< of their images

    Leaks(const BlockGrid& grid, std::size_t length, double turns, std::size_t orders)
        : count(static_cast<double>(length))
        , dc(blockSum(-turns, length, grid.length))
        , image(blockSum(-2.0 * turns, length, grid.length))
    {
        for (std::size_t line = 1; line < orders; ++line) {
            const auto order = static_cast<double>(line + 1);
            direct.push_back(blockSum((order - 1.0) * turns, length, grid.length));
            mirrored.push_back(blockSum((-order - 1.0) * turns, length, grid.length));
        }
    }
};

std::vector<Complex> ToneBlocks::fundamentalPhasors(std::span<const double> samples) const
{
    assert(samples.size() == m_grid.samples);
    const double turns = m_model.periods / static_cast<double>(m_grid.samples);
    const Leaks full(m_grid, m_grid.length, turns, m_model.phasors.size());
    const Leaks last(m_grid, m_grid.lengthOf(m_grid.blocks - 1), turns, m_model.phasors.size());
    std::vector<Complex> phasors(m_grid.blocks);
    for (std::size_t block = 0; block < m_grid.blocks; ++block) {
        const Leaks& leaks = block + 1 < m_grid.blocks ? full : last;
        const auto rows = static_cast<Eigen::Index>(m_grid.lengthOf(block));
        const Eigen::Map<const Eigen::VectorXd> x(samples.data() + block * m_grid.length, rows);
        // Column 1 holds -sin, so that the sum comes out against exp(-i w u).
        Complex left(m_tables->columns.col(0).head(rows).dot(x),
                     m_tables->columns.col(1).head(rows).dot(x));
        left -= m_model.dc * leaks.dc;
        const Complex middle = unitPhasor(turns * m_grid.middleOf(block));
        Complex turn = middle;
        for (std::size_t line = 1; line < m_model.phasors.size(); ++line) {
            turn *= middle;
            const Complex phasor = m_model.phasors[line] * turn;
            left -= 0.5 * (phasor * leaks.direct[line - 1] +
                           std::conj(phasor) * leaks.mirrored[line - 1]);
        }
        // left = (V count + conj(V) image) / 2, solved for V.
        const Complex value = 2.0 * (leaks.count * left - leaks.image * std::conj(left)) /
                              (leaks.count * leaks.count - std::norm(leaks.image));
        phasors[block] = value * std::conj(middle);
    }
    return phasors;
}

void ToneBlocks::subtract(std::span<const double> samples,
                          const Envelope& envelope,
                          std::span<double> residual) const
{
    assert(samples.size() == m_grid.samples && residual.size() == samples.size());
    const double turns = m_model.periods / static_cast<double>(m_grid.samples);
    const double tauPerSample = 2.0 / static_cast<double>(m_grid.samples);
    const Eigen::MatrixXd& columns = m_tables->columns;
    Eigen::MatrixXd factors(columns.cols(), static_cast<Eigen::Index>(kBlocksAtOnce));
    const Complex reference = m_model.phasors[0];
    const auto factorsOf = [&](std::size_t block, Eigen::Index column) {
        const double middle = m_grid.middleOf(block);
        const Complex middleTurn = unitPhasor(turns * middle);
        Eigen::Matrix<double, kCubic, 2> values;
        for (Eigen::Index p = 0; p < kCubic; ++p) {
            const double u =
                kNodes[static_cast<std::size_t>(p)] * static_cast<double>(m_grid.length) / 2.0;
            const Complex value = envelope.at((middle + u) * tauPerSample) * middleTurn;
            values.row(p) << value.real(), value.imag();
        }
        const Eigen::Matrix<double, kCubic, 2> powers = m_tables->cubic * values;
        for (Eigen::Index p = 0; p < kCubic; ++p) {
            factors(2 * p, column) = powers(p, 0);
            factors(2 * p + 1, column) = powers(p, 1);
        }
        const Complex change = envelope.at(middle * tauPerSample) / reference;
        const double swell = std::abs(change);
        const Complex turned = swell > 0.0 ? change / swell : Complex(1.0);
        Complex follow = change * middleTurn;
        for (std::size_t line = 1; line < m_model.phasors.size(); ++line) {
            follow *= turned * middleTurn;
            const Complex phasor = m_model.phasors[line] * follow;
            const Eigen::Index row = 2 * kCubic + 2 * static_cast<Eigen::Index>(line - 1);
            factors(row, column) = phasor.real();
            factors(row + 1, column) = phasor.imag();
        }
        factors(columns.cols() - 1, column) = m_model.dc;
    };

    const std::size_t full = m_grid.samples / m_grid.length;
    for (std::size_t block = 0; block < m_grid.blocks;) {
        const std::size_t together = block < full ? std::min(kBlocksAtOnce, full - block) : 1;
        for (std::size_t b = 0; b < together; ++b) {
            factorsOf(block + b, static_cast<Eigen::Index>(b));
        }
        const auto rows = static_cast<Eigen::Index>(m_grid.lengthOf(block));
        const auto count = static_cast<Eigen::Index>(together);
        const std::size_t start = block * m_grid.length;
        BlockMap out(residual.data() + start, rows, count);
        out = ConstBlockMap(samples.data() + start, rows, count);
        out.noalias() -= columns.topRows(rows) * factors.leftCols(count);
        block += together;
    }
}

} // namespace sinewright::core
