// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "audio/card_choice.h"
#include "core/result.h"

#include <portaudio.h>

#include <string>
#include <vector>

namespace sinewright::audio {

/// While one lives PortAudio is initialised; the device list is made anew when the first one comes into being.
/// Device thread only.
class PortAudioSession final
{
public:
    PortAudioSession();
    ~PortAudioSession();
    PortAudioSession(const PortAudioSession&) = delete;
    PortAudioSession& operator=(const PortAudioSession&) = delete;
    PortAudioSession(PortAudioSession&&) = delete;
    PortAudioSession& operator=(PortAudioSession&&) = delete;

    /// paNoError when it works; with anything else no other call may be made.
    [[nodiscard]] PaError outcome() const { return m_outcome; }

private:
    PaError m_outcome;
};

/// While one lives whatever the process writes to its standard error is lost.
///
/// PortAudio and the libraries under it print their own troubles there, page by page, even when all is well. Kept to the
/// moments of initialising, opening and asking: what another thread writes in such a moment is lost too, which is the
/// lesser evil. Device thread only, so that two never overlap.
class Hush final
{
public:
    Hush();
    ~Hush();
    Hush(const Hush&) = delete;
    Hush& operator=(const Hush&) = delete;
    Hush(Hush&&) = delete;
    Hush& operator=(Hush&&) = delete;

private:
    int m_savedStderr;
};

/// Every device with inputs, in PortAudio's order. Within a session; device thread only.
[[nodiscard]] std::vector<CardInput> cardInputs();

/// What the 32-bit float capture of `channels` channels asks of a device.
[[nodiscard]] PaStreamParameters inputParameters(int device, int channels);

/// DeviceFailed: PortAudio cannot even be initialised.
[[nodiscard]] core::Error noSoundSystem(PaError error);

/// DeviceFailed: the device thread is stuck in a call.
[[nodiscard]] core::Error noAnswer();

/// PortAudio's own words for an error; for host errors those of the system below it.
[[nodiscard]] std::string portAudioText(PaError error);

} // namespace sinewright::audio
