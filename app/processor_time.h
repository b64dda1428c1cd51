// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

namespace sinewright::app {

/// Processor time that the calling thread has used so far [s]. From CLOCK_THREAD_CPUTIME_ID.
[[nodiscard]] double threadSeconds();

/// Processor time that all threads of this process have used so far [s]. From CLOCK_PROCESS_CPUTIME_ID.
[[nodiscard]] double processSeconds();

/// Time on a clock that never jumps [s].
[[nodiscard]] double steadySeconds();

} // namespace sinewright::app
