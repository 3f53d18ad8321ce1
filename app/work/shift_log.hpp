// The shift log: where it is, writing an entry, the last analysis of a tank.
#pragma once

#include <bathwright/analysis/analysis.hpp>
#include <bathwright/logbook/logbook.hpp>
#include <bathwright/shifts/calendar.hpp>
#include <filesystem>

#include "documents.hpp"
#include "session.hpp"

namespace bathwright::work {

/// --log, or shift-log.sqlite in the user's data folder ($XDG_DATA_HOME/bathwright,
/// ~/.local/share/bathwright).
[[nodiscard]] std::filesystem::path log_path(const Session& session);

/// The computer's clock, for every log that is opened here.
[[nodiscard]] const logbook::Clock& wall_clock();

/// Opens for reading; a log that does not exist is bad input.
Result<logbook::Logbook> open_log_to_read(const Session& session);

/// Opens for writing, with this program's and this station's names. Makes the log, and the data folder where
/// it is to stand there.
struct OpenLog {
  logbook::Logbook log;
  std::filesystem::path path;
  bool is_new = false;
};
Result<OpenLog> open_log_to_write(const Session& session);

/// The calendar of the log's shifts; nothing where none were set.
Result<std::optional<shifts::Calendar>> calendar_of(const logbook::Logbook& log);

/// The log with one entry more, signed with the session's names and PINs. The shift is the session's, else
/// that of the hour. Makes the log on the first entry.
struct Logged {
  logbook::Entry entry;
  std::filesystem::path path;
  bool new_log = false;
};
Result<Logged> append_to_log(const Session& session, logbook::NewEntry entry);

/// Signatures of the session's signer and witness for a log; none where the log has no people and nobody is
/// named as witness.
Result<logbook::Signatures> signatures_for(const Session& session, const logbook::Logbook& log);

/// A change to the log's people or rules, signed likewise.
using PeopleChange = std::function<Result<logbook::Entry>(logbook::Logbook&, const logbook::Signatures&)>;
Result<Logged> change_people(const Session& session, const PeopleChange& change);

/// Several at once, all or none, into an open log; by and shift are filled in as above, the shift where an
/// entry has none, by when it happened.
Result<std::vector<logbook::Entry>> append_all(const Session& session, OpenLog& open,
                                               std::vector<logbook::NewEntry> entries);

/// "Logged as entry 12 in shift-log.sqlite."
[[nodiscard]] std::string words(const Logged& logged);

/// An analysis of the log, and what the log has of its tank after it.
struct LastAnalysis {
  std::int64_t seq = 0;
  Json document;
  analysis::Book book;
  units::Litres volume;
  units::Celsius temperature;
  std::vector<std::string> changed_since;  ///< additions, dumps and plans, a sentence for each kind
  bool added_since = false;                ///< an addition or a dump is among them
};

/// The last analysis of the tank in --log; nothing without --log, without a file there or without an analysis
/// in it.
Result<std::optional<LastAnalysis>> last_analysis(const Session& session, const std::string& tank);

}  // namespace bathwright::work
