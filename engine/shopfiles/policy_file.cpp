#include <bathwright/base/nearest.hpp>
#include <bathwright/matter/concentration.hpp>
#include <bathwright/shopfiles/policy_file.hpp>
#include <bathwright/units/read.hpp>
#include <charconv>
#include <cmath>

#include "schema.hpp"

namespace bathwright::shopfiles {
namespace {

using bath::CountedIn;
using forecast::Policy;
using forecast::Replenishment;
using forecast::Uncertain;

constexpr Range possible_days{1, 36500}, possible_shifts{1, 24}, week{1, 7}, weekday{0, 6};
constexpr double dm2_per_m2 = 100;

/// "1.0 mL/dm2" as a volume and an area: the two readers know every unit of each.
template <class Over>
std::optional<double> ratio(Table& table, const Key& key,
                            Result<Over> (*read_over)(std::string_view, std::string_view)) {
  if (table.any(key) == nullptr) return std::nullopt;
  const std::string written = table.written(key.name), where = table.where(key.name);
  const std::size_t slash = written.rfind('/');
  if (slash == std::string::npos) {
    table.report(key.name, '"' + toml_schema::printable(written) + "\" has no '/'", std::string(key.example));
    return std::nullopt;
  }
  const auto above = units::read_volume(written.substr(0, slash), where);
  const auto below = read_over("1 " + written.substr(slash + 1), where);
  if (!above) table.report(key.name, above.problems());
  if (!below) table.report(key.name, below.problems());
  if (!above || !below) return std::nullopt;
  return above->v / below->v;
}

double uncertainty(Table& table) {
  const Key key{"uncertainty", optional, R"("10 %")"};
  if (table.any(key) == nullptr) return 0;
  const auto share = units::read_fraction(table.written(key.name), table.where(key.name));
  if (share) return *share;
  table.report(key.name, share.problems());
  return 0;
}

/// "4000 Ah", "1.2 kg", "300 dm2", "8 h" in units of a use.
std::optional<double> amount_of_work(Table& table, const Key& key, CountedIn counted_in) {
  if (table.any(key) == nullptr) return std::nullopt;
  const std::string written = table.written(key.name), where = table.where(key.name);
  const auto refused = [&](const Problems& problems) {
    table.report(key.name, problems);
    return std::nullopt;
  };
  switch (counted_in) {
    case CountedIn::ampere_hour: {
      double value = 0;
      const auto [end, error] = std::from_chars(written.data(), written.data() + written.size(), value);
      std::string_view unit(end, static_cast<std::size_t>(written.data() + written.size() - end));
      while (unit.starts_with(' ')) unit.remove_prefix(1);
      if (error == std::errc() && value >= 0 && unit == "Ah") return value;
      if (error == std::errc() && value >= 0 && unit == "kAh") return 1000 * value;
      table.report(key.name, '"' + toml_schema::printable(written) + "\" is no number of ampere-hours",
                   R"("4000 Ah" or "4 kAh")");
      return std::nullopt;
    }
    case CountedIn::gram_deposited: {
      const auto mass = units::read_mass(written, where);
      return mass ? std::optional(1000 * mass->v) : refused(mass.problems());
    }
    case CountedIn::m2_of_work: {
      const auto area = units::read_area(written, where);
      return area ? std::optional(area->v / dm2_per_m2) : refused(area.problems());
    }
    case CountedIn::hour:
    case CountedIn::m2_surface_hour:
      table.report(key.name, "goes by the clock: it needs no amount", "nothing", "Remove it.");
  }
  return std::nullopt;
}

class Reader {
 public:
  Reader(Table root, const bath::BathType& type) : root_(std::move(root)), type_(type) {}

  Policy read() {
    policy_.horizon_days = whole(root_, {"horizon_days", optional, "365"}, possible_days, 365);
    read_calendar();
    read_work();
    read_film();
    read_evaporation();
    read_water();
    if (auto bleed = root_.table({"bleed", optional, R"({ rate = "20 L/d" })"}))
      policy_.bleed_L_per_day =
          24 * ratio(*bleed, {"rate", required, R"("20 L/d")"}, units::read_duration).value_or(0);
    for (Table& rule : root_.tables({"replenish", optional, ""})) read_replenishment(rule);
    for (Table& decant : root_.tables({"decant", optional, ""})) {
      const int every = every_days(decant);
      const auto volume = decant.positive({"volume", required, R"("500 L")"}, units::read_volume);
      policy_.decants.push_back({every, volume.value_or(units::Litres{}).v});
    }
    for (Table& freeze : root_.tables({"freeze_out", optional, ""})) read_freeze_out(freeze);
    if (auto limits = root_.table({"limit", optional, R"({ "Na2CO3" = "75 g/L" })"}))
      for (const auto& [id, level] : levels(*limits)) policy_.limits.push_back({id, level});
    return std::move(policy_);
  }

