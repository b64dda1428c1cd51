// SPDX-License-Identifier: GPL-3.0-or-later
#include "audio/promised_size.h"

#include <array>
#include <fstream>
#include <optional>
#include <string_view>
#include <system_error>

namespace sinewright::audio {

namespace {

constexpr std::size_t kTagBytes = 4;
constexpr std::size_t kChunkHeaderBytes = 8; ///< tag and 32-bit size
constexpr std::size_t kFormHeaderBytes = 12; ///< tag, 32-bit size, kind
constexpr std::size_t kRf64DataSizeAt = 8;   ///< within the ds64 chunk, behind the RIFF size
constexpr unsigned kBitsPerByte = 8;

/// Sizes from here on stand for "not known": stream writers put 2^31 or 2^32 less a few kilobytes. Common practice.
constexpr std::uint64_t kOpenEndedFrom = 0x7FFFF000U;

enum class ByteOrder { Little, Big };

template <std::size_t n>
using Bytes = std::array<unsigned char, n>;

template <std::size_t n>
std::optional<Bytes<n>> bytesAt(std::ifstream& in, std::uint64_t offset)
{
    std::array<char, n> raw{};
    in.clear();
    in.seekg(static_cast<std::streamoff>(offset));
    if (!in.read(raw.data(), static_cast<std::streamsize>(n))) {
        return std::nullopt;
    }
    Bytes<n> bytes{};
    for (std::size_t i = 0; i < n; ++i) {
        bytes.at(i) = static_cast<unsigned char>(raw.at(i));
    }
    return bytes;
}

template <std::size_t n>
bool hasTag(const Bytes<n>& bytes, std::size_t at, std::string_view tag)
{
    for (std::size_t i = 0; i < kTagBytes; ++i) {
        if (bytes.at(at + i) != static_cast<unsigned char>(tag.at(i))) {
            return false;
        }
    }
    return true;
}

template <std::size_t n>
std::uint64_t number(const Bytes<n>& bytes, std::size_t at, std::size_t length, ByteOrder order)
{
    std::uint64_t value = 0;
    for (std::size_t i = 0; i < length; ++i) {
        const std::size_t next = order == ByteOrder::Big ? at + i : at + length - 1 - i;
        value = (value << kBitsPerByte) | bytes.at(next);
    }
    return value;
}

struct Container
{
    ByteOrder order = ByteOrder::Little;
    std::string_view soundTag;
};

std::optional<Container> containerOf(std::ifstream& in)
{
    const auto head = bytesAt<kFormHeaderBytes>(in, 0);
    if (!head) {
        return std::nullopt;
    }
    if (hasTag(*head, 0, "RIFF") || hasTag(*head, 0, "RF64")) {
        return Container{ByteOrder::Little, "data"};
    }
    if (hasTag(*head, 0, "RIFX")) {
        return Container{ByteOrder::Big, "data"};
    }
    if (hasTag(*head, 0, "FORM")) {
        return Container{ByteOrder::Big, "SSND"};
    }
    return std::nullopt;
}

} // namespace

std::uint64_t missingSoundBytes(const std::filesystem::path& file)
{
    std::error_code failed;
    const std::uint64_t fileBytes = std::filesystem::file_size(file, failed);
    std::ifstream in(file, std::ios::binary);
    const auto container = failed ? std::nullopt : containerOf(in);
    if (!container) {
        return 0;
    }
    std::optional<std::uint64_t> wideSize; // of an RF64 file, whose sound chunk has no room for it
    std::uint64_t at = kFormHeaderBytes;
    while (const auto chunk = bytesAt<kChunkHeaderBytes>(in, at)) {
        const std::uint64_t size = number(*chunk, kTagBytes, 4, container->order);
        const std::uint64_t body = at + kChunkHeaderBytes;
        if (hasTag(*chunk, 0, container->soundTag)) {
            if (size >= kOpenEndedFrom && !wideSize) {
                return 0;
            }
            const std::uint64_t held = fileBytes - body;
            const std::uint64_t promised = size >= kOpenEndedFrom ? *wideSize : size;
            return promised > held ? promised - held : 0;
        }
        if (hasTag(*chunk, 0, "ds64")) {
            if (const auto wide = bytesAt<kRf64DataSizeAt + 8>(in, body)) {
                wideSize = number(*wide, kRf64DataSizeAt, 8, container->order);
            }
        }
        at = body + size + (size & 1U); // chunks start on even bytes
    }
    return 0;
}

} // namespace sinewright::audio
