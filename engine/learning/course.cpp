#include "course.hpp"

#include <algorithm>
#include <bathwright/base/nearest.hpp>
#include <cmath>
#include <map>

namespace bathwright::learning {
namespace {

using bath::CountedIn;

/// Hours worked since the start of the history, by the policy's calendar; even over the hours of a day that
/// works.
class WorkedHours {
 public:
  WorkedHours(const forecast::Policy& policy, const History& history)
      : calendar_(policy.calendar), first_hour_(history.first_hour) {
    calendar_.first_weekday = history.first_weekday;
    calendar_.closed.clear();  // they count from the start of a forecast
    share_ = std::min(1.0, calendar_.shifts_per_day * calendar_.hours_per_shift / 24);
  }
  [[nodiscard]] double between(double from_h, double to_h) const { return until(to_h) - until(from_h); }
  [[nodiscard]] double hours_per_shift() const { return calendar_.hours_per_shift; }

 private:
  [[nodiscard]] double until(double at_h) const {
    const double clock = at_h + first_hour_;
    const int days = static_cast<int>(clock / 24);
    double hours = 0;
    for (int day = 0; day < days; ++day)
      if (calendar_.works_on(day)) hours += 24 * share_;
    if (calendar_.works_on(days)) hours += (clock - 24.0 * days) * share_;
    return hours;
  }
  forecast::Calendar calendar_;
  double first_hour_, share_ = 1;
};

/// An amount that was logged now and then, spread over the time it stands for.
class Spread {
 public:
  explicit Spread(const WorkedHours& worked) : worked_(&worked) {}
  void add(double at_h, double amount) {
    const double from = ends_.empty() ? 0 : ends_.back();
    ends_.push_back(at_h);
    amounts_.push_back(amount);
    total_ += amount;
    weights_.push_back(weight(from, at_h));
    all_weight_ += weights_.back();
  }
  [[nodiscard]] double total() const { return total_; }
  /// After the last record it goes on as it did on average.
  [[nodiscard]] double between(double from_h, double to_h) const {
    double sum = 0, from = 0;
    const auto first = std::ranges::upper_bound(ends_, from_h) - ends_.begin();
    if (first > 0) from = ends_[static_cast<std::size_t>(first - 1)];
    for (auto i = static_cast<std::size_t>(first); i < ends_.size() && from < to_h; from = ends_[i++]) {
      const double a = std::max(from, from_h), b = std::min(ends_[i], to_h);
      if (b > a && weights_[i] > 0) sum += amounts_[i] * weight(a, b) / weights_[i];
    }
    const double end = ends_.empty() ? 0 : ends_.back();
    if (to_h > end && all_weight_ > 0) sum += total_ * weight(std::max(from_h, end), to_h) / all_weight_;
    return sum;
  }

 private:
  /// Hours worked; where none were, as over a weekend that was worked after all, hours.
  [[nodiscard]] double weight(double from_h, double to_h) const {
    return worked_->between(from_h, to_h) + 1e-6 * (to_h - from_h);
  }
  const WorkedHours* worked_;
  std::vector<double> ends_, amounts_, weights_;
  double total_ = 0, all_weight_ = 0;
};

class Builder {
 public:
  Builder(const bath::Tank& tank, const bath::Chemistry& chemistry, const forecast::Policy& policy,
          const forecast::Compiled& compiled, const History& history, const Assumed& assumed)
      : tank_(tank),
        chemistry_(chemistry),
        policy_(policy),
        compiled_(compiled),
        history_(history),
        assumed_(assumed),
        worked_(policy, history) {}

  Result<Course> run() {
    out_.history = &history_;
    out_.policy = &policy_;
    out_.mark_L = tank_.working_volume.v;
    out_.titrant_h = 24 * assumed_.titrant_days;
    out_.follows_volume = !history_.watered.empty();
    choose_followed();
    if (out_.followed.empty())
      problems_.push_back({Fault::bad_input, tank_.name, "no level was found three times or more",
                           "at least three analyses of one quantity", "Log more analyses first."});
    if (!problems_.empty()) return problems_;
    weigh_components();
    look_for_tracer();
    take_uses();
    take_rates();
    take_chemicals();
    if (problems_.empty()) take_legs();
    if (!problems_.empty()) return problems_;
    return std::move(out_);
  }

 private:
  /// Those found three times or more that no pH or charge stands behind, each new beside those before it;
  /// salts last.
  void choose_followed() {
    const bath::BathType& type = chemistry_.type();
    const auto n = static_cast<Eigen::Index>(chemistry_.components().size());
    const std::string& by_charge = chemistry_.components()[chemistry_.found_by_charge()];
    const std::string& proton = chemistry_.components().front();
    Mat rows(0, n);
    for (const bool salts : {false, true})
      for (const bath::Quantity& q : type.quantities) {
        if (q.salt_view != salts || q.counts.contains(by_charge)) continue;
        if (type.acid_by_pH() && q.counts.contains(proton)) continue;
        const auto times = std::ranges::count_if(history_.analyses, [&](const Analysed& a) {
          return std::ranges::any_of(a.levels, [&](const Level& l) { return l.quantity == q.id; });
        });
        if (times < 3) continue;
        Mat more(rows.rows() + 1, n);
        more.topRows(rows.rows()) = rows;
        for (Eigen::Index i = 0; i < n; ++i) {
          const auto at = q.counts.find(chemistry_.components()[static_cast<std::size_t>(i)]);
          more(rows.rows(), i) = at == q.counts.end() ? 0 : at->second;
        }
        if (Eigen::FullPivLU<Mat>(more).rank() < more.rows()) continue;
        rows = std::move(more);
        out_.followed.push_back(&q);
      }
  }