 private:
  static int whole(Table& table, const Key& key, Range range, int otherwise) {
    const auto number = table.number(key, range);
    if (!number) return otherwise;
    if (*number != std::floor(*number))
      table.report(key.name, "is no whole number", std::string(key.example));
    return static_cast<int>(*number);
  }
  static int every_days(Table& table) {
    return whole(table, {"every_days", optional, "7"}, possible_days, 1);
  }

  void read_calendar() {
    auto calendar = root_.table({"calendar", optional, R"({ shifts_per_day = 3, hours_per_shift = "8 h" })"});
    if (!calendar) return;
    auto& c = policy_.calendar;
    c.shifts_per_day = whole(*calendar, {"shifts_per_day", required, "3"}, possible_shifts, 1);
    const auto hours = calendar->positive({"hours_per_shift", required, R"("8 h")"}, units::read_duration);
    c.hours_per_shift = hours.value_or(units::Hours{8}).v;
    if (c.shifts_per_day * c.hours_per_shift > 24 + 1e-9)
      calendar->report("hours_per_shift", "the shifts of a day are longer than a day", "24 h in all");
    c.days_per_week = whole(*calendar, {"days_per_week", optional, "5"}, week, 7);
    c.first_weekday = whole(*calendar, {"first_weekday", optional, "0"}, weekday, 0);
    for (Table& closed : calendar->tables({"closed", optional, "[{ first_day = 150, days = 14 }]"}))
      c.closed.push_back({whole(closed, {"first_day", required, "150"}, {0, 36500}, 0),
                          whole(closed, {"days", required, "14"}, possible_days, 1)});
  }

  const bath::Use* use_of(Table& table, std::string_view key, const std::string& id) {
    std::vector<std::string> known;
    for (const bath::Use& use : type_.uses) {
      if (use.id == id) return &use;
      known.push_back(use.id);
    }
    const auto meant = nearest(id, known);
    std::string all;
    for (const std::string& one : known) all += (all.empty() ? "one of " : ", ") + one;
    table.report(key, '"' + toml_schema::printable(id) + "\" is no use of " + type_.name,
                 all.empty() ? "nothing: this bath type states no work" : all,
                 meant ? "Did you mean " + *meant + '?' : "");
    return nullptr;
  }

  void read_work() {
    auto work = root_.table({"work", optional, R"({ deposition = { per_shift = "4000 Ah" } })"});
    if (!work) return;
    for (const std::string& id : work->names()) {
      auto entry = work->table({id, required, R"({ per_shift = "4000 Ah", uncertainty = "10 %" })"});
      const bath::Use* use = use_of(*work, id, id);
      if (!entry) continue;
      const Key per_shift{"per_shift", required, R"("4000 Ah")"};
      const double u = uncertainty(*entry);
      if (!use) {
        (void)entry->any(per_shift);
        continue;
      }
      if (const auto amount = amount_of_work(*entry, per_shift, use->counted_in))
        policy_.work.push_back({id, {*amount, u}});
    }
  }

  void read_film() {
    auto area = root_.table({"area", optional, R"({ per_shift = "320 dm2", uncertainty = "10 %" })"});
    if (area) {
      const auto value = area->quantity({"per_shift", required, R"("320 dm2")"}, units::read_area);
      policy_.area_m2_per_shift = {value.value_or(units::SquareDecimetres{}).v / dm2_per_m2,
                                   uncertainty(*area)};
    }
    const Key film{"film", required, R"("1.0 mL/dm2")"};
    if (auto out = root_.table({"drag_out", optional, R"({ film = "1.0 mL/dm2", uncertainty = "30 %" })"}))
      policy_.drag_out_L_per_m2 = {dm2_per_m2 * ratio(*out, film, units::read_area).value_or(0),
                                   uncertainty(*out)};
    if (auto in = root_.table({"drag_in", optional, R"({ film = "1.0 mL/dm2" })"})) {
      policy_.drag_in_L_per_m2 = {dm2_per_m2 * ratio(*in, film, units::read_area).value_or(0),
                                  uncertainty(*in)};
      if (auto brings = in->table({"brings", optional, R"({ "Ca^2+" = "40 mg/L" })"}))
        policy_.drag_in_g_per_L = levels(*brings);
    }
  }

  void read_evaporation() {
    auto evaporation = root_.table({"evaporation", optional, R"({ working = "3 L/h", idle = "1 L/h" })"});
    if (!evaporation) return;
    policy_.evaporation_L_per_h = {
        ratio(*evaporation, {"working", required, R"("3 L/h")"}, units::read_duration).value_or(0),
        uncertainty(*evaporation)};
    policy_.idle_evaporation_L_per_h =
        ratio(*evaporation, {"idle", optional, R"("1 L/h")"}, units::read_duration).value_or(0);
  }

