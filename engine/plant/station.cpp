#include "bathwright/plant/station.hpp"

#include <fmt/format.h>
#include <fmt/ranges.h>

#include <charconv>
#include <span>

#include "migrations.hpp"
#include "station_state.hpp"
#include "stored_entry.hpp"

namespace bathwright::plant {
namespace {

/// A body may have 1 MiB: enough entries that the way to the server and back matters little, few enough that
/// one lot arrives well within the time-out.
constexpr std::size_t entries_a_page = 256;
constexpr std::size_t bytes_a_lot = 1 << 20;

/// The first entries of `entries` that make up one lot: one at least.
std::span<const logbook::Entry> next_lot(std::span<const logbook::Entry> entries) {
  std::size_t count = 1;
  for (std::size_t bytes = entries[0].body.size(); count < entries.size(); ++count)
    if ((bytes += entries[count].body.size()) > bytes_a_lot) break;
  return entries.first(count);
}

Problem went_on_apart(const Connection& connection, std::int64_t seq) {
  return {
      Fault::inconsistent_data, connection.words(),
      fmt::format("the server has another entry {} of this log: two copies of it went on apart", seq),
      "one log that goes on in one place",
      "nothing was sent. Keep this file; fetch the server's copy into a new one, go on with that, and log "
      "there what only this file has"};
}

/// Conditions of a WHERE and their parameters.
class Conditions {
 public:
  /// `condition` holds {} where the parameter goes.
  void restrict(std::string_view condition, std::string value) {
    parameters_.emplace_back(std::move(value));
    texts_.push_back(fmt::format(fmt::runtime(condition), fmt::format("${}", parameters_.size())));
  }
  [[nodiscard]] std::string where() const { return fmt::format("WHERE {}", fmt::join(texts_, " AND ")); }
  [[nodiscard]] const Parameters& parameters() const { return parameters_; }