  void weigh_components() {
    const auto& components = chemistry_.components();
    out_.grams_per_mol = Mat::Zero(out_.states(), static_cast<Eigen::Index>(components.size()));
    for (std::size_t q = 0; q < out_.followed.size(); ++q)
      for (const auto& [species, count] : out_.followed[q]->counts)
        out_.grams_per_mol(static_cast<Eigen::Index>(q),
                           std::ranges::find(components, species) - components.begin()) =
            count * out_.followed[q]->formula.molar_mass().v;
  }

  void take_uses() {
    for (const forecast::CompiledUse& compiled : compiled_.uses) {
      UseInGrams use;
      use.compiled = &compiled;
      use.effects = out_.grams(compiled.effects);
      use.plates = compiled.mol_per_unit > 0 && !out_.grams(compiled.metal).isZero();
      use.fed = Vec::Zero(out_.states());
      use.always = compiled.use->counted_in == CountedIn::hour ||
                   compiled.use->counted_in == CountedIn::m2_surface_hour;
      out_.uses.push_back(std::move(use));
    }
  }

  /// The first aim of the tank that is not followed and whose components no use moves.
  void look_for_tracer() {
    for (const bath::Aim& aim : tank_.aims) {
      const bath::Quantity* q = chemistry_.type().quantity(aim.quantity);
      const std::string& by_charge = chemistry_.components()[chemistry_.found_by_charge()];
      if (!q || std::ranges::find(out_.followed, q) != out_.followed.end() || q->counts.contains(by_charge))
        continue;
      const bool moved = std::ranges::any_of(compiled_.uses, [&](const forecast::CompiledUse& use) {
        return chemistry_.quantity_mol(*q, use.effects.component_mol) != 0 ||
               (use.mol_per_unit > 0 && chemistry_.quantity_mol(*q, use.metal.component_mol) != 0);
      });
      if (moved) continue;
      out_.tracer = q->label;
      return;
    }
  }

  [[nodiscard]] bool ever_added(const std::string& stock) const {
    return std::ranges::any_of(history_.added, [&](const Added& a) { return a.stock == stock; });
  }

  void take_rates() {
    out_.water = out_.grams(compiled_.water);
    out_.drag_in = out_.grams(compiled_.drag_in);
    out_.fed_per_h = Vec::Zero(out_.states());
    for (const forecast::Compiled::Feed& feed : compiled_.feeds) {
      const auto by = feed.rule->by;
      if (by == forecast::Replenishment::By::analysis || ever_added(feed.rule->stock)) continue;
      const Vec g = feed.rule->kg_per_unit * out_.grams(feed.per_kg);
      (by == forecast::Replenishment::By::use ? out_.uses[feed.use].fed : out_.fed_per_h) += g;
    }
  }

  /// Litres a kg of a chemical adds to the tank: of a liquid its own, of a dissolved salt some 0.4 (from
  /// memory).
  static double litres_per_kg(const matter::StockChemical& stock) {
    constexpr double dissolved_salt = 0.4;
    return stock.liquid && stock.kg_per_L > 0 ? 1 / stock.kg_per_L : dissolved_salt;
  }

  void take_chemicals() {
    std::vector<std::string> known;
    for (const bath::ShelfItem& item : tank_.shelf) {
      known.push_back(item.stock.id);
      const auto brings = chemistry_.brings(item.stock);
      if (!brings) continue;
      Vec per_kg = out_.grams(*brings);
      if (out_.follows_volume) per_kg(out_.volume_at()) = litres_per_kg(item.stock);
      out_.shelf.push_back({&item, std::move(per_kg), ever_added(item.stock.id)});
    }
    for (const Added& added : history_.added) {
      const bath::ShelfItem* item = tank_.on_shelf(added.stock);
      const auto at = std::ranges::find(out_.shelf, item, &Course::OnShelf::item);
      if (item && at != out_.shelf.end()) {
        out_.added_per_kg.push_back(at->per_kg);
        continue;
      }
      const auto meant = nearest(added.stock, known);
      problems_.push_back({Fault::bad_input, "log entry " + std::to_string(added.when.entry),
                           '"' + added.stock + "\" is not on the shelf of " + tank_.name,
                           "a chemical of the tank file", meant ? "Did you mean " + *meant + '?' : ""});
    }
    // Water is not told from the mark alone.
    if (!out_.follows_volume)
      std::erase_if(out_.shelf, [](const Course::OnShelf& s) { return s.per_kg.isZero(); });
  }