  void read_water() {
    auto water = root_.table({"water", optional, R"({ brings = { "Ca^2+" = "40 mg/L" } })"});
    if (!water) return;
    policy_.u_water_rel = uncertainty(*water);
    if (auto brings = water->table({"brings", required, R"({ "Ca^2+" = "40 mg/L" })"}))
      policy_.water_g_per_L = levels(*brings);
  }

  std::map<std::string, double> levels(Table& table) {
    std::map<std::string, double> g_per_L;
    for (const std::string& id : table.names()) {
      const auto written = table.quantity({id, required, R"("40 mg/L")"}, units::read_concentration);
      const bath::Quantity* quantity = type_.quantity(id);
      if (!quantity) {
        std::vector<std::string> known;
        for (const auto& q : type_.quantities) known.push_back(q.id);
        const auto meant = nearest(id, known);
        table.report(id, "is no quantity of " + type_.name, "", meant ? "Did you mean " + *meant + '?' : "");
        continue;
      }
      if (!written) continue;
      matter::ConcentrationBasis basis;
      basis.molar_mass = quantity->formula.molar_mass();
      const auto grams = matter::grams_per_litre(*written, basis, table.where(id));
      if (grams)
        g_per_L[id] = grams->v;
      else
        table.report(id, grams.problems());
    }
    return g_per_L;
  }

  void read_replenishment(Table& rule) {
    Replenishment r;
    r.stock = rule.text({"chemical", required, R"("nickel-sulfate")"});
    const bool analysis = rule.has("to_aim"), by_use = rule.has("for_each"), by_hour = rule.has("per_hour");
    if (analysis + by_use + by_hour != 1) {
      rule.report("chemical", "is put in by no rule, or by several",
                  R"(one of to_aim = "Ni^2+", for_each = "1000 Ah" with a use, per_hour = "0.2 kg")");
    }
    if (analysis) {
      r.by = Replenishment::By::analysis;
      r.quantity = rule.text({"to_aim", required, R"("Ni^2+")"});
      r.every_days = every_days(rule);
    }
    if (by_hour) {
      const auto mass = rule.positive({"per_hour", required, R"("0.2 kg")"}, units::read_mass);
      r.kg_per_unit = mass.value_or(units::Kilograms{}).v;
    }
    if (by_use) {
      r.by = Replenishment::By::use;
      r.use = rule.text({"use", required, R"("deposition")"});
      const auto mass = rule.positive({"amount", required, R"("1.2 kg")"}, units::read_mass);
      const bath::Use* use = use_of(rule, "use", r.use);
      const Key each{"for_each", required, R"("1000 Ah")"};
      const auto units_of_use = use ? amount_of_work(rule, each, use->counted_in) : std::nullopt;
      if (units_of_use && !(*units_of_use > 0)) rule.report("for_each", "is zero", std::string(each.example));
      if (mass && units_of_use && *units_of_use > 0) r.kg_per_unit = mass->v / *units_of_use;
    }
    policy_.replenishment.push_back(std::move(r));
  }

  void read_freeze_out(Table& freeze) {
    forecast::FreezeOut f;
    f.quantity = freeze.text({"quantity", required, R"("Na2CO3")"});
    f.crystals = freeze.text({"crystals", required, R"("Na2CO3.10H2O")"});
    f.every_days = every_days(freeze);
    f.litres =
        freeze.positive({"volume", required, R"("500 L")"}, units::read_volume).value_or(units::Litres{}).v;
    const auto left = freeze.quantity({"left", required, R"("40 g/L")"}, units::read_concentration);
    const bath::Quantity* quantity = type_.quantity(f.quantity);
    if (!quantity) {
      freeze.report("quantity", "is no quantity of " + type_.name, "the id of a quantity");
    } else if (left) {
      matter::ConcentrationBasis basis;
      basis.molar_mass = quantity->formula.molar_mass();
      const auto grams = matter::grams_per_litre(*left, basis, freeze.where("left"));
      if (grams)
        f.left_g_per_L = grams->v;
      else
        freeze.report("left", grams.problems());
    }
    policy_.freeze_outs.push_back(std::move(f));
  }

  Table root_;
  const bath::BathType& type_;
  Policy policy_;
};

}  // namespace

Result<Policy> read_policy_text(std::string_view name, std::string_view text, const bath::BathType& type) {
  auto tree = toml_schema::parse_toml(name, text);
  if (!tree) return tree.problems();
  toml_schema::Document file(name, *std::move(tree));
  Policy policy = Reader(file.root(), type).read();
  return file.conclude(std::move(policy));
}

Result<Policy> read_policy(const std::string& path, const bath::BathType& type) {
  const auto text = toml_schema::read_text_file(path);
  if (!text) return text.problems();
  return read_policy_text(path, *text, type);
}

}  // namespace bathwright::shopfiles
