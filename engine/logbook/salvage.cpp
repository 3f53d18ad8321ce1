#include "bathwright/logbook/salvage.hpp"

#include <algorithm>
#include <cerrno>
#include <cstring>
#include <fstream>
#include <iterator>
#include <map>
#include <string>
#include <string_view>

#include "chain.hpp"
#include "database.hpp"
#include "schema.hpp"
#include "stored_entry.hpp"
#include "wal_frames.hpp"

namespace bathwright::logbook {
namespace {

// Places and marks of sqlite.org/fileformat2.html.
constexpr std::size_t page_size_at = 16, change_counter_at = 24, valid_for_at = 92;
constexpr char table_leaf = 0x0D;

std::size_t page_size_of(std::string_view file) {
  constexpr std::size_t usual = 4096;
  if (file.size() < 100) return usual;
  const auto stated = static_cast<std::size_t>(static_cast<unsigned char>(file[page_size_at]) << 8 |
                                               static_cast<unsigned char>(file[page_size_at + 1]));
  const std::size_t size = stated == 1 ? 65536 : stated;
  return size >= 512 && (size & (size - 1)) == 0 ? size : usual;
}

/// A new database that holds nothing but the empty table of entries.
std::string entry_table_alone(std::size_t page_size) {
  const Database tables = tables_in_memory();
  Statement table = tables.prepare("SELECT sql FROM sqlite_schema WHERE type = 'table' AND name = 'entry'");
  table.step();
  const Database alone = Database::in_memory();
  (void)alone.execute(("PRAGMA page_size = " + std::to_string(page_size) + ";" + table.text(0)).c_str());
  return alone.image();
}

/// Lets SQLite itself read one leaf of the table of entries after the other, whatever led to it: each is put
/// into a database of that table alone, as its root. Long entries go on in further pages of the damaged file,
/// which stand at their own numbers.
class LeafReader {
 public:
  using Trust = bool (*)(const WalFrame&);

  /// `tables`: of entry_table_alone. Frames that `trusted` takes stand over the file's own pages.
  LeafReader(std::string_view tables, std::string_view file, const Wal& wal, std::size_t page_size,
             Trust trusted)
      : page_size_(page_size), image_(file) {
    const std::size_t most_pages = file.size() / page_size + wal.frames.size();
    for (const WalFrame& frame : wal.frames)
      if (trusted(frame) && frame.page >= 1 && frame.page <= most_pages) put(frame.page, frame.content);
    image_.resize(std::max(image_.size(), tables.size()) / page_size * page_size);
    put(1, tables.substr(0, page_size));
    image_[valid_for_at] ^= 1;  // makes SQLite count the pages instead of believing the heading
    database_ = Database::on_image(image_);
  }

  /// Adds what proves itself.
  void read(std::string_view leaf, std::map<std::int64_t, Entry>& entries) {
    if (leaf.front() != table_leaf) return;
    put(root, leaf);
    ++image_[change_counter_at + 3];  // makes SQLite forget the pages of before
    // Forwards to the first damaged entry of the leaf, then backwards to the last.
    if (!scan("ORDER BY seq", entries)) (void)scan("ORDER BY seq DESC", entries);
  }

 private:
  static constexpr std::uint32_t root = 2;  // of the first table of a new database

  bool scan(std::string_view order, std::map<std::int64_t, Entry>& entries) const {
    // Leaves of other tables give rows without a hash.
    Statement rows = database_.prepare(select_entries("WHERE length(hash) = 64 " + std::string(order)));
    while (rows.step())
      if (auto entry = read_entry(rows); entry && chain_hash(*entry) == entry->hash)
        entries.emplace(entry->seq, *std::move(entry));
    return !rows.failed();
  }

  void put(std::uint32_t page, std::string_view content) {
    const std::size_t at = (page - std::size_t{1}) * page_size_;
    if (image_.size() < at + page_size_) image_.resize(at + page_size_);
    image_.replace(at, page_size_, content.substr(0, page_size_));
  }

  std::size_t page_size_;
  std::string image_;
  Database database_ = Database::in_memory();  ///< reads image_
};

}  // namespace

Result<std::vector<Entry>> salvage(const std::filesystem::path& path) {
  std::ifstream stream(path, std::ios::binary);
  if (!stream)
    return Problem{Fault::io, path.string(), std::string("the file cannot be read: ") + std::strerror(errno),
                   "", "check the path and the permission to read"};
  const std::string file(std::istreambuf_iterator<char>(stream), {}), wal_file = wal_bytes(path);
  const Wal wal = read_wal(wal_file);
  const std::size_t page_size = page_size_of(file);

  // A long entry may go on in the file or in the write-ahead log, and the page there may be the damaged one.
  constexpr LeafReader::Trust file_alone = [](const WalFrame&) { return false; };
  constexpr LeafReader::Trust whole_frames = [](const WalFrame& frame) { return frame.whole; };
  constexpr LeafReader::Trust all_frames = [](const WalFrame& frame) { return frame.current; };
  const std::string tables = entry_table_alone(page_size);
  std::map<std::int64_t, Entry> entries;
  for (const LeafReader::Trust trusted : {file_alone, whole_frames, all_frames}) {
    LeafReader reader(tables, file, wal, page_size, trusted);
    for (std::size_t at = 0; at + page_size <= file.size(); at += page_size)
      reader.read(std::string_view(file).substr(at, page_size), entries);
    for (const WalFrame& frame : wal.frames)
      if (frame.content.size() == page_size) reader.read(frame.content, entries);
    if (wal.frames.empty()) break;
  }

  std::vector<Entry> in_order;
  for (auto& [seq, entry] : entries) in_order.push_back(std::move(entry));
  return in_order;
}

}  // namespace bathwright::logbook
