#include <algorithm>
#include <array>
#include <bathwright/base/nearest.hpp>
#include <bathwright/bath/quantity_meant.hpp>
#include <bathwright/matter/concentration.hpp>
#include <bathwright/shopfiles/policy_file.hpp>
#include <bathwright/units/read.hpp>
#include <cmath>

#include "policy_units.hpp"

namespace bathwright::shopfiles {
namespace {

using bath::CountedIn;
using forecast::Policy;
using forecast::Replenishment;
using forecast::Uncertain;

constexpr Range possible_days{1, 36500}, possible_shifts{1, 24}, week{1, 7}, weekday{0, 6};
class Reader {
 public:
  Reader(Table root, const bath::BathType& type) : root_(std::move(root)), type_(type) {}

  Policy read() {
    policy_.horizon_days = whole(root_, {"horizon_days", optional, "365"}, possible_days, 365);
    read_calendar();  // first: others are by its shifts and dates
    read_work();
    read_film();
    read_evaporation();
    read_water();
    if (auto bleed = root_.table({"bleed", optional, R"({ rate = "20 L/d" })"})) {
      policy_.bleed_L_per_day =
          24 * litres_per(*bleed, {"rate", required, R"("20 L/d")"}, units::read_duration).value_or(0);
      policy_.bleed_at_work = bleed->truth({"at_work", optional, "true"});
    }
    for (Table& rule : root_.tables({"replenish", optional, ""})) read_replenishment(rule);
    for (Table& pair : root_.tables({"correlated", optional, ""}))
      policy_.correlations.push_back({pair.text({"one", required, R"("drag-out")"}),
                                      pair.text({"other", required, R"("work, deposition")"}),
                                      pair.number({"correlation", required, "-0.93"}, {-1, 1}).value_or(0)});
    for (Table& decant : root_.tables({"decant", optional, ""})) read_decant(decant);
    for (Table& freeze : root_.tables({"freeze_out", optional, ""})) read_freeze_out(freeze);
    read_carbon_dioxide();
    for (Table& rinse : root_.tables({"rinse", optional, ""})) read_rinse(rinse);
    if (auto waste = root_.table({"waste", optional, R"({ price = 180, unit = "m3" })"})) {
      const double price = waste->number({"price", required, "180"}, {0, 1e9}).value_or(0);
      const std::string unit = waste->text({"unit", required, R"("m3")"});
      const auto volume = units::read_volume("1 " + unit, waste->where("unit"));
      if (volume)
        policy_.waste_price_per_L = price / volume->v;
      else
        waste->report("unit", volume.problems());
    }
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
    c.starts = date(*calendar, {"starts", optional, R"("2026-03-02")"});
    if (c.starts) {
      if (calendar->has("first_weekday"))
        calendar->report("first_weekday", "is known from the date of the first day", "one of the two",
                         "Remove it.");
      c = c.starting(*c.starts);
    }
    for (Table& closed :
         calendar->tables({"closed", optional, R"([{ from = "2026-08-03", to = "2026-08-14" }])"}))
      read_closed(closed);
  }

  void read_closed(Table& closed) {
    auto& c = policy_.calendar;
    if (!closed.has("from") && !closed.has("to")) {
      c.closed.push_back({whole(closed, {"first_day", required, "150"}, {0, 36500}, 0),
                          whole(closed, {"days", required, "14"}, possible_days, 1)});
      return;
    }
    const auto from = date(closed, {"from", required, R"("2026-08-03")"}),
               to = date(closed, {"to", required, R"("2026-08-14")"});
    if (!c.starts)
      closed.report("from", "is a date, and the calendar has none for its first day",
                    R"(starts = "2026-03-02")", "Add starts to the calendar, or give first_day and days.");
    if (from && to && *to < *from) closed.report("to", "lies before from", "the last day shut");
    if (from && to && c.starts && *from <= *to)
      c.closed.push_back(
          {static_cast<int>((*from - *c.starts).count()), static_cast<int>((*to - *from).count()) + 1});
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
      if (use)
        read_use(*entry, *use);
      else
        for (const std::string& key : entry->names()) (void)entry->any({key, optional, ""});
    }
  }

