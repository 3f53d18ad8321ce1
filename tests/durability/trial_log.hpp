// The one place where the fault trials touch the logbook: how they open it, what they write, and how they
// hold what they read against what was acknowledged.
#pragma once

#include <filesystem>
#include <map>
#include <stdexcept>
#include <string>

#include "bathwright/logbook/logbook.hpp"
#include "fault_row.hpp"

namespace faults {

namespace logbook = bathwright::logbook;

/// Sequence and hash of every entry whose append returned.
using Acknowledged = std::map<std::int64_t, std::string>;

/// How long a trial waits for a lock: long against a commit of another writer.
inline constexpr std::chrono::milliseconds patience{10'000};

[[nodiscard]] bathwright::Result<logbook::Logbook> open_log(
    const std::filesystem::path& path, logbook::OpenMode mode = logbook::OpenMode::create,
    std::chrono::milliseconds wait = patience, const logbook::Clock* clock = nullptr);

/// A note whose body has `bytes` of text, in which `mark(number)` stands over and over, so that a piece of
/// the body says whose it is.
[[nodiscard]] logbook::NewEntry numbered_note(std::int64_t number, std::size_t bytes);
[[nodiscard]] std::string mark(std::int64_t number);

/// The value; std::runtime_error with the problems where there is none: the trial itself cannot be made.
template <class T>
T must(bathwright::Result<T> result) {
  if (!result) throw std::runtime_error(text(result.problems()));
  return *std::move(result);
}

/// The first problem as the person sees it, with the folder of the log written as F.
[[nodiscard]] std::string words(const bathwright::Problems& problems, const std::filesystem::path& log);

/// Opens the log after the fault as the next person would and holds it against what was acknowledged: it
/// opens, holds every acknowledged entry, at most `in_flight` more, verifies, and takes the next entry. What
/// does not hold is a broken promise of `row`, under the name `where`. The entry added goes into
/// `acknowledged`, which then tells what the log holds.
void check_kept(const std::filesystem::path& path, Acknowledged& acknowledged, std::size_t in_flight,
                const std::string& where, FaultRow& row);

}  // namespace faults