 private:
  std::vector<std::string> texts_{"TRUE"};
  Parameters parameters_;
};

/// `text` anywhere, as a pattern of LIKE with '!' before what is meant to the letter.
std::string anywhere(std::string_view text) {
  std::string pattern = "%";
  for (const char c : text) {
    if (c == '!' || c == '%' || c == '_') pattern += '!';
    pattern += c;
  }
  return pattern + '%';
}

}  // namespace

Station::Station(const Connection& connection, std::string site)
    : state_(std::make_unique<State>(State{Link(connection), std::move(site)})) {}
Station::Station(Station&&) noexcept = default;
Station& Station::operator=(Station&&) noexcept = default;
Station::~Station() = default;

Outcome Station::State::check_format() {
  if (format_known) return Done{};
  const auto version = link.ask("SELECT coalesce(max(version), 0) FROM bathwright.format");
  if (!version) return version.problems();
  if (version->integer(0, 0) != format_version)
    return Problem{Fault::bad_input, link.connection().words(),
                   fmt::format("has tables of version {}", version->integer(0, 0)),
                   fmt::format("version {}", format_version),
                   version->integer(0, 0) < format_version
                       ? "let the administrator run bathwright plant set-up"
                       : "use the newer program"};
  format_known = true;
  return Done{};
}

Result<Sent> Station::send(const logbook::Logbook& log) {
  Sent result;
  const auto head = log.head();
  if (!head) return head.problems();
  if (!*head) return result;
  const std::int64_t last_here = (*head)->seq;
  if (auto known = state_->check_format(); !known) return known.problems();
  Link& link = state_->link;
  const auto first = log.find(1);
  if (!first) return first.problems();
  result.chain = first->hash;

  const auto there = link.ask(
      "SELECT seq, hash, (SELECT hash FROM bathwright.entry WHERE chain = $1 AND seq = $2) "
      "FROM bathwright.entry WHERE chain = $1 ORDER BY seq DESC LIMIT 1",
      {result.chain, std::to_string(last_here)});
  if (!there) return there.problems();
  const std::int64_t last_there = there->size() == 0 ? 0 : there->integer(0, 0);
  result.already_there = std::min(last_here, last_there);
  result.missing_here = last_there - result.already_there;
  if (last_there > 0) {
    const auto ours = log.find(result.already_there);
    if (!ours) return ours.problems();
    if (ours->hash != there->text(0, last_there <= last_here ? 1 : 2))
      return went_on_apart(link.connection(), result.already_there);
  }

  logbook::Filter page;
  page.limit = entries_a_page;
  page.after_seq = result.already_there;
  while (page.after_seq < last_here) {
    const auto entries = log.list(page);
    if (!entries) return entries.problems();
    if (entries->empty()) break;
    for (std::span<const logbook::Entry> left = *entries; !left.empty();) {
      const auto lot = next_lot(left);
      const auto inserted = insert_entries(link, result.chain, state_->site, lot);
      if (!inserted) {
        if (link.sqlstate() == "BW004") return went_on_apart(link.connection(), lot.front().seq);
        // Those before the entry that this login may not write need not wait for one that may.
        std::int64_t refused = 0;
        const std::string& seq = link.detail();
        if (link.sqlstate() == "BW003") std::from_chars(seq.data(), seq.data() + seq.size(), refused);
        if (const std::int64_t before = refused - lot.front().seq; before > 0)
          (void)insert_entries(link, result.chain, state_->site, lot.first(static_cast<std::size_t>(before)));
        return inserted.problems();
      }
      result.sent += *inserted;
      left = left.subspan(lot.size());
    }
    page.after_seq = entries->back().seq;
  }
  const auto anchor =
      link.ask("SELECT number, hash FROM bathwright.anchor WHERE chain = $1 ORDER BY number DESC LIMIT 1",
               {result.chain});
  if (!anchor) return anchor.problems();
  if (anchor->size() > 0) result.anchor = {anchor->integer(0, 0), anchor->text(0, 1)};
  return result;
}

Result<std::vector<logbook::Entry>> Station::State::entries_of(const std::string& chain) {
  std::vector<logbook::Entry> entries;
  for (std::size_t read = entries_a_page; read == entries_a_page;) {
    auto page = read_all_arrived(link.ask(
        select_arrived(fmt::format("WHERE chain = $1 AND seq > $2 ORDER BY seq LIMIT {}", entries_a_page)),
        {chain, std::to_string(entries.empty() ? 0 : entries.back().seq)}));
    if (!page) return page.problems();
    read = page->size();
    auto arrived = *std::move(page);
    for (Arrived& one : arrived) entries.push_back(std::move(one.entry));
  }
  return entries;
}

Result<std::vector<logbook::Entry>> Station::fetch(const std::string& chain) {
  if (auto known = state_->check_format(); !known) return known.problems();
  auto entries = state_->entries_of(chain);
  if (entries && entries->empty())
    return Problem{Fault::bad_input, state_->link.connection().words(),
                   fmt::format("has no log {} that this login may read", chain), "",
                   "list the logs to find it"};
  return entries;
}

Result<std::vector<Chain>> Station::chains() {
  if (auto known = state_->check_format(); !known) return known.problems();
  const auto rows = state_->link.ask(
      "SELECT first.chain, first.site, first.station, last.last_seq, last.received FROM bathwright.entry AS first "
      "CROSS JOIN LATERAL (SELECT last_seq, received FROM bathwright.anchor WHERE chain = first.chain "
      "ORDER BY number DESC LIMIT 1) AS last WHERE first.seq = 1 ORDER BY first.arrival");
  if (!rows) return rows.problems();
  std::vector<Chain> chains;
  for (int row = 0; row < rows->size(); ++row)
    chains.push_back({rows->text(row, 0), rows->text(row, 1), rows->text(row, 2), rows->integer(row, 3),
                      rows->text(row, 4)});
  return chains;
}

Result<std::vector<Arrived>> Station::list(const Filter& filter) {
  if (auto known = state_->check_format(); !known) return known.problems();
  const logbook::Filter& of = filter.entry;
  Conditions conditions;
  if (!filter.site.empty()) conditions.restrict("site = {}", filter.site);
  if (!filter.station.empty()) conditions.restrict("station = {}", filter.station);
  if (!filter.chain.empty()) conditions.restrict("chain = {}", filter.chain);
  if (!of.tank.empty()) conditions.restrict("tank = {}", of.tank);
  if (of.kind) conditions.restrict("kind = {}", std::string(logbook::name(*of.kind)));
  if (!of.by.empty()) conditions.restrict("\"by\" = {}", of.by);
  if (!of.shift.empty()) conditions.restrict("shift = {}", of.shift);
  if (of.about) conditions.restrict("about = {}::bigint", std::to_string(*of.about));
  if (of.from) conditions.restrict("at >= {}", logbook::iso_utc(*of.from));
  if (of.to) conditions.restrict("at < {}", logbook::iso_utc(*of.to));
  // The collation "C" knows the case of A to Z only, as a local log does.
  if (!of.text.empty())
    conditions.restrict(
        "lower(concat_ws(chr(10), body, \"by\", shift) COLLATE \"C\") LIKE lower({}::text COLLATE \"C\") ESCAPE '!'",
        anywhere(of.text));
  if (of.after_seq != 0)
    conditions.restrict(of.newest_first ? "arrival < {}::bigint" : "arrival > {}::bigint",
                        std::to_string(of.after_seq));
  std::string clauses =
      fmt::format("{} ORDER BY arrival {}", conditions.where(), of.newest_first ? "DESC" : "ASC");
  if (of.limit != 0) clauses += fmt::format(" LIMIT {}", of.limit);
  return read_all_arrived(state_->link.ask(select_arrived(clauses), conditions.parameters()));
}

Result<std::vector<Arrived>> Station::open_slips(const std::string& tank) {
  if (auto known = state_->check_format(); !known) return known.problems();
  Conditions conditions;
  if (!tank.empty()) conditions.restrict("tank = {}", tank);
  return read_all_arrived(state_->link.ask(
      select_arrived(
          conditions.where() +
          " AND kind = 'slip' AND NOT EXISTS (SELECT FROM bathwright.entry AS answer WHERE "
          "answer.chain = entry.chain AND answer.about = entry.seq AND answer.kind = 'slip-closed') "
          "ORDER BY arrival"),
      conditions.parameters()));
}

}  // namespace bathwright::plant