  /// By the shift or by the day, as the table has it; per shift.
  template <class Read>
  std::optional<double> per_shift(Table& table, std::string_view example, const Read& read) {
    const bool by_day = table.has("per_day");
    if (by_day && table.has("per_shift")) table.report("per_day", "beside per_shift", "one of the two");
    const auto amount = read(Key{by_day ? "per_day" : "per_shift", required, example});
    if (by_day && amount) return *amount / policy_.calendar.shifts_per_day;
    return amount;
  }

  void read_use(Table& entry, const bath::Use& use) {
    const double u = relative_uncertainty(entry);
    const bool by_clock =
        use.counted_in == bath::CountedIn::hour || use.counted_in == bath::CountedIn::m2_surface_hour;
    if (by_clock) {
      for (const char* key : {"per_shift", "per_day"})
        if (entry.has(key)) (void)amount_of_work(entry, {key, optional, ""}, use.counted_in);
      if (!entry.has("effects"))
        entry.report("", "goes by the clock: all that can be said of it are its effects",
                     R"(effects = { "Na2CO3" = "20 g/m2 h" })");
    } else if (const auto amount = per_shift(entry, R"("4000 Ah")", [&](const Key& key) {
                 return entry.has("thickness") ? deposited(entry, key, use)
                                               : amount_of_work(entry, key, use.counted_in);
               })) {
      policy_.work.push_back({use.id, {*amount, u}});
    }
    forecast::OwnRates own;
    own.use = use.id;
    if (auto effects = entry.table({"effects", optional, R"({ "HPO3^2-" = "3.67 g/g" })"}))
      own.effects = read_effects(*effects, use);
    const Key spread{"effects_uncertainty", optional, R"("20 %")"};
    if (entry.has(spread.name))
      own.effects_u_rel = share(entry, spread);
    else if (own.effects)
      own.effects_u_rel = by_clock ? u : 0;
    own.cathode_efficiency = efficiency(entry, use, "cathode_efficiency", 1);
    own.anode_efficiency = efficiency(entry, use, "anode_efficiency", 2);
    if (own.effects || own.effects_u_rel || own.cathode_efficiency || own.anode_efficiency)
      policy_.own_rates.push_back(std::move(own));
  }

  /// Area, thickness and density of a deposit as grams of its metal.
  std::optional<double> deposited(Table& entry, const Key& key, const bath::Use& use) {
    const auto area = entry.quantity({key.name, required, R"("480 dm2")"}, units::read_area);
    const auto thickness = entry.positive({"thickness", required, R"("25 um")"}, units::read_length);
    const auto density = entry.positive({"density", required, R"("8.1 kg/L")"}, units::read_density);
    const double metal = share(entry, {"metal", optional, R"("92 %")"}, 1).value_or(1);
    if (use.counted_in != bath::CountedIn::gram_deposited)
      entry.report("thickness", "is of a use counted in grams deposited", "an amount of work alone");
    if (!area || !thickness || !density) return std::nullopt;
    return 1000 * area->v * thickness->v * density->v * metal;  // dm3 are L
  }

  std::map<std::string, double> read_effects(Table& table, const bath::Use& use) {
    std::map<std::string, double> effects;
    for (const std::string& id : table.names()) {
      const auto grams = grams_per_unit(table, {id, required, ""}, use.counted_in);
      if (quantity_of(table, id) && grams) effects[id] = *grams;
    }
    return effects;
  }

  /// "96 %", or { value = "96 %", uncertainty = "2 %" }.
  std::optional<Uncertain> efficiency(Table& entry, const bath::Use& use, std::string_view name,
                                      double most) {
    const Key key{name, optional, R"("96 %")"};
    const auto* given = entry.any(key);
    if (!given) return std::nullopt;
    if (use.counted_in != bath::CountedIn::ampere_hour || use.deposits.empty())
      entry.report(name, "is of a use that plates metal by current", "nothing", "Remove it.");
    if (given->kind != toml_schema::Node::Kind::table) {
      const auto value = share(entry, key, most);
      return value ? std::optional(Uncertain{*value, 0}) : std::nullopt;
    }
    auto table = entry.table(key);
    const auto value = share(*table, {"value", required, R"("96 %")"}, most);
    const double u = relative_uncertainty(*table);
    return value ? std::optional(Uncertain{*value, u}) : std::nullopt;
  }

