// SPDX-License-Identifier: GPL-3.0-or-later
#include "audio/port_audio.h"

#include <algorithm>
#include <mutex>

#include <dlfcn.h>
#include <fcntl.h>
#include <unistd.h>

namespace sinewright::audio {

namespace {

/// A stall of the callback's thread up to about this long loses nothing, and a reading is no later than this. PortAudio
/// delivers a quarter of it at a time through ALSA, as seen: 25 ms.
constexpr double kInputLatencySeconds = 0.1;

using AlsaErrorHandler = void (*)(const char*, int, const char*, int, const char*, ...);
using JackMessageHandler = void (*)(const char*);

void ignoreAlsa(const char*, int, const char*, int, const char*, ...) {}
void ignoreJack(const char*) {}

template <typename Handler>
void setHandler(const char* setter, Handler handler)
{
    if (void* const found = ::dlsym(RTLD_DEFAULT, setter)) {
        reinterpret_cast<void (*)(Handler)>(found)(handler);
    }
}

/// ALSA and JACK print through handlers that can be replaced; PortAudio brings both along, so their functions are looked
/// up where they are rather than linked. Hush does the rest.
void quietHandlers()
{
    setHandler<AlsaErrorHandler>("snd_lib_error_set_handler", ignoreAlsa);
    setHandler<JackMessageHandler>("jack_set_error_function", ignoreJack);
    setHandler<JackMessageHandler>("jack_set_info_function", ignoreJack);
}

PaError initialiseQuietly()
{
    static std::once_flag once;
    std::call_once(once, quietHandlers);
    const Hush hush;
    return Pa_Initialize();
}

} // namespace

Hush::Hush() : m_savedStderr(::fcntl(STDERR_FILENO, F_DUPFD_CLOEXEC, 0))
{
    const int nowhere = ::open("/dev/null", O_WRONLY | O_CLOEXEC);
    if (m_savedStderr >= 0 && nowhere >= 0) {
        ::dup2(nowhere, STDERR_FILENO);
    }
    if (nowhere >= 0) {
        ::close(nowhere);
    }
}

Hush::~Hush()
{
    if (m_savedStderr >= 0) {
        ::dup2(m_savedStderr, STDERR_FILENO);
        ::close(m_savedStderr);
    }
}

PortAudioSession::PortAudioSession() : m_outcome(initialiseQuietly()) {}

PortAudioSession::~PortAudioSession()
{
    if (m_outcome == paNoError) {
        Pa_Terminate();
    }
}

std::vector<CardInput> cardInputs()
{
    std::vector<CardInput> inputs;
    const int standard = Pa_GetDefaultInputDevice();
    for (int device = 0; device < Pa_GetDeviceCount(); ++device) {
        const PaDeviceInfo* const info = Pa_GetDeviceInfo(device);
        if (info == nullptr || info->maxInputChannels < 1) {
            continue;
        }
        const PaHostApiInfo* const api = Pa_GetHostApiInfo(info->hostApi);
        inputs.push_back(CardInput{device,
                                   api == nullptr ? "" : api->name,
                                   info->name,
                                   info->maxInputChannels,
                                   info->defaultSampleRate,
                                   device == standard,
                                   api != nullptr && device == api->defaultInputDevice});
    }
    return inputs;
}

PaStreamParameters inputParameters(int device, int channels)
{
    const PaDeviceInfo* const info = Pa_GetDeviceInfo(device);
    PaStreamParameters parameters{};
    parameters.device = device;
    parameters.channelCount = channels;
    parameters.sampleFormat = paFloat32;
    parameters.suggestedLatency = std::max(info->defaultHighInputLatency, kInputLatencySeconds);
    return parameters;
}

core::Error noSoundSystem(PaError error)
{
    return {core::ErrorCode::DeviceFailed,
            "the system's audio cannot be used (" + portAudioText(error) +
                "): restart the sound server"};
}

core::Error noAnswer()
{
    return {core::ErrorCode::DeviceFailed,
            "the system's audio does not answer: restart the sound server, or unplug the interface "
            "and plug it in again"};
}

std::string portAudioText(PaError error)
{
    if (error == paUnanticipatedHostError) {
        const PaHostErrorInfo* const host = Pa_GetLastHostErrorInfo();
        if (host != nullptr && host->errorText != nullptr && *host->errorText != '\0') {
            return host->errorText;
        }
    }
    return Pa_GetErrorText(error);
}

} // namespace sinewright::audio
