// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/measure/envelope.h"

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

constexpr std::size_t kWantedBlocks = 64;
constexpr std::size_t kLongestUsualBlock = 1024; ///< its tables stay in the cache
constexpr std::size_t kGroups =
    16; ///< for unwrapping the phase: long enough to stand out of the noise

/// Legendre polynomials of degrees 0 .. out.size() - 1.
void legendre(double tau, std::span<double> out)
{
    out[0] = 1.0;
    if (out.size() > 1) {
        out[1] = tau;
    }
    for (std::size_t n = 2; n < out.size(); ++n) {
        const auto order = static_cast<double>(n);
        out[n] = ((2.0 * order - 1.0) * tau * out[n - 1] - (order - 1.0) * out[n - 2]) / order;
    }
}

struct Group
{
    Complex sum;
    double weight = 0.0;
    double moment = 0.0; ///< weight times tau
};

/// Blocks gathered into at most `count` groups of neighbours.
std::vector<Group>
gather(const BlockGrid& grid, std::span<const Complex> blockPhasors, std::size_t count)
{
    std::vector<Group> groups(std::min(count, grid.blocks));
    for (std::size_t block = 0; block < grid.blocks; ++block) {
        Group& group = groups[block * groups.size() / grid.blocks];
        const auto weight = static_cast<double>(grid.lengthOf(block));
        group.sum += weight * blockPhasors[block];
        group.weight += weight;
        group.moment += weight * 2.0 * grid.centroidOf(block) / static_cast<double>(grid.samples);
    }
    return groups;
}

} // namespace

namespace {

std::size_t blockLength(std::size_t samples, double periods)
{
    const double period = static_cast<double>(samples) / periods;
    const std::size_t wanted =
        std::min(kLongestUsualBlock, (samples + kWantedBlocks - 1) / kWantedBlocks);
    const std::size_t length = std::max(static_cast<std::size_t>(std::ceil(period)), wanted);
    // A last block much shorter than the others says little: make them all a little longer instead.
    const std::size_t whole = samples / length;
    const std::size_t rest = samples % length;
    return rest > 0 && rest < length / 2 && whole > 0 ? (samples + whole - 1) / whole : length;
}

} // namespace

BlockGrid::BlockGrid(std::size_t stretchSamples, double periods)
    : samples(stretchSamples)
    , length(blockLength(stretchSamples, periods))
    , blocks((stretchSamples + length - 1) / length)
{}

std::size_t BlockGrid::lengthOf(std::size_t block) const
{
    return std::min(length, samples - block * length);
}

double BlockGrid::middleOf(std::size_t block) const
{
    return static_cast<double>(block * length) +
           (static_cast<double>(length) - static_cast<double>(samples)) / 2.0;
}

double BlockGrid::centroidOf(std::size_t block) const
{
    return middleOf(block) +
           (static_cast<double>(lengthOf(block)) - static_cast<double>(length)) / 2.0;
}

Envelope::Envelope(const BlockGrid& grid,
                   std::span<const Complex> blockPhasors,
                   double periods,
                   int degree)
    : m_legendre(static_cast<std::size_t>(degree) + 1)
{
    assert(degree >= 0 && static_cast<std::size_t>(degree) < grid.blocks);
    fitCarrier(grid, blockPhasors);
    fitPolynomial(grid, blockPhasors);
    readFigures(periods);
}

void Envelope::fitCarrier(const BlockGrid& grid, std::span<const Complex> blockPhasors)
{
    const auto groups = gather(grid, blockPhasors, kGroups);
    // Phases from the middle outwards, each within half a turn of its inner neighbour.
    std::vector<double> phases(groups.size());
    const std::size_t middle = groups.size() / 2;
    phases[middle] = std::arg(groups[middle].sum);
    for (std::size_t g = middle + 1; g < groups.size(); ++g) {
        phases[g] = phases[g - 1] + std::arg(groups[g].sum * std::conj(groups[g - 1].sum));
    }
    for (std::size_t g = middle; g > 0; --g) {
        phases[g - 1] = phases[g] + std::arg(groups[g - 1].sum * std::conj(groups[g].sum));
    }
    Eigen::Matrix3d normal = Eigen::Matrix3d::Zero();
    Eigen::Vector3d right = Eigen::Vector3d::Zero();
    for (std::size_t g = 0; g < groups.size(); ++g) {
        const double tau = groups[g].moment / groups[g].weight;
        const Eigen::Vector3d basis(1.0, tau, groups.size() > 3 ? tau * tau : 0.0);
        normal += groups[g].weight * basis * basis.transpose();
        right += groups[g].weight * basis * phases[g];
    }
    if (groups.size() <= 3) {
        normal(2, 2) = 1.0; // no parabola through so few
    }
    const Eigen::Vector3d fit = normal.ldlt().solve(right);
    m_phase = fit[0];
    m_turn = fit[1];
    m_bend = fit[2];
}

