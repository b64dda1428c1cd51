// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/measure/line_fit.h"

#include <algorithm>
#include <cmath>
#include <numbers>

#include <Eigen/Dense>

namespace sinewright::core {

namespace {

using Complex = std::complex<double>;
constexpr double kPi = std::numbers::pi;

/// A window of so many terms leaks less than -200 dB beyond its main lobe: lines need no account of each other.
constexpr double kClearLobeBins = 8.0;

/// A harmonic closer than this to half the rate cannot be told from its own image.
constexpr double kClosestToNyquistBins = 0.5;

constexpr int kMostSweeps = 60;
constexpr double kSettledBins = 1e-10;  ///< frequency steps below it change no figure
constexpr double kSettledRatio = 1e-12; ///< amplitude steps, relative to the fundamental

struct Rows
{
    std::size_t first = 0;
    std::size_t end = 0;
};

Rows rowsAround(const StretchTransform& transform, double bins, double reach)
{
    const double per = transform.binsPerIndex();
    const double first = std::max(0.0, std::ceil((bins - reach) / per));
    const double end = std::clamp(
        std::floor((bins + reach) / per) + 1.0, first, static_cast<double>(transform.size()));
    return {static_cast<std::size_t>(first), static_cast<std::size_t>(end)};
}

/// What a line of unit cosine and of unit sine amplitude puts at x: the first is real, the second imaginary.
struct LineShape
{
    double cosine = 0.0;
    double sine = 0.0;
};

/// True when the line's image at minus its frequency (or its alias beyond half the rate) reaches x.
bool imageReaches(const StretchTransform& transform, double x, double bins)
{
    const double reach = transform.lobeBins();
    return reach < kClearLobeBins || x + bins < reach ||
           x + bins > static_cast<double>(transform.samples()) - reach;
}

LineShape lineShape(const StretchTransform& transform, double x, double bins)
{
    const double direct = transform.kernel().value(x - bins) / 2.0;
    const double image =
        imageReaches(transform, x, bins) ? transform.kernel().value(x + bins) / 2.0 : 0.0;
    return {direct + image, direct - image};
}

/// The fundamental's change with its own frequency (a bin) and with its level slope (1 over the stretch).
struct FundamentalSlopes
{
    Complex byPeriods;
    Complex byLevelSlope;
};

FundamentalSlopes
fundamentalSlopes(const StretchTransform& transform, double x, double bins, Complex phasor)
{
    const double direct = transform.kernel().slope(x - bins) / 2.0;
    const double image =
        imageReaches(transform, x, bins) ? transform.kernel().slope(x + bins) / 2.0 : 0.0;
    const Complex sum = phasor * direct + std::conj(phasor) * image;
    return {-phasor * direct + std::conj(phasor) * image, Complex(0.0, 1.0) * sum / (2.0 * kPi)};
}

/// Least squares of one line's cosine and sine amplitude to what valueAt(index) leaves in its lobe.
template <typename ValueAt>
Complex projectOnLine(const StretchTransform& transform, double bins, double reach, ValueAt valueAt)
{
    double cosine = 0.0;
    double sine = 0.0;
    double cosineNorm = 0.0;
    double sineNorm = 0.0;
    const auto rows = rowsAround(transform, bins, reach);
    for (std::size_t index = rows.first; index < rows.end; ++index) {
        const auto shape = lineShape(transform, transform.position(index), bins);
        const Complex value = valueAt(index);
        cosine += shape.cosine * value.real();
        sine += shape.sine * value.imag();
        cosineNorm += shape.cosine * shape.cosine;
        sineNorm += shape.sine * shape.sine;
    }
    return {cosineNorm > 0.0 ? cosine / cosineNorm : 0.0, sineNorm > 0.0 ? sine / sineNorm : 0.0};
}

class ToneFitter
{
public:
    ToneFitter(const StretchTransform& transform, double periods, int highestOrder)
        : m_transform(transform)
        , m_coupled(transform.lobeBins() < kClearLobeBins)
    {
        m_model.periods = periods;
        const double nyquist = static_cast<double>(transform.samples()) / 2.0;
        const auto below =
            static_cast<int>(std::floor((nyquist - kClosestToNyquistBins) / periods));
        m_model.phasors.assign(static_cast<std::size_t>(std::clamp(below, 1, highestOrder)),
                               Complex{});
    }

    ToneModel fit()
    {
        updateLine(0);
        for (int sweep = 0; sweep < kMostSweeps; ++sweep) {
            m_largestStep = 0.0;
            const double moved = refineFundamental();
            if (m_coupled) {
                updateOthers();
            }
            if (std::abs(moved) < kSettledBins &&
                m_largestStep < kSettledRatio * std::abs(m_model.phasors[0])) {
                break;
            }
        }
        if (!m_coupled) {
            updateOthers();
        }
        return m_model;
    }

private:
    /// The whole model at x, or the fundamental alone when the lines stand clear of each other.
    [[nodiscard]] Complex modelAt(double x) const
    {
        Complex sum = lineAt(x, 0);
        const auto slopes = fundamentalSlopes(m_transform, x, m_model.periods, m_model.phasors[0]);
        sum += m_model.levelSlope * slopes.byLevelSlope;
        if (m_coupled) {
            sum += m_model.dc * m_transform.kernel().value(x);
            for (std::size_t line = 1; line < m_model.phasors.size(); ++line) {
                sum += lineAt(x, line);
            }
        }
        return sum;
    }

