#include <fmt/format.h>

#include <algorithm>
#include <bathwright/book/entries.hpp>
#include <bathwright/book/from_log.hpp>
#include <nlohmann/json.hpp>

#include "book_terms.hpp"

namespace bathwright::book {
namespace {

using Json = nlohmann::json;
using logbook::Entry;
using logbook::EntryKind;
using logbook::UtcTime;
using Calendar = std::optional<shifts::Calendar>;

/// The time of day of readings as a moment; nothing where it is not one.
std::optional<UtcTime> moment_of(const std::string& local, const Calendar& calendar) {
  if (local.size() < 16) return std::nullopt;
  const std::string seconds = local.size() >= 19 ? local.substr(16, 3) : ":00";
  const auto shown =
      logbook::utc_from_iso(local.substr(0, 10) + "T" + local.substr(11, 5) + seconds + ".000Z");
  if (!shown || !calendar) return shown;
  return calendar->zone().occurrence(shifts::LocalTime(shown->time_since_epoch())).first;
}

std::string text_at(const Json& body, const char* key) {
  return body.is_object() && body.contains(key) && body[key].is_string() ? body[key].get<std::string>() : "";
}

/// When what an entry tells was done; of an analysis, when the sample was taken.
std::optional<UtcTime> done_at(const Entry& entry, const Calendar& calendar) {
  if (entry.kind == EntryKind::analysis)
    if (const auto sampled = moment_of(text_at(Json::parse(entry.body, nullptr, false), "sampled"), calendar))
      return sampled;
  return logbook::utc_from_iso(entry.happened.empty() ? entry.at : entry.happened);
}

std::optional<std::vector<double>> numbers(const Json& body, const char* key, std::size_t count) {
  if (!body.is_object() || !body.contains(key) || !body[key].is_array() || body[key].size() != count)
    return std::nullopt;
  std::vector<double> values;
  for (const Json& value : body[key]) {
    if (!value.is_number()) return std::nullopt;
    values.push_back(value.get<double>());
  }
  return values;
}

/// Levels of the document, g/L, that pass `wanted`.
std::map<std::string, double> levels(const Json& body, const char* list, const auto& wanted) {
  std::map<std::string, double> g_per_L;
  if (!body.contains(list) || !body[list].is_array()) return g_per_L;
  for (const Json& level : body[list])
    if (level.is_object() && text_at(level, "unit") == "g/L" && level.contains("value") &&
        level["value"].is_number() && wanted(level))
      g_per_L[text_at(level, "quantity")] = level["value"].get<double>();
  return g_per_L;
}

/// Amounts of a document that does not state them: of its levels, each as sure as the rows of the book say.
bool from_levels(Start& start, const Json& body, const bath::Chemistry& chemistry) {
  const auto own = [&](const Json& level) {
    const bath::Quantity* quantity = chemistry.type().quantity(text_at(level, "quantity"));
    return quantity && !quantity->salt_view;
  };
  for (const char* key : {"volume_L", "temperature_C", "pH"})
    if (!body.contains(key) || !body[key].is_number()) return false;
  auto state = chemistry.state_from(levels(body, "results", own), body["pH"].get<double>(),
                                    {body["volume_L"].get<double>()}, {body["temperature_C"].get<double>()});
  if (!state) return false;
  start.state = *std::move(state);
  const std::size_t n = start.state.component_mol.size();
  start.covariance.assign(n * n, 0);
  for (std::size_t i = 0; i < n; ++i) {
    const double u = doubt("not-stated") * start.state.component_mol[i];
    start.covariance[i * n + i] = u * u;
  }
  return true;
}

bool from_amounts(Start& start, const Json& body, const bath::Chemistry& chemistry) {
  if (!body.contains("tank_state") || !body["tank_state"].is_object()) return false;
  const Json& told = body["tank_state"];
  if (!told.contains("components") || told["components"] != Json(chemistry.components())) return false;
  const std::size_t n = chemistry.components().size();
  auto mol = numbers(told, "component_mol", n), covariance = numbers(told, "covariance_mol2", n * n);
  if (!mol || !covariance || !told.contains("water_kg") || !told["water_kg"].is_number() ||
      !body.contains("temperature_C") || !body["temperature_C"].is_number())
    return false;
  start.state = {*std::move(mol), told["water_kg"].get<double>(), {body["temperature_C"].get<double>()}};
  start.covariance = *std::move(covariance);
  return true;
}

class Reading {
 public:
  Reading(const logbook::Logbook& log, const Calendar& calendar, const bath::Tank& tank,
          const bath::Chemistry& chemistry, const Sample& sample)
      : log_(log),
        calendar_(calendar),
        tank_(tank),
        chemistry_(chemistry),
        sample_(sample),
        sampled_(moment_of(sample.sampled, calendar)) {}

  Result<std::optional<FromLog>> run() {
    if (Outcome found = find_start(); !found) return found.problems();
    if (!start_) return std::optional<FromLog>{};
    if (Outcome read = read_movements(); !read) return read.problems();
    const auto until = sampled_.value_or(sample_.now);
    const double hours = std::chrono::duration<double, std::ratio<3600>>(until - from_).count();
    answer_.hours = hours;
    auto carried = carry(*start_, movements_, hours, tank_, chemistry_);
    carried.not_counted.insert(carried.not_counted.end(), not_counted_.begin(), not_counted_.end());
    answer_.book.carried = std::move(carried);
    return std::optional(std::move(answer_));
  }