  void read_film() {
    auto area = root_.table({"area", optional, R"({ per_shift = "320 dm2", uncertainty = "10 %" })"});
    if (area) {
      const auto dm2 = per_shift(*area, R"("320 dm2")", [&](const Key& key) -> std::optional<double> {
        const auto read = area->quantity(key, units::read_area);
        return read ? std::optional(read->v) : std::nullopt;
      });
      policy_.area_m2_per_shift = {dm2.value_or(0) / dm2_per_m2, relative_uncertainty(*area)};
    }
    const Key film{"film", required, R"("1.0 mL/dm2")"};
    if (auto out = root_.table({"drag_out", optional, R"({ film = "1.0 mL/dm2", uncertainty = "30 %" })"}))
      policy_.drag_out_L_per_m2 = {dm2_per_m2 * litres_per(*out, film, units::read_area).value_or(0),
                                   relative_uncertainty(*out)};
    if (auto in = root_.table({"drag_in", optional, R"({ film = "1.0 mL/dm2" })"})) {
      policy_.drag_in_L_per_m2 = {dm2_per_m2 * litres_per(*in, film, units::read_area).value_or(0),
                                  relative_uncertainty(*in)};
      if (auto brings = in->table({"brings", optional, R"({ "Ca^2+" = "40 mg/L" })"}))
        policy_.drag_in_g_per_L = levels(*brings);
    }
  }

  void read_evaporation() {
    auto evaporation = root_.table({"evaporation", optional, R"({ working = "3 L/h", idle = "1 L/h" })"});
    if (!evaporation) return;
    policy_.evaporation_L_per_h = {
        litres_per(*evaporation, {"working", required, R"("3 L/h")"}, units::read_duration).value_or(0),
        relative_uncertainty(*evaporation)};
    policy_.idle_evaporation_L_per_h =
        litres_per(*evaporation, {"idle", optional, R"("1 L/h")"}, units::read_duration).value_or(0);
  }

  void read_water() {
    auto water = root_.table({"water", optional, R"({ brings = { "Ca^2+" = "40 mg/L" } })"});
    if (!water) return;
    policy_.u_water_rel = relative_uncertainty(*water);
    policy_.water_g_per_L = water_brings(*water);
    for (Table& season : water->tables({"season", optional, R"([{ from = "05-01", to = "09-30" }])"})) {
      const auto from = day_of_year(season, {"from", required, R"("05-01", month and day)"}),
                 to = day_of_year(season, {"to", required, R"("09-30", month and day)"});
      auto brings = water_brings(season);
      if (!policy_.calendar.starts)
        season.report("from", "the calendar has no date for its first day",
                      R"([calendar] starts = "2026-03-02")", "Add starts to the calendar.");
      if (from && to) policy_.seasons.push_back({*from, *to, std::move(brings)});
    }
  }

  /// What a water brings, by quantity, by its hardness, or both.
  std::map<std::string, double> water_brings(Table& water) {
    std::map<std::string, double> all;
    const bool hard = water.has("hardness");
    if (auto brings = water.table({"brings", hard ? optional : required, R"({ "Ca^2+" = "40 mg/L" })"}))
      all = levels(*brings);
    if (hard) {
      const auto calcium = hardness(water, {"hardness", optional, R"("100 mg/L CaCO3")"});
      if (!type_.quantity("Ca^2+"))
        water.report("hardness", type_.name + " keeps no account of calcium", "nothing", "Remove it.");
      else if (all.contains("Ca^2+"))
        water.report("hardness", "and Ca^2+ of brings say the same", "one of the two");
      else if (calcium)
        all["Ca^2+"] = *calcium;
    }
    return all;
  }

  void read_carbon_dioxide() {
    auto air = root_.table({"carbon_dioxide", optional, R"({ uptake = "20 g/m2 h", uncertainty = "50 %" })"});
    if (!air) return;
    const auto uptake = grams_per_hour(*air, {"uptake", required, R"("20 g/m2 h" or "2.6 kg/d")"});
    const double u = relative_uncertainty(*air);
    if (uptake) policy_.carbon_dioxide = forecast::Uptake{{uptake->grams, u}, uptake->per_m2};
  }

