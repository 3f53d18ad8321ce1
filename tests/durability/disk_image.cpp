#include "disk_image.hpp"

#include <algorithm>
#include <fstream>

namespace faults {
namespace {

constexpr std::size_t sector = 512;  // bytes

using Kind = DiskEvent::Kind;

void apply(const DiskEvent& event, std::string& bytes) {
  const auto offset = static_cast<std::size_t>(event.offset);
  if (event.kind == Kind::truncate) {
    bytes.resize(offset);
  } else {
    if (bytes.size() < offset + event.bytes.size()) bytes.resize(offset + event.bytes.size());
    bytes.replace(offset, event.bytes.size(), event.bytes);
  }
}

/// How many of `changes` are on the disk: the first so many.
std::size_t surviving(std::size_t changes, Survivors survivors, std::mt19937& random) {
  switch (survivors) {
    case Survivors::none:
      return 0;
    case Survivors::all:
      return changes;
    case Survivors::some:
      break;
  }
  return std::uniform_int_distribution<std::size_t>(0, changes)(random);
}

/// The part of sector `number` that a change makes anew, as a write within that sector; nothing where it
/// leaves the sector as it is. Behind the end of a file that was cut short stand zeros.
bool part_in_sector(const DiskEvent& change, std::size_t number, std::size_t& begin,
                    std::string_view& bytes) {
  static const std::string zeros(sector, '\0');
  const std::size_t first = number * sector, end = first + sector;
  const auto offset = static_cast<std::size_t>(change.offset);
  if (change.kind == Kind::truncate) {
    if (offset >= end) return false;
    begin = std::max(offset, first);
    bytes = std::string_view(zeros).substr(0, end - begin);
    return true;
  }
  if (offset >= end || offset + change.bytes.size() <= first) return false;
  begin = std::max(offset, first);
  bytes = std::string_view(change.bytes).substr(begin - offset, end - begin);
  return true;
}

}  // namespace

void SimulatedDisk::put(const std::string& name, std::string bytes) {
  names_[name] = {std::make_shared<File>(File{std::move(bytes), {}})};
}

void SimulatedDisk::happen(const DiskEvent& event) {
  if (event.kind == Kind::acknowledge) return;
  if (event.kind == Kind::sync_folder) {
    if (honesty_ == Honesty::honest)
      for (auto& [name, stood_for] : names_) stood_for = {stood_for.back()};
    return;
  }
  Name& name = names_.try_emplace(event.file, Name{nullptr}).first->second;
  if (event.kind == Kind::create)
    name.push_back(std::make_shared<File>());
  else if (event.kind == Kind::remove)
    name.push_back(nullptr);
  else if (File& file = *name.back(); event.kind != Kind::sync)
    file.unsynced.push_back(event);
  else if (honesty_ != Honesty::ignores_sync) {
    for (const DiskEvent& change : file.unsynced) apply(change, file.synced);
    file.unsynced.clear();
  }
}

bool SimulatedDisk::has_unsynced_changes() const {
  return std::any_of(names_.begin(), names_.end(), [](const auto& entry) {
    const Name& name = entry.second;
    return name.size() > 1 || (name.back() && !name.back()->unsynced.empty());
  });
}

std::string SimulatedDisk::content(const File& file, Survivors survivors, std::mt19937& random) {
  // The length as it stood at some moment since the last sync.
  std::size_t length = file.synced.size();
  for (std::size_t left = surviving(file.unsynced.size(), survivors, random);
       const DiskEvent& change : file.unsynced) {
    if (left-- == 0) break;
    const auto offset = static_cast<std::size_t>(change.offset);
    length = change.kind == Kind::truncate ? offset : std::max(length, offset + change.bytes.size());
  }
  std::map<std::size_t, std::vector<const DiskEvent*>> by_sector;
  for (const DiskEvent& change : file.unsynced) {
    const auto first = static_cast<std::size_t>(change.offset);
    const std::size_t end =
        change.kind == Kind::truncate ? std::max(length, first) : first + change.bytes.size();
    for (std::size_t number = first / sector; number * sector < end; ++number)
      by_sector[number].push_back(&change);
  }
  std::string bytes = file.synced;
  bytes.resize(length);
  for (const auto& [number, changes] : by_sector) {
    const std::size_t kept = surviving(changes.size(), survivors, random);
    for (std::size_t i = 0; i < kept; ++i) {
      std::size_t begin = 0;
      std::string_view part;
      if (!part_in_sector(*changes[i], number, begin, part) || begin >= length) continue;
      part = part.substr(0, length - begin);
      bytes.replace(begin, part.size(), part);
    }
  }
  return bytes;
}

void SimulatedDisk::cut(const std::filesystem::path& folder, Survivors survivors,
                        std::mt19937& random) const {
  for (const auto& [name, stood_for] : names_) {
    const auto& file = stood_for[surviving(stood_for.size() - 1, survivors, random)];
    if (!file) continue;
    const std::string bytes = content(*file, survivors, random);
    std::ofstream(folder / name, std::ios::binary)
        .write(bytes.data(), static_cast<std::streamsize>(bytes.size()));
  }
}

}  // namespace faults