 private:
  bool is_this_sample(const Json& body) const {
    if (!sample_.readings_file.empty() && body.is_object() && body.contains("inputs") &&
        text_at(body["inputs"], "readings_file") == sample_.readings_file)
      return true;
    return !sample_.sampled.empty() && text_at(body, "sampled") == sample_.sampled;
  }

  Outcome find_start() {
    logbook::Filter filter;
    filter.tank = tank_.name;
    filter.kind = EntryKind::analysis;
    filter.newest_first = true;
    filter.limit = 100;  // a tank without a whole analysis among so many has none worth starting from
    const auto analyses = log_.list(filter);
    if (!analyses) return analyses.problems();
    for (const Entry& entry : *analyses) {
      const auto corrected = log_.is_corrected(entry.seq);
      if (!corrected) return corrected.problems();
      if (*corrected) continue;
      const Json body = Json::parse(entry.body, nullptr, false);
      if (is_this_sample(body)) continue;
      const auto taken = done_at(entry, calendar_);
      if (!taken || (sampled_ && *taken >= *sampled_)) continue;
      auto start = start_of(entry, chemistry_);
      if (!start) continue;
      const bool fitted = !did_not_fit(body);
      // One that did not fit is passed over, unless the one before it did not fit either: then it is the book
      // that was wrong.
      if (!start_ || fitted) take_start(entry, *taken, *std::move(start), body);
      if (fitted || passed_over_) break;
      passed_over_ = entry.seq;
    }
    if (passed_over_ && answer_.entry != *passed_over_)
      not_counted_.push_back(
          fmt::format("entry {} (analysis) did not fit what the log had and is no start", *passed_over_));
    return Done{};
  }

  static bool did_not_fit(const Json& body) {
    return body.contains("misfit") && body["misfit"].is_object() && body["misfit"].contains("alarm") &&
           body["misfit"]["alarm"] == true;
  }

  void take_start(const Entry& entry, UtcTime taken, Start start, const Json& body) {
    start_ = std::move(start);
    from_ = taken;
    answer_.entry = entry.seq;
    answer_.book.from = fmt::format("log entry {}, {}", entry.seq, entry.at);
    answer_.book.pH.reset();
    if (body.contains("pH") && body["pH"].is_number()) answer_.book.pH = body["pH"].get<double>();
  }

  Outcome read_movements() {
    logbook::Filter filter;
    filter.tank = tank_.name;
    filter.from = from_;
    auto listed = log_.list(filter);
    if (!listed) return listed.problems();
    std::vector<std::pair<UtcTime, const Entry*>> in_time;
    std::map<std::int64_t, const Entry*> corrections;
    for (const Entry& entry : *listed) {
      if (entry.kind == EntryKind::correction && entry.about) corrections[*entry.about] = &entry;
      if (entry.kind != EntryKind::addition && entry.kind != EntryKind::level &&
          entry.kind != EntryKind::dump && entry.kind != EntryKind::ampere_hours)
        continue;
      const auto done = done_at(entry, calendar_);
      if (!done || *done <= from_) continue;
      if (!sampled_ || *done <= *sampled_)
        in_time.emplace_back(*done, &entry);
      else if (entry.kind == EntryKind::addition || entry.kind == EntryKind::dump)
        answer_.after_sample.push_back(
            fmt::format("entry {} ({}) was done after this sample and is not in it.", entry.seq,
                        logbook::name(entry.kind)));
    }
    std::ranges::stable_sort(in_time, {}, [](const auto& timed) { return timed.first; });
    for (const auto& [time, entry] : in_time) {
      const auto correction = corrections.find(entry->seq);
      const bool corrected = correction != corrections.end();
      auto movement = movement_of(entry->kind, corrected ? correction->second->body : entry->body, tank_,
                                  chemistry_.type());
      if (movement) {
        movements_.push_back(*std::move(movement));
        movements_.back().entry = entry->seq;
      } else {
        not_counted_.push_back(
            corrected ? fmt::format("entry {} ({}) was corrected by {}, which gives no amount", entry->seq,
                                    logbook::name(entry->kind), correction->second->seq)
                      : fmt::format("entry {} ({}) {}", entry->seq, logbook::name(entry->kind),
                                    movement.problems().front().what));
      }
    }
    return Done{};
  }

  const logbook::Logbook& log_;
  const Calendar& calendar_;
  const bath::Tank& tank_;
  const bath::Chemistry& chemistry_;
  const Sample& sample_;
  const std::optional<UtcTime> sampled_;
  UtcTime from_{};
  std::optional<Start> start_;
  std::optional<std::int64_t> passed_over_;
  std::vector<Movement> movements_;
  std::vector<std::string> not_counted_;
  FromLog answer_;
};

}  // namespace

std::optional<Start> start_of(const Entry& analysis, const bath::Chemistry& chemistry) {
  const Json body = Json::parse(analysis.body, nullptr, false);
  if (!body.is_object()) return std::nullopt;
  Start start;
  start.what = fmt::format("analysis of entry {}", analysis.seq);
  start.entry = analysis.seq;
  start.found = levels(body, "results", [](const Json& level) {
    const std::string from = text_at(level, "from");
    return from == "titration" || from == "found";
  });
  if (!from_amounts(start, body, chemistry) && !from_levels(start, body, chemistry)) return std::nullopt;
  return start;
}

Result<std::optional<FromLog>> from_log(const logbook::Logbook& log, const Calendar& calendar,
                                        const bath::Tank& tank, const bath::Chemistry& chemistry,
                                        const Sample& sample) {
  return Reading(log, calendar, tank, chemistry, sample).run();
}

}  // namespace bathwright::book
