// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/measure/reading.h"
#include "ui/main_window.h"

#include <QLatin1StringView>
#include <QStringList>
#include <QStringView>

#include <algorithm>
#include <array>
#include <cstddef>
#include <optional>

namespace sinewright::app {

/// A value of an enumeration as command line, settings file and JSON spell it.
template <typename T>
struct Spelled
{
    const char* word;
    T value;
};

template <typename T, std::size_t N>
using Words = std::array<Spelled<T>, N>;

inline constexpr Words<ui::ThemeName, 2> kThemeWords{
    {{"paper", ui::ThemeName::Paper}, {"dusk", ui::ThemeName::Dusk}}};

inline constexpr Words<ui::Page, 5> kPageWords{{{"hook-up", ui::Page::HookUp},
                                                {"trim", ui::Page::Trim},
                                                {"warm-up", ui::Page::WarmUp},
                                                {"network", ui::Page::Network},
                                                {"record", ui::Page::Record}}};

inline constexpr Words<core::Weighting, 3> kWeightingWords{
    {{"none", core::Weighting::None}, {"a", core::Weighting::A}, {"468", core::Weighting::Itu468}}};

/// What `word` spells, if anything.
template <typename T, std::size_t N>
[[nodiscard]] std::optional<T> valueOf(const Words<T, N>& words, QStringView word)
{
    const auto found = std::find_if(words.begin(), words.end(), [word](const auto& entry) {
        return word == QLatin1StringView(entry.word);
    });
    return found != words.end() ? std::optional(found->value) : std::nullopt;
}

/// How `value` is spelt; every value of these enumerations is in its list.
template <typename T, std::size_t N>
[[nodiscard]] const char* wordOf(const Words<T, N>& words, T value)
{
    const auto found = std::find_if(
        words.begin(), words.end(), [value](const auto& entry) { return entry.value == value; });
    return found != words.end() ? found->word : "";
}

template <typename T, std::size_t N>
[[nodiscard]] QStringList allWords(const Words<T, N>& words)
{
    QStringList list;
    for (const auto& entry : words) {
        list.append(QString::fromLatin1(entry.word));
    }
    return list;
}

} // namespace sinewright::app
