#include "wal_frames.hpp"

#include <bit>
#include <fstream>
#include <system_error>
#include <utility>

namespace bathwright::logbook {
namespace {

constexpr std::size_t header_bytes = 32, frame_header_bytes = 24;

std::uint32_t big_endian(std::string_view bytes, std::size_t at) {
  std::uint32_t value = 0;
  for (std::size_t i = 0; i < 4; ++i) value = value << 8 | static_cast<unsigned char>(bytes[at + i]);
  return value;
}

/// The running checksum of the format; `bytes` is a multiple of 8 long.
class Checksum {
 public:
  Checksum(bool big_endian_words, std::uint32_t first, std::uint32_t second)
      : big_endian_words_(big_endian_words), sums_(first, second) {}

  Checksum& add(std::string_view bytes) {
    for (std::size_t at = 0; at + 8 <= bytes.size(); at += 8) {
      sums_.first += word(bytes, at) + sums_.second;
      sums_.second += word(bytes, at + 4) + sums_.first;
    }
    return *this;
  }

  bool is(std::string_view bytes, std::size_t at) const {
    return sums_ == std::pair(big_endian(bytes, at), big_endian(bytes, at + 4));
  }

 private:
  std::uint32_t word(std::string_view bytes, std::size_t at) const {
    const std::uint32_t value = big_endian(bytes, at);
    return big_endian_words_ ? value : __builtin_bswap32(value);
  }
  bool big_endian_words_;
  std::pair<std::uint32_t, std::uint32_t> sums_;
};

}  // namespace

Wal read_wal(std::string_view bytes) {
  Wal wal;
  if (bytes.size() < header_bytes) return wal;
  constexpr std::uint32_t magic = 0x377f0682;  // its last bit: checksums over big-endian words
  bool big_endian_words = (big_endian(bytes, 0) & 1U) != 0;
  wal.header_whole = (big_endian(bytes, 0) & ~1U) == magic &&
                     Checksum(big_endian_words, 0, 0).add(bytes.substr(0, 24)).is(bytes, 24);
  std::size_t page_size = big_endian(bytes, 8);
  std::string_view salts = bytes.substr(16, 8);
  if (!wal.header_whole) {  // what SQLite does on this machine, so that the frames can be read all the same
    big_endian_words = std::endian::native == std::endian::big;
    page_size = 4096;
    if (bytes.size() >= header_bytes + frame_header_bytes) salts = bytes.substr(header_bytes + 8, 8);
  }

  std::size_t checksum_before = 24;
  for (std::size_t at = header_bytes; at + frame_header_bytes + page_size <= bytes.size();
       at += frame_header_bytes + page_size) {
    const std::string_view content = bytes.substr(at + frame_header_bytes, page_size);
    Checksum sum(big_endian_words, big_endian(bytes, checksum_before),
                 big_endian(bytes, checksum_before + 4));
    const bool current = bytes.substr(at + 8, 8) == salts;
    wal.frames.push_back({.page = big_endian(bytes, at),
                          .commits = big_endian(bytes, at + 4) != 0,
                          .current = current,
                          .whole = current && sum.add(bytes.substr(at, 8)).add(content).is(bytes, at + 16),
                          .content = content});
    checksum_before = at + 16;
  }
  return wal;
}

std::optional<std::size_t> damaged_frame(const Wal& wal) {
  if (wal.frames.empty()) return std::nullopt;
  if (!wal.header_whole) return 0;  // it is synced before the first frame is written
  std::size_t broken = 0;
  while (broken < wal.frames.size() && wal.frames[broken].whole) ++broken;
  // A frame that follows by its checksum on the end of a transaction shows that this one was complete. What a
  // crash left behind and later transactions wrote over does not follow on them.
  for (std::size_t i = broken; i + 1 < wal.frames.size(); ++i)
    if (wal.frames[i].commits && wal.frames[i + 1].whole) return broken + 1;
  return std::nullopt;
}

std::string wal_bytes(const std::filesystem::path& log) {
  const std::filesystem::path path = log.string() + "-wal";
  std::error_code none;
  const auto size = std::filesystem::file_size(path, none);
  if (none) return {};
  std::string bytes(size, '\0');
  std::ifstream file(path, std::ios::binary);
  file.read(bytes.data(), static_cast<std::streamsize>(size));
  bytes.resize(static_cast<std::size_t>(file.gcount()));
  return bytes;
}

}  // namespace bathwright::logbook