  /// Entries in the order of time; a sample is taken before what is added at the same time.
  struct Event {
    double at_h;
    Then then;
    std::size_t index;
  };
  std::vector<Event> events() {
    std::vector<Event> all;
    const auto take = [&](const auto& list, Then then) {
      double before = 0;
      for (std::size_t i = 0; i < list.size(); ++i) {
        if (list[i].when.at_h < before)
          problems_.push_back({Fault::bad_input, "log entry " + std::to_string(list[i].when.entry),
                               "happened before the one it follows", "a history in the order of time", ""});
        before = list[i].when.at_h;
        all.push_back({list[i].when.at_h, then, i});
      }
    };
    take(history_.analyses, Then::analysis);
    take(history_.added, Then::added);
    take(history_.watered, Then::watered);
    take(history_.dumped, Then::dumped);
    std::ranges::stable_sort(all, {}, [](const Event& e) { return std::pair(e.at_h, e.then); });
    return all;
  }

  std::map<std::size_t, Spread> logged_work() {
    std::map<std::size_t, Spread> all;
    for (const Worked& record : history_.worked) {
      const auto use =
          std::ranges::find(out_.uses, record.use, [](const UseInGrams& u) { return u.compiled->use->id; });
      if (use == out_.uses.end()) {
        problems_.push_back({Fault::bad_input, "log entry " + std::to_string(record.when.entry),
                             '"' + record.use + "\" is no use of " + chemistry_.type().name, "", ""});
        continue;
      }
      use->logged = true;
      all.try_emplace(static_cast<std::size_t>(use - out_.uses.begin()), worked_)
          .first->second.add(record.when.at_h, record.units);
    }
    return all;
  }

  void take_legs() {
    const auto work = logged_work();
    Spread area(worked_);
    for (const Treated& record : history_.treated) area.add(record.when.at_h, record.area_m2);
    out_.area_logged = !history_.treated.empty();
    const auto all = events();
    if (!problems_.empty()) return;
    const double surface_m2 = tank_.surface ? tank_.surface->v / 100 : 0;
    std::vector<double> policy_units(out_.uses.size(), 0);
    for (std::size_t w = 0; w < compiled_.work.size(); ++w)
      policy_units[compiled_.work[w]] += policy_.work[w].per_shift.value;
    // Area goes with work where only that is logged: of the use the policy has most of, in its proportion.
    std::optional<std::size_t> leads;
    for (std::size_t u = 0; u < out_.uses.size(); ++u)
      if (out_.uses[u].logged && policy_units[u] > 0 && (!leads || policy_units[u] > policy_units[*leads]))
        leads = u;
    out_.area_by_work = !out_.area_logged && leads;
    double from = 0;
    for (const Event& event : all) {
      Leg leg;
      leg.from_h = from;
      leg.hours = event.at_h - from;
      leg.worked_h = worked_.between(from, event.at_h);
      leg.then = event.then;
      leg.index = event.index;
      const double shifts = leg.worked_h / worked_.hours_per_shift();
      for (std::size_t u = 0; u < out_.uses.size(); ++u) {
        UseInGrams& use = out_.uses[u];
        double units = policy_units[u] * shifts;
        if (const auto logged = work.find(u); logged != work.end())
          units = logged->second.between(from, event.at_h);
        if (use.always)
          units = leg.hours * (use.compiled->use->counted_in == CountedIn::hour ? 1 : surface_m2);
        use.total += units;
        leg.units.push_back(units);
      }
      leg.area_m2 = out_.area_logged ? area.between(from, event.at_h)
                    : out_.area_by_work
                        ? policy_.area_m2_per_shift.value * leg.units[*leads] / policy_units[*leads]
                        : policy_.area_m2_per_shift.value * shifts;
      out_.area_m2 += leg.area_m2;
      out_.worked_h += leg.worked_h;
      out_.hours += leg.hours;
      out_.legs.push_back(std::move(leg));
      from = event.at_h;
    }
    const double shifts = std::max(1.0, out_.worked_h / worked_.hours_per_shift());
    for (UseInGrams& use : out_.uses) use.per_shift = use.total / shifts;
    out_.area_per_shift_m2 = out_.area_m2 / shifts;
  }

  const bath::Tank& tank_;
  const bath::Chemistry& chemistry_;
  const forecast::Policy& policy_;
  const forecast::Compiled& compiled_;
  const History& history_;
  const Assumed& assumed_;
  WorkedHours worked_;
  Course out_;
  Problems problems_;
};

}  // namespace

std::optional<Eigen::Index> Course::position(const std::string& quantity) const {
  for (std::size_t q = 0; q < followed.size(); ++q)
    if (followed[q]->id == quantity) return static_cast<Eigen::Index>(q);
  return std::nullopt;
}

Result<Course> course_of(const bath::Tank& tank, const bath::Chemistry& chemistry,
                         const forecast::Policy& policy, const forecast::Compiled& compiled,
                         const History& history, const Assumed& assumed) {
  return Builder(tank, chemistry, policy, compiled, history, assumed).run();
}

}  // namespace bathwright::learning
