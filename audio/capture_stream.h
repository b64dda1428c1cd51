// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "audio/capture_tap.h"
#include "audio/card.h"
#include "audio/port_audio.h"

#include <memory>
#include <string>

namespace sinewright::audio {

/// One open PortAudio stream. Made, started and destroyed on the device thread; the tap may be used elsewhere.
class CaptureStream final
{
public:
    /// Opens what `choice` means, looking through a fresh device list when no other stream is open.
    ///
    /// Whoever drops the last owner, the stream is closed on the device thread and memory the callback uses is freed
    /// only after that.
    /// @error as chooseInput(), chooseChannels(); DeviceFailed when the device refuses.
    [[nodiscard]] static core::Result<std::shared_ptr<CaptureStream>>
    open(const CardChoice& choice);

    ~CaptureStream();
    CaptureStream(const CaptureStream&) = delete;
    CaptureStream& operator=(const CaptureStream&) = delete;
    CaptureStream(CaptureStream&&) = delete;
    CaptureStream& operator=(CaptureStream&&) = delete;

    /// @error DeviceFailed
    [[nodiscard]] core::Result<void> start();

    [[nodiscard]] CaptureTap& tap() { return m_tap; }
    [[nodiscard]] const StreamFormat& format() const { return m_format; }
    [[nodiscard]] const std::string& label() const { return m_label; }

private:
    CaptureStream(std::unique_ptr<PortAudioSession> session,
                  std::string label,
                  const StreamFormat& format);

    // constant after construction
    std::unique_ptr<PortAudioSession> m_session;
    std::string m_label;
    StreamFormat m_format;
    PaStream* m_stream = nullptr;
    CaptureTap m_tap;
};

} // namespace sinewright::audio
