#include "tank_state.hpp"

#include <bathwright/bath/at_aims.hpp>
#include <bathwright/book/from_log.hpp>
#include <bathwright/sheets/log_sheet.hpp>
#include <bathwright/shopfiles/policy_file.hpp>
#include <bathwright/shopfiles/readings_file.hpp>
#include <bathwright/shopfiles/tank_file.hpp>
#include <bathwright/units/show.hpp>
#include <cmath>
#include <fstream>
#include <iterator>

#include "documents.hpp"

namespace bathwright::work {
namespace {

/// The tank as an analysis of the log left it. Salt views repeat what the other levels say and are left out.
Result<bath::TankState> state_of(const LastAnalysis& last, const Shop& shop) {
  std::map<std::string, double> g_per_L;
  for (const auto& [id, level] : last.book.g_per_L) {
    const bath::Quantity* quantity = shop.type().quantity(id);
    if (quantity && !quantity->salt_view) g_per_L[id] = level;
  }
  return shop.chemistry.state_from(g_per_L, *last.book.pH, last.volume, last.temperature);
}

/// The tank as the book has it now: its last analysis carried through what was logged since.
Result<StartingState> from_book(const analysis::Book& book, const LastAnalysis& last, const Shop& shop,
                                std::optional<std::chrono::sys_days> today) {
  const analysis::Carried& carried = *book.carried;
  bath::TankState state{carried.component_mol, carried.volume_L, last.temperature};
  constexpr int most_rounds = 60;
  for (int round = 0; round < most_rounds; ++round) {
    const double missing = carried.volume_L - shop.chemistry.volume_L(state);
    state.water_kg += missing;
    if (std::abs(missing) < 1e-12 * carried.volume_L) break;
  }
  const auto solved = shop.chemistry.speciate(state);
  if (!solved) return solved.problems();
  const std::size_t counted = carried.counted.size();
  std::string from = "analysis of " + book.from;
  from += counted == 0 ? ", carried to now: nothing was logged since"
                       : ", carried through " + std::to_string(counted) +
                             (counted == 1 ? " entry logged since" : " entries logged since");
  std::vector<std::string> left_out;
  for (const std::string& one : carried.not_counted) left_out.push_back("Not in the book: " + one + ".");
  return StartingState{std::move(state), {from, last.temperature, solved->pH(), left_out}, today};
}

/// Of "2026-03-02T05:40:00" or "2026-03-02 05:40".
std::optional<std::chrono::sys_days> date_of(const std::string& time) {
  const auto midnight = logbook::utc_from_iso(time.substr(0, std::size("2026-03-02") - 1) + "T00:00:00.000Z");
  if (!midnight) return std::nullopt;
  return std::chrono::floor<std::chrono::days>(*midnight);
}

/// The date `hours` ago, by the shop's clock.
std::optional<std::chrono::sys_days> date_before(double hours,
                                                 const std::optional<shifts::Calendar>& calendar) {
  const auto then = wall_clock().utc_now() - std::chrono::round<std::chrono::milliseconds>(
                                                 std::chrono::duration<double, std::ratio<3600>>(hours));
  return date_of(sheets::local_time(logbook::iso_utc(then), calendar));
}

struct BookBefore {
  std::optional<book::FromLog> from_log;  ///< nothing: there is no log, or no analysis to start from
  std::optional<shifts::Calendar> calendar;
};

/// What the log has of the tank up to these readings; without any, up to now.
Result<BookBefore> book_before(const Session& session, const Shop& shop, const std::string& readings_path,
                               const std::string& sampled) {
  std::error_code failure;
  if (session.log_file.empty() || !std::filesystem::exists(log_path(session), failure)) return BookBefore{};
  const auto log = open_log_to_read(session);
  if (!log) return log.problems();
  const auto calendar = calendar_of(*log);
  if (!calendar) return calendar.problems();
  std::ifstream file(readings_path, std::ios::binary);
  auto from_log = book::from_log(
      *log, *calendar, shop.tank, shop.chemistry,
      {std::string(std::istreambuf_iterator<char>(file), {}), sampled, wall_clock().utc_now()});
  if (!from_log) return from_log.problems();
  return BookBefore{*std::move(from_log), *calendar};
}

/// Whether two documents of `analyse` hold the same figures, whatever is said about them.
bool same_figures(const Json& a, const Json& b) {
  // A level that is 0 because the book says so is one more equation than one that is taken as 0: the last
  // digits of the others may differ.
  constexpr int digits = 10;
  const auto rounded = [](const Json& figure) {
    return figure.is_number() ? Json(units::significant(figure.get<double>(), digits)) : figure;
  };
  const auto figures = [&](const Json& document) {
    Json kept;
    for (const char* key : {"volume_L", "temperature_C", "pH"})
      kept[key] = rounded(document.value(key, Json()));
    for (const Json& result : document.at("results"))
      kept["results"].push_back({result.value("quantity", Json()), rounded(result.value("value", Json()))});
    return kept;
  };
  return figures(a) == figures(b);
}

}  // namespace

Result<Analysed> analyse(const Session& session, const Shop& shop, const std::string& readings_path) {
  auto readings = shopfiles::read_readings(readings_path);
  if (!readings) {
    if (shopfiles::read_tank(readings_path, matter::StockCatalogue::built_in()))
      return Problem{Fault::bad_input, readings_path, "is a tank file", "a file of readings",
                     "Give the tank first, then its readings."};
    return readings.problems();
  }
  const auto last = last_analysis(session, shop.tank.name);
  if (!last) return last.problems();
  const auto carried = book_before(session, shop, readings_path, readings->sampled);
  if (!carried) return carried.problems();
  std::optional<analysis::Book> book;
  if (carried->from_log)
    book = carried->from_log->book;
  else if (*last)
    book = (*last)->book;
  auto analysis = analysis::evaluate(*readings, shop.tank, shop.chemistry, book);
  if (!analysis) return analysis.problems();
  Analysed analysed{*std::move(readings), *std::move(analysis), std::nullopt, {}};
  if (*last &&
      same_figures(analysis_document(shop.tank, shop.chemistry, analysed.analysis), (*last)->document)) {
    analysed.logged_as = (*last)->seq;
    analysed.changed_since = (*last)->changed_since;
  } else if (carried->from_log) {
    analysed.changed_since = carried->from_log->after_sample;
  }
  return analysed;
}

Result<logbook::NewEntry> entry_computed(const Shop& shop, const std::string& readings_path,
                                         logbook::EntryKind kind, Json body) {
  for (const auto& [key, path] :
       {std::pair{"tank_file", shop.tank.file}, std::pair{"readings_file", readings_path}}) {
    std::ifstream file(path, std::ios::binary);
    body["inputs"][key] = std::string(std::istreambuf_iterator<char>(file), {});
    if (!file)
      return Problem{Fault::io, path, "can no longer be read", "the file that was computed from", ""};
  }
  logbook::NewEntry entry;
  entry.kind = kind;
  entry.tank = shop.tank.name;
  entry.body = text_of(std::move(body));
  entry.bath_type = shop.made_with;
  return entry;
}

Result<StartingState> starting_state(const Session& session, const Shop& shop,
                                     const std::string& readings_path) {
  if (!readings_path.empty()) {
    auto analysed = analyse(session, shop, readings_path);
    if (!analysed) return analysed.problems();
    const analysis::Analysis& a = analysed->analysis;
    return StartingState{a.state,
                         {"readings of " + readings_path, a.temperature, a.pH, analysed->changed_since},
                         date_of(analysed->readings.sampled)};
  }
  const auto last = last_analysis(session, shop.tank.name);
  if (!last) return last.problems();
  if (*last) {
    const auto book = book_before(session, shop, "", "");
    if (!book) return book.problems();
    constexpr double oldest_days = 31;  // beyond it what nobody logged outweighs what was
    const auto& logged = book->from_log;
    const double days = logged ? logged->hours / 24 : 0;
    const bool carried = logged && logged->book.carried && days <= oldest_days;
    const auto day = date_before(carried ? 0 : 24 * days, book->calendar);
    if (carried) return from_book(logged->book, **last, shop, day);
    const std::string age = days <= oldest_days ? ""
                                                : ", " + std::to_string(std::lround(days)) +
                                                      " days old: too old to be carried through the log";
    auto state = state_of(**last, shop);
    if (!state) return state.problems();
    return StartingState{*std::move(state),
                         {"analysis of " + (*last)->book.from + age, (*last)->temperature, *(*last)->book.pH,
                          (*last)->changed_since},
                         day};
  }
  auto state = bath::state_at_aims(shop.tank, shop.chemistry);
  if (!state) return state.problems();
  const bath::Aim* aim = shop.tank.aim("pH");
  double pH = aim ? aim->aim : 0;
  if (!aim) {
    const auto solved = shop.chemistry.speciate(*state);
    if (!solved) return solved.problems();
    pH = solved->pH();
  }
  return StartingState{
      *std::move(state),
      {"as at its aims and at the mark; no readings and no log were given", shop.tank.temperature, pH, {}},
      std::nullopt};
}

Result<forecast::Policy> policy_from(const StartingState& start, const std::string& file,
                                     const bath::BathType& type) {
  auto policy = shopfiles::read_policy(file, type);
  if (policy && start.day) {
    forecast::Policy dated = *std::move(policy);
    dated.calendar = dated.calendar.starting(*start.day);
    return dated;
  }
  return policy;
}

}  // namespace bathwright::work