  void read_decant(Table& decant) {
    forecast::Decant d;
    if (decant.has("on_day"))
      d.on_day = whole(decant, {"on_day", optional, "3"}, possible_days, 0);
    else
      d.every_days = every_days(decant);
    if (decant.has("on_day") && decant.has("every_days"))
      decant.report("every_days", "beside on_day", "one of the two");
    if (decant.has("share"))
      d.share = share(decant, {"share", optional, R"("25 %")"}).value_or(0);
    else
      d.litres =
          decant.positive({"volume", required, R"("500 L")"}, units::read_volume).value_or(units::Litres{}).v;
    if (decant.has("share") && decant.has("volume"))
      decant.report("volume", "beside share", "one of the two");
    policy_.decants.push_back(d);
  }

  void read_rinse(Table& rinse) {
    forecast::Rinse r;
    r.name = rinse.text({"name", optional, R"("drag-out tank")"});
    r.volume_L =
        rinse.positive({"volume", required, R"("300 L")"}, units::read_volume).value_or(units::Litres{1}).v;
    r.stages = whole(rinse, {"stages", optional, "2"}, {1, 8}, 1);
    r.flow_L_per_h = litres_per(rinse, {"flow", optional, R"("120 L/h")"}, units::read_duration).value_or(0);
    r.returns = rinse.truth({"returns", optional, "true"});
    if (rinse.has("dump_every_days"))
      r.dump_every_days = whole(rinse, {"dump_every_days", optional, "7"}, possible_days, 0);
    if (!(r.flow_L_per_h > 0) && !r.returns && r.dump_every_days == 0)
      rinse.report("", "is never renewed", R"(flow = "120 L/h", returns = true or dump_every_days = 7)");
    if (r.returns && std::ranges::any_of(policy_.rinses, &forecast::Rinse::returns))
      rinse.report("returns", "is true of a rinse before it as well", "one rinse that fills the tank up");
    policy_.rinses.push_back(std::move(r));
  }

  std::map<std::string, double> levels(Table& table) {
    std::map<std::string, double> g_per_L;
    for (const std::string& id : table.names()) {
      const bath::Quantity* quantity = quantity_of(table, id);
      if (const auto grams = level(table, {id, required, R"("40 mg/L")"}, quantity)) g_per_L[id] = *grams;
    }
    return g_per_L;
  }

  /// The quantity of a key's own name.
  const bath::Quantity* quantity_of(Table& table, const std::string& id) {
    const bath::Quantity* quantity = type_.quantity(id);
    if (quantity) return quantity;
    const auto meant = bath::quantity_meant(type_, id);
    table.report(id, "is no quantity of " + type_.name, "", meant ? "Did you mean " + *meant + '?' : "");
    return nullptr;
  }

  /// g/L of a quantity, in any unit.
  static std::optional<double> level(Table& table, const Key& key, const bath::Quantity* quantity) {
    const auto written = table.quantity(key, units::read_concentration);
    if (!written || !quantity) return std::nullopt;
    matter::ConcentrationBasis basis;
    basis.molar_mass = quantity->formula.molar_mass();
    const auto grams = matter::grams_per_litre(*written, basis, table.where(key.name));
    if (grams) return grams->v;
    table.report(key.name, grams.problems());
    return std::nullopt;
  }