    [[nodiscard]] Complex lineAt(double x, std::size_t line) const
    {
        const auto shape = lineShape(m_transform, x, binsOf(line));
        const Complex phasor = m_model.phasors[line];
        return {phasor.real() * shape.cosine, phasor.imag() * shape.sine};
    }

    [[nodiscard]] double binsOf(std::size_t line) const
    {
        return m_model.periods * static_cast<double>(line + 1);
    }

    /// What is still to be explained at a bin.
    [[nodiscard]] Complex leftAt(std::size_t index) const
    {
        return m_transform.value(index) - modelAt(m_transform.position(index));
    }

    void updateLine(std::size_t line)
    {
        Complex& phasor = m_model.phasors[line];
        if (m_coupled) {
            const Complex step = projectOnLine(m_transform,
                                               binsOf(line),
                                               m_transform.lobeBins(),
                                               [this](std::size_t index) { return leftAt(index); });
            phasor += step;
            m_largestStep = std::max(m_largestStep, std::abs(step));
        } else {
            phasor = linePhasor(m_transform, binsOf(line), m_transform.lobeBins());
        }
    }

    void updateOthers()
    {
        // DC is a line at 0: its lobe overlaps its image, so that the projection's cosine part is what is wanted.
        const Complex step =
            projectOnLine(m_transform, 0.0, m_transform.lobeBins(), [this](std::size_t index) {
                return m_coupled ? leftAt(index) : m_transform.value(index);
            });
        m_model.dc += step.real();
        m_largestStep = std::max(m_largestStep, std::abs(step));
        for (std::size_t line = 1; line < m_model.phasors.size(); ++line) {
            updateLine(line);
        }
    }

    /// One Gauss-Newton step of the fundamental's amplitude, phase, frequency and level slope; returns the move in
    /// bins.
    double refineFundamental()
    {
        Eigen::Matrix4d normal = Eigen::Matrix4d::Zero();
        Eigen::Vector4d right = Eigen::Vector4d::Zero();
        const Complex phasor = m_model.phasors[0];
        const double size = std::abs(phasor);
        if (!(size > 0.0)) {
            return 0.0;
        }
        const auto rows = rowsAround(m_transform, m_model.periods, m_transform.lobeBins());
        for (std::size_t index = rows.first; index < rows.end; ++index) {
            const double x = m_transform.position(index);
            const auto shape = lineShape(m_transform, x, m_model.periods);
            const auto slopes = fundamentalSlopes(m_transform, x, m_model.periods, phasor / size);
            const Eigen::Vector4d real(
                shape.cosine, 0.0, slopes.byPeriods.real(), slopes.byLevelSlope.real());
            const Eigen::Vector4d imag(
                0.0, shape.sine, slopes.byPeriods.imag(), slopes.byLevelSlope.imag());
            const Complex left = leftAt(index);
            normal += real * real.transpose() + imag * imag.transpose();
            right += real * left.real() + imag * left.imag();
        }
        const Eigen::Vector4d step = normal.ldlt().solve(right);
        if (!step.allFinite()) {
            return 0.0;
        }
        // The fit is only good near its start: a longer stride than half a bin is a guess.
        const double moved = std::clamp(step[2] / size, -0.5, 0.5);
        m_model.phasors[0] += Complex(step[0], step[1]);
        m_model.periods = std::max(m_model.periods + moved, 0.5);
        m_model.levelSlope = std::clamp(m_model.levelSlope + step[3] / size, -2.0, 2.0);
        m_largestStep = std::max(m_largestStep, std::hypot(step[0], step[1]));
        return moved;
    }

    const StretchTransform& m_transform;
    bool m_coupled;
    ToneModel m_model;
    double m_largestStep = 0.0;
};

} // namespace

StretchTransform::StretchTransform(const RealFourier& transform,
                                   const CosineWindow& window,
                                   std::size_t samples)
    : m_transform(transform.output())
    , m_powers(transform.powers())
    , m_kernel(window, samples)
    , m_binsPerIndex(static_cast<double>(samples) / static_cast<double>(transform.count()))
    , m_lobeBins(static_cast<double>(window.terms.size()))
{}

Complex StretchTransform::value(std::size_t index) const
{
    // Moves the origin of time from the first sample to the middle, (N - 1) / 2 later.
    const double turns = position(index) * (1.0 - 1.0 / static_cast<double>(samples())) / 2.0;
    return m_transform[index] * std::polar(1.0, 2.0 * kPi * (turns - std::floor(turns)));
}

ToneModel fitTone(const StretchTransform& transform, double periods, int highestOrder)
{
    return ToneFitter(transform, periods, highestOrder).fit();
}

Complex linePhasor(const StretchTransform& transform, double bins, double reachBins)
{
    return projectOnLine(transform, bins, reachBins, [&transform](std::size_t index) {
        return transform.value(index);
    });
}

} // namespace sinewright::core