void Envelope::fitPolynomial(const BlockGrid& grid, std::span<const Complex> blockPhasors)
{
    const auto size = static_cast<Eigen::Index>(m_legendre.size());
    Eigen::MatrixXd normal = Eigen::MatrixXd::Zero(size, size);
    Eigen::MatrixX2d right = Eigen::MatrixX2d::Zero(size, 2);
    std::vector<double> basis(m_legendre.size());
    const Eigen::Map<const Eigen::VectorXd> column(basis.data(), size);
    for (std::size_t block = 0; block < grid.blocks; ++block) {
        const double tau = 2.0 * grid.centroidOf(block) / static_cast<double>(grid.samples);
        const auto weight = static_cast<double>(grid.lengthOf(block));
        // A phasor that turns within its block is seen shorter than it is, by sin(x) / x, and one
        // whose turning changes is seen ahead by the mean of its parabola.
        const double share = weight / static_cast<double>(grid.samples);
        const double halfTurn = (m_turn + 2.0 * tau * m_bend) * share;
        const double shrink = std::abs(halfTurn) < 1e-4 ? 1.0 : std::sin(halfTurn) / halfTurn;
        const double phase = m_phase + tau * (m_turn + tau * m_bend) + m_bend * share * share / 3.0;
        const Complex turned = blockPhasors[block] * std::polar(1.0, -phase) / shrink;
        legendre(tau, basis);
        normal += weight * column * column.transpose();
        right.col(0) += weight * turned.real() * column;
        right.col(1) += weight * turned.imag() * column;
    }
    const Eigen::MatrixX2d fit = normal.ldlt().solve(right);
    for (Eigen::Index n = 0; n < size; ++n) {
        m_legendre[static_cast<std::size_t>(n)] = {fit(n, 0), fit(n, 1)};
    }
}

Complex Envelope::at(double tau) const
{
    std::array<double, 8> basis{};
    assert(m_legendre.size() <= basis.size());
    legendre(tau, std::span(basis).first(m_legendre.size()));
    Complex sum;
    for (std::size_t n = 0; n < m_legendre.size(); ++n) {
        sum += m_legendre[n] * basis[n];
    }
    return sum * std::polar(1.0, m_phase + tau * (m_turn + tau * m_bend));
}

void Envelope::readFigures(double carrierPeriods)
{
    const Complex mean = m_legendre[0];
    m_amplitude = std::abs(mean);
    const auto relative = [&](std::size_t n) {
        return n < m_legendre.size() ? m_legendre[n] / mean : Complex{};
    };
    // tau runs over 2 while a stretch runs over 2 pi periods: a turn of 1 rad a tau is 1 / pi periods a stretch.
    m_periods = carrierPeriods + (m_turn + relative(1).imag()) / kPi;
    // tau^2 is (2 P2 + 1) / 3, so that P2's coefficient counts for 3/2 tau^2; the slope changes by 4 times the bend.
    m_periodsChange = 4.0 * (m_bend + 1.5 * relative(2).imag()) / kPi;
    const auto level = [&](double tau) {
        return relative(1).real() * tau + relative(2).real() * (3.0 * tau * tau - 1.0) / 2.0;
    };
    double lowest = std::min(level(-1.0), level(1.0));
    double highest = std::max(level(-1.0), level(1.0));
    if (relative(2).real() != 0.0) {
        const double turningPoint =
            std::clamp(-relative(1).real() / (3.0 * relative(2).real()), -1.0, 1.0);
        lowest = std::min(lowest, level(turningPoint));
        highest = std::max(highest, level(turningPoint));
    }
    m_levelChange = highest - lowest;
}

bool isInEachQuarter(const BlockGrid& grid, std::span<const Complex> blockPhasors)
{
    constexpr double kLeastShare = 0.25;
    constexpr std::size_t kQuarters = 4;
    const auto eighths = gather(grid, blockPhasors, 2 * kQuarters);
    if (eighths.size() < kQuarters) {
        return false;
    }
    double total = 0.0;
    double weight = 0.0;
    for (const Group& eighth : eighths) {
        total += std::abs(eighth.sum);
        weight += eighth.weight;
    }
    const double least = kLeastShare * total / weight;
    if (eighths.size() < 2 * kQuarters) {
        return std::ranges::all_of(eighths, [least](const Group& part) {
            return std::abs(part.sum) >= least * part.weight;
        });
    }
    for (std::size_t quarter = 0; quarter < kQuarters; ++quarter) {
        const Group& early = eighths[2 * quarter];
        const Group& late = eighths[2 * quarter + 1];
        // Half a bin of the quarter is half a turn a quarter: a quarter turn from one half to the other.
        const bool holdsFrequency =
            std::abs(std::arg(late.sum * std::conj(early.sum))) <= kPi / 2.0;
        if (!holdsFrequency ||
            std::abs(early.sum + late.sum) < least * (early.weight + late.weight)) {
            return false;
        }
    }
    return true;
}

} // namespace sinewright::core