  void read_replenishment(Table& rule) {
    Replenishment r;
    r.stock = rule.text({"chemical", required, R"("nickel-sulfate")"});
    struct Rule {
      std::string_view key;
      Replenishment::By by;
    };
    constexpr std::array rules = {Rule{"to_aim", Replenishment::By::analysis},
                                  Rule{"for_each", Replenishment::By::use},
                                  Rule{"per_hour", Replenishment::By::hour},
                                  Rule{"per_day", Replenishment::By::hour},
                                  Rule{"for_each_fill", Replenishment::By::fill},
                                  Rule{"for_each_turnover", Replenishment::By::turnover}};
    int given = 0;
    for (const Rule& one : rules)
      if (rule.has(one.key)) ++given, r.by = one.by;
    if (given != 1)
      rule.report("chemical", "is put in by no rule, or by several",
                  R"(one of to_aim = "Ni^2+", for_each = "1000 Ah", per_hour = "0.2 kg", per_day = "5 kg", )"
                  R"(for_each_fill = "100 L", for_each_turnover = 1)");
    double each = 1;
    switch (r.by) {
      case Replenishment::By::analysis:
        read_to_aim(rule, r);
        break;
      case Replenishment::By::hour: {
        const bool by_day = rule.has("per_day");
        set(r, portion(rule, {by_day ? "per_day" : "per_hour", optional, R"("0.2 kg")"}), by_day ? 24 : 1);
        break;
      }
      case Replenishment::By::use:
        if (const bath::Use* use = use_of_rule(rule, r)) {
          each = amount_of_work(rule, {"for_each", required, R"("1000 Ah")"}, use->counted_in).value_or(1);
          if (!(each > 0)) rule.report("for_each", "is zero", "more than zero");
        } else {
          (void)rule.any({"for_each", optional, ""});
        }
        break;
      case Replenishment::By::fill:
        each = rule.positive({"for_each_fill", required, R"("100 L")"}, units::read_volume)
                   .value_or(units::Litres{1})
                   .v;
        break;
      case Replenishment::By::turnover:
        each = rule.number({"for_each_turnover", required, "1"}, {1e-6, 1e6}).value_or(1);
        break;
    }
    if (r.by != Replenishment::By::analysis && r.by != Replenishment::By::hour && given == 1)
      set(r, portion(rule, {"amount", required, R"("1.2 kg")"}), each);
    policy_.replenishment.push_back(std::move(r));
  }

  static void set(Replenishment& r, const std::optional<Portion>& portion, double each) {
    if (!portion || !(each > 0)) return;
    r.kg_per_unit = portion->kg / each;
    r.L_per_unit = portion->litres / each;
  }

  void read_to_aim(Table& rule, Replenishment& r) {
    r.quantity = rule.text({"to_aim", required, R"("Ni^2+")"});
    const bool shifts = rule.has("every_shifts");
    if (shifts && rule.has("every_days")) rule.report("every_shifts", "beside every_days", "one of the two");
    if (shifts)
      r.every_shifts = whole(rule, {"every_shifts", optional, "2"}, possible_days, 1);
    else
      r.every_days = every_days(rule);
    if (r.quantity == "pH") {
      r.to = rule.number({"to", optional, "4.8"}, {-2, 16});
      return;
    }
    const bath::Quantity* quantity = type_.quantity(r.quantity);
    if (!quantity) {
      const auto meant = bath::quantity_meant(type_, r.quantity);
      rule.report("to_aim", '"' + toml_schema::printable(r.quantity) + "\" is no quantity of " + type_.name,
                  "", meant ? "Did you mean " + *meant + '?' : "");
    }
    r.to = level(rule, {"to", optional, R"("6.0 g/L")"}, quantity);
    r.below = level(rule, {"below", optional, R"("5.6 g/L")"}, quantity);
  }

  /// The use a rule goes by: the one it names, or the only one at work.
  const bath::Use* use_of_rule(Table& rule, Replenishment& r) {
    r.use = rule.text({"use", optional, R"("deposition")"});
    if (!r.use.empty()) return use_of(rule, "use", r.use);
    if (policy_.work.size() != 1) {
      rule.report("for_each", "is of one of several uses, or of none", R"(use = "deposition")");
      return nullptr;
    }
    r.use = policy_.work.front().use;
    return use_of(rule, "use", r.use);
  }

  void read_freeze_out(Table& freeze) {
    forecast::FreezeOut f;
    f.quantity = freeze.text({"quantity", required, R"("Na2CO3")"});
    f.crystals = freeze.text({"crystals", required, R"("Na2CO3.10H2O")"});
    f.every_days = every_days(freeze);
    f.litres =
        freeze.positive({"volume", required, R"("500 L")"}, units::read_volume).value_or(units::Litres{}).v;
    const bath::Quantity* quantity = type_.quantity(f.quantity);
    if (!quantity) freeze.report("quantity", "is no quantity of " + type_.name, "the id of a quantity");
    f.left_g_per_L = level(freeze, {"left", required, R"("40 g/L")"}, quantity).value_or(0);
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
