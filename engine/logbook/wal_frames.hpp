// SQLite's write-ahead log, read as bytes: its frames, and whether one that must be whole is damaged.
// SQLite itself takes the first frame whose checksum fails for the end: right after a crash, but a damaged
// frame in the middle silently takes all entries behind it away. Not for reading entries; SQLite does that.
// Layout: sqlite.org/fileformat2.html, section 4, "The Write-Ahead Log".
#pragma once

#include <cstddef>
#include <cstdint>
#include <filesystem>
#include <optional>
#include <string>
#include <string_view>
#include <vector>

namespace bathwright::logbook {

struct WalFrame {
  std::uint32_t page = 0;    ///< its number in the main file, from 1
  bool commits = false;      ///< the last of its transaction
  bool current = false;      ///< written since the log last began anew
  bool whole = false;        ///< current, and its checksum follows from that of the frame before
  std::string_view content;  ///< into the bytes it was read from
};

struct Wal {
  bool header_whole = false;
  std::vector<WalFrame> frames;  ///< everything behind the header, leftovers of earlier generations included
};

/// `bytes`: the content of a -wal file; must outlive the frames.
[[nodiscard]] Wal read_wal(std::string_view bytes);

/// The number, from 1, of a frame that was on the disk whole and is no longer; 0 stands for the header. A
/// transaction is synced before the next is written, so a broken frame with a later transaction behind it was
/// damaged. Within the last transaction damage cannot be told from a crash.
[[nodiscard]] std::optional<std::size_t> damaged_frame(const Wal& wal);

/// The bytes of the -wal file beside the log; empty where there is none.
[[nodiscard]] std::string wal_bytes(const std::filesystem::path& log);

}  // namespace bathwright::logbook
