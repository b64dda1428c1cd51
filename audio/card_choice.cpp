// SPDX-License-Identifier: GPL-3.0-or-later
#include "audio/card_choice.h"

#include "audio/sample_ring.h"

#include <algorithm>
#include <cctype>
#include <functional>
#include <iterator>

namespace sinewright::audio {

namespace {

using core::ErrorCode;
using Inputs = std::vector<CardInput>;

std::string lower(std::string text)
{
    std::ranges::transform(
        text, text.begin(), [](unsigned char c) { return static_cast<char>(std::tolower(c)); });
    return text;
}

bool hasPart(const std::string& text, const std::string& part)
{
    return lower(text).find(lower(part)) != std::string::npos;
}

Inputs those(const Inputs& inputs, const std::function<bool(const CardInput&)>& fits)
{
    Inputs found;
    std::ranges::copy_if(inputs, std::back_inserter(found), fits);
    return found;
}

/// The strictest way of reading `name` that any input answers to.
Inputs byName(const Inputs& inputs, const std::string& name)
{
    auto found = those(inputs, [&](const CardInput& input) {
        return input.name == name || labelOf(input) == name;
    });
    if (found.empty()) {
        found = those(inputs, [&](const CardInput& input) {
            return lower(input.name) == lower(name) || lower(labelOf(input)) == lower(name);
        });
    }
    if (found.empty()) {
        found =
            those(inputs, [&](const CardInput& input) { return hasPart(labelOf(input), name); });
    }
    return found;
}

std::string listOf(const Inputs& inputs)
{
    std::string list;
    for (const CardInput& input : inputs) {
        list += (list.empty() ? "'" : ", '") + labelOf(input) + "'";
    }
    return list;
}

/// The default of the system, else of the host API asked for, else the first.
CardInput standardOf(const Inputs& inputs)
{
    auto found = std::ranges::find_if(inputs, &CardInput::isDefault);
    if (found == inputs.end()) {
        found = std::ranges::find_if(inputs, &CardInput::isDefaultOfHostApi);
    }
    return found == inputs.end() ? inputs.front() : *found;
}

} // namespace

std::string labelOf(const CardInput& input)
{
    return input.name + " (" + input.hostApi + ")";
}

core::Result<CardInput> chooseInput(std::span<const CardInput> inputs, const CardChoice& choice)
{
    const Inputs all(inputs.begin(), inputs.end());
    if (all.empty()) {
        return core::failure(ErrorCode::DeviceFailed,
                             "the system offers no audio input: connect an interface, or start "
                             "the sound server");
    }
    const Inputs ofApi =
        those(all, [&](const CardInput& input) { return hasPart(input.hostApi, choice.hostApi); });
    if (ofApi.empty()) {
        return core::failure(ErrorCode::NotFound,
                             "no input belongs to a host API named '" + choice.hostApi +
                                 "': choose one of " + listOf(all));
    }
    if (choice.name.empty()) {
        return standardOf(ofApi);
    }
    const Inputs found = byName(ofApi, choice.name);
    if (found.empty()) {
        return core::failure(ErrorCode::NotFound,
                             "no input is named '" + choice.name + "': choose one of " +
                                 listOf(ofApi));
    }
    if (found.size() > 1) {
        return core::failure(ErrorCode::InvalidArgument,
                             "'" + choice.name + "' may mean " + std::to_string(found.size()) +
                                 " inputs: give more of the name of one of " + listOf(found));
    }
    return found.front();
}

core::Result<int> chooseChannels(const CardInput& input, const CardChoice& choice)
{
    const int most = std::min(input.channels, kMostChannels);
    if (choice.channels < 0 || choice.channels > most) {
        return core::failure(ErrorCode::InvalidArgument,
                             "input '" + labelOf(input) + "' cannot be opened with " +
                                 std::to_string(choice.channels) + " channels: ask for 1 to " +
                                 std::to_string(most));
    }
    return choice.channels == 0 ? std::min(2, most) : choice.channels;
}

} // namespace sinewright::audio
