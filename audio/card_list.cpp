// SPDX-License-Identifier: GPL-3.0-or-later
#include "audio/card.h"
#include "audio/device_thread.h"
#include "audio/port_audio.h"

#include <algorithm>
#include <array>
#include <chrono>

namespace sinewright::audio {

namespace {

/// What interfaces commonly run at.
constexpr std::array kUsualRatesHz = {44100.0, 48000.0, 88200.0, 96000.0, 176400.0, 192000.0};

/// Many devices with a slow driver take seconds; a frozen sound server takes for ever.
constexpr std::chrono::seconds kListPatience{20};

std::vector<double> acceptedRates(const CardInput& input)
{
    const PaStreamParameters parameters =
        inputParameters(input.device, std::min(2, input.channels));
    std::vector<double> accepted;
    const Hush hush;
    std::ranges::copy_if(kUsualRatesHz, std::back_inserter(accepted), [&](double rateHz) {
        return Pa_IsFormatSupported(&parameters, nullptr, rateHz) == paFormatIsSupported;
    });
    return accepted;
}

core::Result<std::vector<CardInfo>> listNow()
{
    const PortAudioSession session;
    if (session.outcome() != paNoError) {
        return tl::unexpected(noSoundSystem(session.outcome()));
    }
    std::vector<CardInfo> cards;
    for (const CardInput& input : cardInputs()) {
        cards.push_back(CardInfo{input.hostApi,
                                 input.name,
                                 input.channels,
                                 input.defaultRateHz,
                                 acceptedRates(input),
                                 input.isDefault});
    }
    return cards;
}

} // namespace

core::Result<std::vector<CardInfo>> listCards()
{
    auto answer = askDeviceThread(listNow);
    auto cards = answerWithin(answer, kListPatience);
    return cards ? *std::move(cards) : tl::unexpected(noAnswer());
}

} // namespace sinewright::audio
