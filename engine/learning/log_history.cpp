#include <fmt/format.h>

#include <algorithm>
#include <bathwright/book/entries.hpp>
#include <bathwright/learning/log_history.hpp>
#include <chrono>
#include <map>
#include <nlohmann/json.hpp>

namespace bathwright::learning {
namespace {

using Json = nlohmann::json;
using logbook::Entry;
using logbook::EntryKind;
using logbook::UtcTime;

std::optional<double> number_at(const Json& body, const char* key) {
  if (!body.is_object() || !body.contains(key) || !body[key].is_number()) return std::nullopt;
  return body[key].get<double>();
}

std::string text_at(const Json& body, const char* key) {
  return body.is_object() && body.contains(key) && body[key].is_string() ? body[key].get<std::string>() : "";
}

/// Levels that an analysis found itself.
std::vector<Level> found_in(const Json& body) {
  std::vector<Level> levels;
  if (!body.is_object() || !body.contains("results") || !body["results"].is_array()) return levels;
  for (const Json& result : body["results"]) {
    const std::string from = text_at(result, "from");
    const auto value = number_at(result, "value");
    if (!value || text_at(result, "unit") != "g/L" || (from != "titration" && from != "found")) continue;
    levels.push_back(
        {text_at(result, "quantity"), *value, number_at(result, "standard_uncertainty").value_or(0)});
  }
  return levels;
}

/// Something that was done, at its time.
struct Done {
  UtcTime at;
  const Entry* entry;
};

class Reader {
 public:
  Reader(const std::optional<shifts::Calendar>& calendar, const bath::Tank& tank, const bath::BathType& type)
      : calendar_(calendar), tank_(tank), type_(type) {}

  Result<FromLog> run(const std::vector<Entry>& entries) {
    std::vector<Done> in_time;
    for (const Entry& entry : entries) {
      if (entry.kind == EntryKind::correction && entry.about) corrections_[*entry.about] = &entry;
      if (const auto at = logbook::utc_from_iso(entry.happened.empty() ? entry.at : entry.happened))
        in_time.push_back({*at, &entry});
    }
    std::ranges::stable_sort(in_time, {}, &Done::at);
    for (const Done& done : in_time)
      if (started_ || starts(*done.entry)) {
        if (!started_) begin(done.at);
        take(done);
      }
    if (!started_)
      return Problem{Fault::bad_input, tank_.name, "the log has no analysis of it", "analyses to learn from",
                     "Log them with bathwright analyse --log, or bathwright log import."};
    return std::move(out_);
  }

 private:
  [[nodiscard]] bool starts(const Entry& entry) const {
    return entry.kind == EntryKind::analysis && !corrections_.contains(entry.seq) &&
           !found_in(Json::parse(entry.body, nullptr, false)).empty();
  }

  void begin(UtcTime at) {
    started_ = true;
    out_.start = at;
    const auto shown = calendar_ ? calendar_->zone().local(at) : shifts::LocalTime(at.time_since_epoch());
    const auto day = std::chrono::floor<std::chrono::days>(shown);
    out_.history.first_weekday =
        static_cast<int>(std::chrono::weekday(std::chrono::local_days(day)).iso_encoding()) - 1;
    out_.history.first_hour = std::chrono::duration<double, std::ratio<3600>>(shown - day).count();
  }

  void take(const Done& done) {
    const Entry& entry = *done.entry;
    const Moment when{std::chrono::duration<double, std::ratio<3600>>(done.at - out_.start).count(),
                      entry.seq};
    const auto correction = corrections_.find(entry.seq);
    const bool corrected = correction != corrections_.end();
    if (entry.kind == EntryKind::analysis) {
      if (!corrected) analysis(when, Json::parse(entry.body, nullptr, false));
      return;
    }
    if (entry.kind != EntryKind::addition && entry.kind != EntryKind::level &&
        entry.kind != EntryKind::dump && entry.kind != EntryKind::ampere_hours)
      return;
    const std::string& body = corrected ? correction->second->body : entry.body;
    bool counted = false;
    if (entry.kind == EntryKind::ampere_hours)
      if (const auto dm2 = number_at(Json::parse(body, nullptr, false), "area_dm2"); dm2 && *dm2 >= 0) {
        out_.history.treated.push_back({when, *dm2 / 100});
        counted = true;
      }
    const auto movement = book::movement_of(entry.kind, body, tank_, type_);
    if (movement)
      std::visit([&](const auto& moved) { take(when, moved); }, movement->of);
    else if (!counted)
      out_.passed_over.push_back(fmt::format("Entry {} ({}) is not counted: it {}.", entry.seq,
                                             logbook::name(entry.kind),
                                             corrected ? "was corrected, and the correction gives no amount"
                                                       : movement.problems().front().what));
  }

  void analysis(const Moment& when, const Json& body) {
    Analysed analysed{when, found_in(body), number_at(body, "volume_L")};
    // A volume that nobody read is none.
    if (text_at(body, "volume_from").starts_with("taken as")) analysed.volume_L.reset();
    if (!analysed.levels.empty()) out_.history.analyses.push_back(std::move(analysed));
  }
  void take(const Moment& when, const book::Addition& added) {
    if (added.chemical == "water")
      out_.history.watered.push_back({when, added.kg});  // a kg of water is a litre, near enough
    else
      out_.history.added.push_back({when, added.chemical, added.kg});
  }
  void take(const Moment& when, const book::Dumped& dumped) {
    out_.history.dumped.push_back({when, dumped.L});
  }
  void take(const Moment& when, const book::StoodAt& stood) {
    out_.history.analyses.push_back({when, {}, stood.L});
  }
  void take(const Moment& when, const book::Worked& worked) {
    out_.history.worked.push_back({when, worked.use, worked.units});
  }

  const std::optional<shifts::Calendar>& calendar_;
  const bath::Tank& tank_;
  const bath::BathType& type_;
  std::map<std::int64_t, const Entry*> corrections_;
  bool started_ = false;
  FromLog out_;
};

}  // namespace

Result<FromLog> history_of(const logbook::Logbook& log, const std::optional<shifts::Calendar>& calendar,
                           const bath::Tank& tank, const bath::BathType& type) {
  logbook::Filter filter;
  filter.tank = tank.name;
  const auto entries = log.list(filter);
  if (!entries) return entries.problems();
  return Reader(calendar, tank, type).run(*entries);
}

}  // namespace bathwright::learning
