// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

// Counts what the including program takes from the heap. To be included by one source file of a program: it replaces
// the program's operator new.

#include <atomic>
#include <cstddef>
#include <cstdlib>
#include <new>

namespace sinewright::tests {

inline std::atomic<std::size_t> allocationCount{0};

} // namespace sinewright::tests

void* operator new(std::size_t size)
{
    sinewright::tests::allocationCount.fetch_add(1, std::memory_order_relaxed);
    if (void* memory = std::malloc(size == 0 ? 1 : size)) {
        return memory;
    }
    std::abort();
}

void operator delete(void* memory) noexcept
{
    std::free(memory);
}

void operator delete(void* memory, std::size_t) noexcept
{
    std::free(memory);
}
