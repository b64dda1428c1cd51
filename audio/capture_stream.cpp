// SPDX-License-Identifier: GPL-3.0-or-later
#include "audio/capture_stream.h"

#include "audio/device_thread.h"

#include <cmath>
#include <utility>

namespace sinewright::audio {

namespace {

using core::ErrorCode;

void finished(void* tap)
{
    static_cast<CaptureTap*>(tap)->end();
}

core::Error refusal(const std::string& label, double rateHz, PaError error)
{
    if (error == paInvalidSampleRate) {
        return {ErrorCode::DeviceFailed,
                "input '" + label + "' does not run at " + std::to_string(std::lround(rateHz)) +
                    " Hz: choose a rate that the list of cards gives for it"};
    }
    return {ErrorCode::DeviceFailed,
            "input '" + label + "' cannot be opened (" + portAudioText(error) +
                "): see whether another program holds it, or choose another input"};
}

} // namespace

CaptureStream::CaptureStream(std::unique_ptr<PortAudioSession> session,
                             std::string label,
                             const StreamFormat& format)
    : m_session(std::move(session))
    , m_label(std::move(label))
    , m_format(format)
{}

core::Result<std::shared_ptr<CaptureStream>> CaptureStream::open(const CardChoice& choice)
{
    auto session = std::make_unique<PortAudioSession>();
    if (session->outcome() != paNoError) {
        return tl::unexpected(noSoundSystem(session->outcome()));
    }
    const auto input = chooseInput(cardInputs(), choice);
    if (!input) {
        return tl::unexpected(input.error());
    }
    const auto channels = chooseChannels(*input, choice);
    if (!channels) {
        return tl::unexpected(channels.error());
    }
    const double rateHz = choice.rateHz > 0.0 ? choice.rateHz : input->defaultRateHz;
    const std::shared_ptr<CaptureStream> stream(
        new CaptureStream(
            std::move(session), labelOf(*input), StreamFormat{core::SampleRate{rateHz}, *channels}),
        [](CaptureStream* last) { postToDeviceThread([last] { delete last; }); });
    const PaStreamParameters parameters = inputParameters(input->device, *channels);
    PaError error = paNoError;
    {
        const Hush hush;
        error = Pa_OpenStream(&stream->m_stream,
                              &parameters,
                              nullptr,
                              rateHz,
                              paFramesPerBufferUnspecified,
                              paClipOff | paDitherOff,
                              captureCallback,
                              &stream->m_tap);
    }
    if (error != paNoError) {
        stream->m_stream = nullptr;
        return tl::unexpected(refusal(stream->m_label, rateHz, error));
    }
    Pa_SetStreamFinishedCallback(stream->m_stream, finished);
    if (const PaStreamInfo* const real = Pa_GetStreamInfo(stream->m_stream)) {
        stream->m_format.rate = core::SampleRate{real->sampleRate};
    }
    return stream;
}

CaptureStream::~CaptureStream()
{
    if (m_stream == nullptr) {
        return;
    }
    // After the death of a PulseAudio server both return at once; while it is frozen the first waits until it goes on
    // or dies.
    Pa_AbortStream(m_stream);
    Pa_CloseStream(m_stream);
}

core::Result<void> CaptureStream::start()
{
    const PaError error = Pa_StartStream(m_stream);
    if (error != paNoError) {
        return tl::unexpected(refusal(m_label, m_format.rate.hz, error));
    }
    return {};
}

} // namespace sinewright::audio
