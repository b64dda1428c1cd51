// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/signal/window.h"

#include <algorithm>
#include <array>
#include <cassert>

namespace sinewright::core {

namespace {

constexpr std::array kRectangularTerms{1.0};
// Harris 1978, Table I, from memory.
constexpr std::array kHannTerms{0.5, 0.5};
constexpr std::array kHammingTerms{0.54, 0.46};
constexpr std::array kBlackmanTerms{0.42, 0.5, 0.08};
constexpr std::array kBlackmanHarris3Terms{0.42323, 0.49755, 0.07922};
constexpr std::array kBlackmanHarris4Terms{0.35875, 0.48829, 0.14128, 0.01168};
// Nuttall, IEEE Trans. ASSP-29 (1981) 84-91.
constexpr std::array kNuttall3C3Terms{0.375, 0.5, 0.125};
constexpr std::array kNuttall3C1Terms{0.40897, 0.5, 0.09103};
constexpr std::array kNuttall3Terms{0.4243801, 0.4973406, 0.0782793};
constexpr std::array kNuttall4C5Terms{0.3125, 0.46875, 0.1875, 0.03125};
constexpr std::array kNuttall4C3Terms{0.338946, 0.481973, 0.161054, 0.018027};
constexpr std::array kNuttall4C1Terms{0.355768, 0.487396, 0.144232, 0.012604};
constexpr std::array kNuttall4Terms{0.3635819, 0.4891775, 0.1365995, 0.0106411};
// Heinzel, Ruediger, Schilling, Max-Planck-Institut fuer Gravitationsphysik, 15 February 2002.
constexpr std::array kHft70Terms{1.0, 1.90796, 1.07349, 0.18199};
constexpr std::array kHft95Terms{1.0, 1.9383379, 1.3045202, 0.4028270, 0.0350665};
constexpr std::array kHft90dTerms{1.0, 1.942604, 1.340318, 0.440811, 0.043097};
constexpr std::array kHft116dTerms{1.0, 1.9575375, 1.4780705, 0.6367431, 0.1228389, 0.0066288};
constexpr std::array kHft144dTerms{
    1.0, 1.96760033, 1.57983607, 0.81123644, 0.22583558, 0.02773848, 0.00090360};
constexpr std::array kHft169dTerms{
    1.0, 1.97441843, 1.65409889, 0.95788187, 0.33673420, 0.06364622, 0.00521942, 0.00010599};
constexpr std::array kHft196dTerms{1.0,
                                   1.979280420,
                                   1.710288951,
                                   1.081629853,
                                   0.448734314,
                                   0.112376628,
                                   0.015122992,
                                   0.000871252,
                                   0.000011896};
constexpr std::array kHft223dTerms{1.0,
                                   1.98298997309,
                                   1.75556083063,
                                   1.19037717712,
                                   0.56155440797,
                                   0.17296769663,
                                   0.03233247087,
                                   0.00324954578,
                                   0.00013801040,
                                   0.00000132725};
constexpr std::array kHft248dTerms{1.0,
                                   1.985844164102,
                                   1.791176438506,
                                   1.282075284005,
                                   0.667777530266,
                                   0.240160796576,
                                   0.056656381764,
                                   0.008134974479,
                                   0.000624544650,
                                   0.000019808998,
                                   0.000000132974};
// Albrecht, Open Signal Processing Journal 3 (2010) 20-29, Tables 1 and 2.
constexpr std::array kAlbrecht2Terms{5.383553946707251e-1, 4.616446053292749e-1};
constexpr std::array kAlbrecht3Terms{
    4.243800934609435e-1, 4.973406350967378e-1, 7.827927144231873e-2};
constexpr std::array kAlbrecht4Terms{
    3.635819267707608e-1, 4.891774371450171e-1, 1.365995139786921e-1, 1.064112210553003e-2};
constexpr std::array kAlbrecht5Terms{3.232153788877343e-1,
                                     4.714921439576260e-1,
                                     1.755341299601972e-1,
                                     2.849699010614994e-2,
                                     1.261357088292677e-3};
constexpr std::array kAlbrecht6Terms{2.935578950102797e-1,
                                     4.519357723474506e-1,
                                     2.014164714263962e-1,
                                     4.792610922105837e-2,
                                     5.026196426859393e-3,
                                     1.375555679558877e-4};
constexpr std::array kAlbrecht7Terms{2.712203605850388e-1,
                                     4.334446123274422e-1,
                                     2.180041228929303e-1,
                                     6.578534329560609e-2,
                                     1.076186730534183e-2,
                                     7.700127105808265e-4,
                                     1.368088305992921e-5};
constexpr std::array kAlbrecht8Terms{2.533176817029088e-1,
                                     4.163269305810218e-1,
                                     2.288396213719708e-1,
                                     8.157508425925879e-2,
                                     1.773592450349622e-2,
                                     2.096702749032688e-3,
                                     1.067741302205525e-4,
                                     1.280702090361482e-6};
constexpr std::array kAlbrecht9Terms{2.384331152777942e-1,
                                     4.005545348643820e-1,
                                     2.358242530472107e-1,
                                     9.527918858383112e-2,
                                     2.537395516617152e-2,
                                     4.152432907505835e-3,
                                     3.685604163298180e-4,
                                     1.384355593917030e-5,
                                     1.161808358932861e-7};
constexpr std::array kAlbrecht10Terms{2.257345387130214e-1,
                                      3.860122949150963e-1,
                                      2.401294214106057e-1,
                                      1.070542338664613e-1,
                                      3.325916184016952e-2,
                                      6.873374952321475e-3,
                                      8.751673238035159e-4,
                                      6.008598932721187e-5,
                                      1.710716472110202e-6,
                                      1.027272130265191e-8};
constexpr std::array kAlbrecht11Terms{2.151527506679809e-1,
                                      3.731348357785249e-1,
                                      2.424243358446660e-1,
                                      1.166907592689211e-1,
                                      4.077422105878731e-2,
                                      1.000904500852923e-2,
                                      1.639806917362033e-3,
                                      1.651660820997142e-4,
                                      8.884663168541479e-6,
                                      1.938617116029048e-7,
                                      8.482485599330470e-10};

constexpr std::array<CosineWindow, 32> kWindows{{
    {"rectangular", kRectangularTerms},
    {"Hann", kHannTerms},
    {"Hamming", kHammingTerms},
    {"Blackman", kBlackmanTerms},
    {"Blackman-Harris 3", kBlackmanHarris3Terms},
    {"Blackman-Harris 4", kBlackmanHarris4Terms},
    {"Nuttall 3, third derivative continuous", kNuttall3C3Terms},
    {"Nuttall 3, first derivative continuous", kNuttall3C1Terms},
    {"Nuttall 3, minimum sidelobe", kNuttall3Terms},
    {"Nuttall 4, fifth derivative continuous", kNuttall4C5Terms},
    {"Nuttall 4, third derivative continuous", kNuttall4C3Terms},
    {"Nuttall 4, first derivative continuous", kNuttall4C1Terms},
    {"Nuttall 4, minimum sidelobe", kNuttall4Terms},
    {"HFT70", kHft70Terms},
    {"HFT95", kHft95Terms},
    {"HFT90D", kHft90dTerms},
    {"HFT116D", kHft116dTerms},
    {"HFT144D", kHft144dTerms},
    {"HFT169D", kHft169dTerms},
    {"HFT196D", kHft196dTerms},
    {"HFT223D", kHft223dTerms},
    {"HFT248D", kHft248dTerms},
    {"Albrecht 2", kAlbrecht2Terms},
    {"Albrecht 3", kAlbrecht3Terms},
    {"Albrecht 4", kAlbrecht4Terms},
    {"Albrecht 5", kAlbrecht5Terms},
    {"Albrecht 6", kAlbrecht6Terms},
    {"Albrecht 7", kAlbrecht7Terms},
    {"Albrecht 8", kAlbrecht8Terms},
    {"Albrecht 9", kAlbrecht9Terms},
    {"Albrecht 10", kAlbrecht10Terms},
    {"Albrecht 11", kAlbrecht11Terms},
}};

// The minimum-sidelobe sets stand last in the table, by ascending number of terms.
constexpr int kFewestTerms = 2;
constexpr int kMostTerms = 11;

} // namespace

std::span<const CosineWindow> cosineWindows()
{
    return kWindows;
}

const CosineWindow* findCosineWindow(std::string_view name)
{
    const auto* found = std::ranges::find(kWindows, name, &CosineWindow::name);
    return found == kWindows.end() ? nullptr : found;
}

const CosineWindow& minimumSidelobeWindow(int terms)
{
    assert(terms >= kFewestTerms && terms <= kMostTerms);
    return kWindows[kWindows.size() - 1 - static_cast<std::size_t>(kMostTerms - terms)];
}

} // namespace sinewright::core
