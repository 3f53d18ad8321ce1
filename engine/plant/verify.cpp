// Walks what the server has: its guards, the anchors, the order of arrival, and each chain by the log's own
// walk.
#include <fmt/format.h>

#include <algorithm>
#include <map>
#include <set>

#include "anchors.hpp"
#include "bathwright/plant/station.hpp"
#include "migrations.hpp"
#include "station_state.hpp"

namespace bathwright::plant {
namespace {

constexpr const char* first_previous = "0000000000000000000000000000000000000000000000000000000000000000";

using Words = std::vector<std::string>;

/// That triggers, row security and functions are those of the format.
Outcome check_guards(Link& link, Words& problems) {
  const auto guards = link.ask(
      "SELECT g.name FROM unnest(ARRAY['entry.entry_no_change', 'entry.entry_no_truncate', 'entry.entry_in_turn', "
      "'entry.entry_arrives', 'entry.entry_anchored', 'anchor.anchor_no_change', 'anchor.anchor_no_truncate']) "
      "AS g (name) WHERE NOT EXISTS (SELECT FROM pg_trigger AS t JOIN pg_class AS c ON c.oid = t.tgrelid "
      "WHERE c.relnamespace = 'bathwright'::regnamespace AND c.relname || '.' || t.tgname = g.name "
      "AND t.tgenabled IN ('O', 'A')) "
      "UNION ALL SELECT 'the row security of entry' FROM pg_class "
      "WHERE oid = 'bathwright.entry'::regclass AND NOT relrowsecurity "
      "UNION ALL SELECT 'the function ' || proname FROM pg_proc "
      "WHERE pronamespace = 'bathwright'::regnamespace AND position(prosrc IN $1) = 0",
      {std::string(migrations.back())});
  if (!guards) return guards.problems();
  for (int row = 0; row < guards->size(); ++row)
    problems.push_back(fmt::format("{} is missing, switched off or altered: what came since is not guarded",
                                   guards->text(row, 0)));
  return Done{};
}

/// The anchors among themselves, and against those noted elsewhere.
void check_anchors(const std::vector<StoredAnchor>& anchors, const std::vector<Anchor>& noted,
                   Words& problems) {
  std::string previous = first_previous;
  std::int64_t number = 0, arrival = 0;
  std::map<std::string, std::int64_t> last_seq;
  for (const StoredAnchor& anchor : anchors) {
    const auto say = [&](std::string_view what) {
      problems.push_back(fmt::format("anchor {} {}", anchor.number, what));
    };
    if (anchor.hash != anchor_hash(anchor)) say("is not as it was made: its content does not give its hash");
    if (anchor.number != number + 1) say(fmt::format("follows anchor {}: those between are missing", number));
    if (anchor.previous != previous) say("does not follow the one before it");
    std::int64_t& before = last_seq[anchor.chain];
    if (anchor.first_seq != before + 1)
      say(fmt::format("seals entries from {} of a log of which {} were sealed before", anchor.first_seq,
                      before));
    if (anchor.arrival - (anchor.last_seq - anchor.first_seq) != arrival + 1)
      say("does not carry on the numbers of arrival");
    number = anchor.number;
    previous = anchor.hash;
    arrival = anchor.arrival;
    before = anchor.last_seq;
  }
  for (const Anchor& note : noted)
    if (!std::ranges::any_of(anchors, [&](const StoredAnchor& anchor) {
          return anchor.number == note.number && anchor.hash == note.hash;
        }))
      problems.push_back(fmt::format(
          "anchor {}, as it was noted elsewhere, is not on the server: the table was cut or written anew",
          note.number));
}

/// The entries the login sees, each against the anchor that seals its arrival.
Outcome check_arrivals(Link& link, const std::vector<StoredAnchor>& anchors,
                       const std::set<std::string>& sites, Words& problems) {
  constexpr int page = 10'000;
  auto anchor = anchors.begin();
  std::map<std::int64_t, std::int64_t> found;  // by number of the anchor
  std::int64_t arrival = 0;
  for (int read = page; read == page;) {
    const auto rows =
        link.ask(fmt::format("SELECT arrival, chain, seq, hash, site, received, login FROM bathwright.entry "
                             "WHERE arrival > $1 ORDER BY arrival LIMIT {}",
                             page),
                 {std::to_string(arrival)});
    if (!rows) return rows.problems();
    read = rows->size();
    for (int row = 0; row < read; ++row) {
      arrival = rows->integer(row, 0);
      while (anchor != anchors.end() && anchor->arrival < arrival) ++anchor;
      const auto say = [&](std::string_view what) {
        problems.push_back(fmt::format("arrival {}, entry {} of log {}: {}", arrival, rows->integer(row, 2),
                                       rows->text(row, 1), what));
      };
      if (anchor == anchors.end()) {
        say("no anchor seals it");
        continue;
      }
      ++found[anchor->number];
      if (rows->text(row, 1) != anchor->chain ||
          rows->integer(row, 2) != anchor->last_seq - (anchor->arrival - arrival))
        say(fmt::format("anchor {} seals another entry here", anchor->number));
      if (arrival == anchor->arrival && rows->text(row, 3) != anchor->last_hash)
        say(fmt::format("anchor {} seals another hash", anchor->number));
      if (rows->text(row, 4) != anchor->site || rows->text(row, 5) != anchor->received ||
          rows->text(row, 6) != anchor->login)
        say(fmt::format("its site, time or login is not what anchor {} seals", anchor->number));
    }
  }
  for (const StoredAnchor& sealed : anchors) {
    const std::int64_t count = sealed.last_seq - sealed.first_seq + 1;
    if ((sites.contains("*") || sites.contains(sealed.site)) && found[sealed.number] != count)
      problems.push_back(fmt::format("anchor {} seals {} entries of log {}, and {} are there", sealed.number,
                                     count, sealed.chain, found[sealed.number]));
  }
  return Done{};
}

logbook::Verification not_taken(const Problems& problems, std::int64_t entries) {
  logbook::Verification verification;
  verification.ok = false;
  verification.entries = entries;
  for (const Problem& problem : problems)
    verification.problems.push_back({logbook::FindingKind::changed, 0, problem.text()});
  return verification;
}

}  // namespace

Result<Verification> Station::verify(const std::filesystem::path& scratch, const std::vector<Anchor>& noted) {
  if (auto known = state_->check_format(); !known) return known.problems();
  Link& link = state_->link;
  Transaction snapshot(link);
  if (auto begun = snapshot.begin_snapshot(); !begun) return begun.problems();

  Verification result;
  if (auto checked = check_guards(link, result.problems); !checked) return checked.problems();
  const auto anchors = read_anchors(link);
  if (!anchors) return anchors.problems();
  result.anchors = static_cast<std::int64_t>(anchors->size());
  if (!anchors->empty()) result.head = {anchors->back().number, anchors->back().hash};
  check_anchors(*anchors, noted, result.problems);
  const auto own = link.ask("SELECT s FROM bathwright.sites() AS s");
  if (!own) return own.problems();
  std::set<std::string> sites;
  for (int row = 0; row < own->size(); ++row) sites.insert(own->text(row, 0));
  if (auto checked = check_arrivals(link, *anchors, sites, result.problems); !checked)
    return checked.problems();

  const auto chains =
      link.ask("SELECT chain, min(site) FROM bathwright.entry GROUP BY chain ORDER BY min(arrival)");
  if (!chains) return chains.problems();
  const logbook::SystemClock clock;
  for (int row = 0; row < chains->size(); ++row) {
    Verification::OfChain of{chains->text(row, 0), chains->text(row, 1), {}};
    const auto entries = state_->entries_of(of.chain);
    if (!entries) return entries.problems();
    std::vector<logbook::Anchor> sealed;
    for (const StoredAnchor& anchor : *anchors)
      if (anchor.chain == of.chain) sealed.push_back({anchor.last_seq, anchor.last_hash});
    const std::filesystem::path copy = scratch / (of.chain + ".sqlite");
    const auto remove_copy = [&] {
      std::error_code ignored;
      for (const char* suffix : {"", "-wal", "-shm"})
        std::filesystem::remove(copy.string() + suffix, ignored);
    };
    remove_copy();
    {
      auto opened = logbook::Logbook::open(copy, logbook::OpenMode::create, clock);
      if (!opened) return opened.problems();
      auto log = *std::move(opened);
      const auto taken = log.take_over(*entries);
      of.log = taken ? log.verify(sealed)
                     : not_taken(taken.problems(), static_cast<std::int64_t>(entries->size()));
    }
    remove_copy();
    result.ok = result.ok && of.log.ok;
    result.chains.push_back(std::move(of));
  }
  result.ok = result.ok && result.problems.empty();
  return result;
}

}  // namespace bathwright::plant
