// One page damaged at a time: what is said, what is read, what is still there.
#include <fmt/format.h>

#include <algorithm>
#include <fstream>
#include <functional>
#include <iterator>

#include "bathwright/logbook/salvage.hpp"
#include "processes.hpp"
#include "trials.hpp"

namespace faults {
namespace {

namespace fs = std::filesystem;
using logbook::Entry, logbook::OpenMode;

constexpr std::size_t page_bytes = 4096, sector = 512, wal_header = 32, frame_header = 24;

std::string bytes_of(const fs::path& path) {
  std::ifstream file(path, std::ios::binary);
  return std::string(std::istreambuf_iterator<char>(file), {});
}

void write_bytes(const fs::path& path, const std::string& bytes) {
  std::ofstream(path, std::ios::binary).write(bytes.data(), static_cast<std::streamsize>(bytes.size()));
}

/// A log as its files, closed properly or as a crash leaves it, and what it holds.
struct Sound {
  std::string main, wal;
  std::vector<Entry> entries;
};

Sound make_log(int entries, bool crashed) {
  const Scratch folder(Scratch::Place::memory);
  const fs::path path = folder / "shop.log";
  Sound sound;
  {
    auto log = must(open_log(path));
    for (int i = 1; i <= entries; ++i) {
      constexpr int every_long = 5;  // goes on in pages of its own
      const auto bytes = static_cast<std::size_t>(i % every_long == 0 ? 6000 : 100 + 37 * (i % 20));
      sound.entries.push_back(must(log.append(numbered_note(i, bytes))));
    }
    if (crashed) {
      sound.main = bytes_of(path);
      sound.wal = bytes_of(folder / "shop.log-wal");
    }
  }
  if (!crashed) sound.main = bytes_of(path);
  return sound;
}

/// A piece of a file that is damaged as one: a page, or a frame with its header.
struct Piece {
  std::size_t begin, end;
  [[nodiscard]] std::size_t size() const { return end - begin; }
};

struct Damage {
  const char* name;
  const char* made;
  std::function<void(std::string& file, const Piece& piece, std::mt19937& random)> make;
};

void write_random(std::string& file, std::size_t begin, std::size_t end, std::mt19937& random) {
  for (std::size_t i = begin; i < end; ++i) file[i] = static_cast<char>(random());
}

const std::vector<Damage>& damages() {
  static const std::vector<Damage> all{
      {"head", "its first 24 bytes at random",
       [](std::string& file, const Piece& piece, std::mt19937& random) {
         write_random(file, piece.begin, std::min(piece.begin + frame_header, piece.end), random);
       }},
      {"byte", "one byte of it changed",
       [](std::string& file, const Piece& piece, std::mt19937& random) {
         char& byte = file[piece.begin + random() % piece.size()];
         byte = static_cast<char>(byte ^ static_cast<char>(1 + random() % 255));
       }},
      {"zeroed", "all of it zeros",
       [](std::string& file, const Piece& piece, std::mt19937&) {
         std::fill(file.begin() + static_cast<std::ptrdiff_t>(piece.begin),
                   file.begin() + static_cast<std::ptrdiff_t>(piece.end), '\0');
       }},
      {"torn", "from a random sector on random bytes",
       [](std::string& file, const Piece& piece, std::mt19937& random) {
         const std::size_t sectors = std::max<std::size_t>(piece.size() / sector, 2);
         write_random(file, piece.begin + sector * (random() % (sectors - 1)), piece.end, random);
       }}};
  return all;
}

/// Whether a piece of the sound file holds a part of the entry. Pages of indexes hold none of its body.
bool holds(std::string_view piece, const Entry& entry) {
  return piece.find(mark(entry.seq)) != std::string_view::npos ||
         piece.find(entry.hash) != std::string_view::npos;
}

/// How the damage came out, counted.
struct Outcomes {
  int said_by_open = 0, said_by_list = 0, said_by_verify = 0, harmless = 0, cut_short = 0;
  std::int64_t listed = 0;
};

/// A message with the number of the frame left out, so that each wording is told once.
std::string without_number(std::string message) {
  const auto begin =
      std::find_if(message.begin(), message.end(), [](char c) { return c >= '0' && c <= '9'; });
  const auto end = std::find_if(begin, message.end(), [](char c) { return c < '0' || c > '9'; });
  if (begin != message.end()) message.replace(begin, end, "N");
  return message;
}

/// Takes down what was said; nothing of the damaged bytes may come through to the person.
void said(const std::string& message, const std::string& where, FaultRow& row) {
  row.messages.insert(without_number(message));
  if (std::any_of(message.begin(), message.end(), [](char c) { return c < ' ' || c > '~'; }))
    row.breaks(where, "the message holds bytes of the damage");
}

/// Reads the log as a person would and judges what came.
void read_damaged(const fs::path& path, const Sound& sound, std::size_t may_be_cut, const std::string& where,
                  FaultRow& row, Outcomes& outcomes) {
  const auto log = open_log(path, OpenMode::read_only);
  if (!log) {
    ++outcomes.said_by_open;
    said(words(log.problems(), path), where, row);
    return;
  }
  const auto entries = log->list();
  const auto report = log->verify();
  if (!entries) {
    ++outcomes.said_by_list;
    said(words(entries.problems(), path), where, row);
    if (report.ok) row.breaks(where, "verify is content though the list is not");
    return;
  }
  outcomes.listed += static_cast<std::int64_t>(entries->size());
  if (!report.ok) {
    ++outcomes.said_by_verify;
  } else if (*entries == sound.entries) {
    ++outcomes.harmless;
  } else {
    ++outcomes.cut_short;
    const std::size_t left = entries->size();
    if (left + may_be_cut < sound.entries.size() || left > sound.entries.size() ||
        !std::equal(entries->begin(), entries->end(), sound.entries.begin()))
      row.breaks(where,
                 fmt::format("{} entries read without a word, {} were logged", left, sound.entries.size()));
  }
}

/// Damages each piece of `file`, one of the two files of the log, in turn.
FaultRow damage_each(const Sound& sound, std::string Sound::*file, const std::vector<Piece>& pieces,
                     const Damage& damage, std::size_t may_be_cut, std::mt19937& random) {
  FaultRow row;
  row.made = damage.made;
  Outcomes outcomes;
  for (const Piece& piece : pieces) {
    const std::string where = fmt::format("{} from byte {}", damage.name, piece.begin);
    Sound damaged = sound;
    damage.make(damaged.*file, piece, random);
    const Scratch folder(Scratch::Place::memory);
    const fs::path path = folder / "shop.log";
    write_bytes(path, damaged.main);
    if (!damaged.wal.empty()) write_bytes(folder / "shop.log-wal", damaged.wal);
    const auto salvaged = must(logbook::salvage(path));
    read_damaged(path, sound, may_be_cut, where, row, outcomes);

    ++row.runs;
    row.acknowledged += static_cast<std::int64_t>(sound.entries.size());
    const std::string_view lost = std::string_view(sound.*file).substr(piece.begin, piece.size());
    for (const Entry& entry : sound.entries) {
      if (std::find(salvaged.begin(), salvaged.end(), entry) != salvaged.end())
        ++row.found;
      else if (!holds(lost, entry))
        row.breaks(where, fmt::format("entry {} stands elsewhere and was not salvaged", entry.seq));
    }
    for (const Entry& entry : salvaged)
      if (std::find(sound.entries.begin(), sound.entries.end(), entry) == sound.entries.end())
        row.breaks(where, fmt::format("entry {} was salvaged and never logged", entry.seq));
  }
  row.note = fmt::format(
      "said by open {}, by list {}, by verify {}; read exactly {}; ended early {}; listed without salvage: {}",
      outcomes.said_by_open, outcomes.said_by_list, outcomes.said_by_verify, outcomes.harmless,
      outcomes.cut_short, outcomes.listed);
  return row;
}

/// Every `stride`-th piece of `size` bytes.
std::vector<Piece> pieces_of(const std::string& file, std::size_t begin, std::size_t size, int stride) {
  std::vector<Piece> pieces;
  for (; begin + size <= file.size(); begin += static_cast<std::size_t>(stride) * size)
    pieces.push_back({begin, begin + size});
  return pieces;
}

}  // namespace

std::vector<FaultRow> damaged_pages(const Extent& extent, std::mt19937& random) {
  const Sound closed = make_log(extent.damaged_entries, false),
              crashed = make_log(extent.damaged_entries, true);
  const auto pages = pieces_of(closed.main, 0, page_bytes, 1);
  auto frames = pieces_of(crashed.wal, wal_header, frame_header + page_bytes, extent.frame_stride);
  frames.insert(frames.begin(), {0, wal_header});
  std::vector<FaultRow> rows;
  for (const Damage& damage : damages()) {
    rows.push_back(damage_each(closed, &Sound::main, pages, damage, 0, random));
    rows.back().fault = fmt::format("each page of the file: {}", damage.name);
  }
  // Damage within the last transaction cannot be told from a crash while it was written; where it hides the
  // end of the last but one, both are the last.
  constexpr std::size_t last_ones = 2;
  for (const Damage& damage : damages()) {
    rows.push_back(damage_each(crashed, &Sound::wal, frames, damage, last_ones, random));
    rows.back().fault = fmt::format("each frame of the write-ahead file: {}", damage.name);
  }
  return rows;
}

}  // namespace faults
