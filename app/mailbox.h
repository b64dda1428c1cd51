// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <array>
#include <atomic>
#include <optional>
#include <utility>

namespace sinewright::app {

/// The newest value from one thread to one other; older ones that nobody took are dropped.
///
/// Three slots: the writer fills one, the reader empties another, and the third lies between them. Handing over is one
/// exchange of the middle slot's number on either side, so neither ever waits for the other; the exchange's
/// acquire/release makes the slot's contents visible along with its number.
///
/// @thread  one writer, one reader; both calls wait-free but for what T's move and destructor do.
template <typename T>
class Mailbox final
{
public:
    Mailbox() = default;
    Mailbox(const Mailbox&) = delete;
    Mailbox& operator=(const Mailbox&) = delete;

    /// Writer: this is the newest now.
    void put(T value)
    {
        m_slots[m_writerSlot] = std::move(value);
        m_writerSlot =
            m_middle.exchange(m_writerSlot | kFresh, std::memory_order_acq_rel) & kSlotBits;
    }

    /// Reader: the newest value, once; empty when nothing came since.
    [[nodiscard]] std::optional<T> take()
    {
        if ((m_middle.load(std::memory_order_relaxed) & kFresh) == 0) {
            return std::nullopt;
        }
        m_readerSlot = m_middle.exchange(m_readerSlot, std::memory_order_acq_rel) & kSlotBits;
        return std::exchange(m_slots[m_readerSlot], T{});
    }

private:
    static constexpr unsigned kSlotBits = 3;
    static constexpr unsigned kFresh = 4; ///< the middle slot holds what the reader has not seen

    std::array<T, 3> m_slots{};
    unsigned m_writerSlot = 0;         // writer only
    unsigned m_readerSlot = 1;         // reader only
    std::atomic<unsigned> m_middle{2}; // atomic: exchanged by both
    static_assert(std::atomic<unsigned>::is_always_lock_free);
};

} // namespace sinewright::app
