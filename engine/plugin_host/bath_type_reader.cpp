#include <bathwright_plugin.h>

#include <algorithm>
#include <bathwright/plugin_host/bath_type_reader.hpp>
#include <cmath>
#include <cstring>

#include "plugin_calls.hpp"
#include "rows.hpp"
#include "text.hpp"
#include "type_checks.hpp"

namespace bathwright::plugin_host {
namespace {

constexpr double unknown = bath::not_given;
constexpr bw_datum unknown_datum = {unknown, unknown, 0, 0};

// What a row holds where the plugin is silent, if not zero everywhere.
constexpr bw_window open_window = {nullptr, unknown, unknown, unknown, unknown, unknown, 0, 0};
constexpr bw_addition_rule open_rule = {nullptr, nullptr, unknown, unknown, 0, 0, 0, 0, 0, 0};
constexpr bw_own_species unknown_species = {nullptr, nullptr, unknown_datum, unknown_datum, unknown_datum, 0};
constexpr bw_own_solid unknown_solid = {
    nullptr, nullptr, nullptr, nullptr, unknown_datum, unknown_datum, unknown_datum, unknown, unknown, 0, 0};
constexpr bw_use no_use = {nullptr,       nullptr,       nullptr, 0, 0,       nullptr, unknown,
                           unknown_datum, unknown_datum, 0,       0, unknown, nullptr};

/// Lengths in version 1.0: what an interface of major version 1 can rely on.
constexpr std::size_t smallest_type = 296;
constexpr RowLimits source_rows{24, 1}, component_rows{16, 1}, quantity_rows{48, 1},
    own_species_rows{96, 0, 256}, own_solid_rows{128}, watched_solid_rows{16}, window_rows{56},
    addition_rows{48}, caution_rows{24}, indicator_rows{40}, use_rows{120}, incompatibility_rows{24};

enum class Length : std::size_t { usual = 400, generous = 1000 };  ///< bytes; rule R3
enum class Need : bool { optional, required };

/// Copies table by table; each method reports what is wrong and goes on, so that every problem is found.
class Reader {
 public:
  explicit Reader(const bw_bath_type& stated)
      : in_(copy_row<bw_bath_type>(&stated, stated.size, {})), report_(name_of(in_)) {}

  Result<bath::BathType> read() {
    read_head();
    read_sources();
    read_components();
    read_quantities();
    read_own_species();
    read_own_solids();
    read_watched_solids();
    read_windows();
    read_additions();
    read_cautions();
    read_indicators();
    read_uses();
    read_incompatibilities();
    check_references(out_, report_);
    check_chemistry(out_, report_);
    check_safety(out_, report_);
    if (!report_.problems().empty()) return report_.problems();
    return std::move(out_);
  }
  [[nodiscard]] const std::vector<Place>& places() const { return report_.places(); }

 private:
  /// The id, or what stands for it where there is no sound one.
  static std::string name_of(const bw_bath_type& type) {
    const bool sound = type.id && ::strnlen(type.id, 65) <= 64 && is_id(type.id);
    return sound ? type.id : "bath type";
  }

  std::string text(const Place& place, const char* stated, Need need, Length length = Length::usual) {
    const auto longest = static_cast<std::size_t>(length);
    const std::string_view found(stated ? stated : "", stated ? ::strnlen(stated, longest + 1) : 0);
    if (found.empty() && need == Need::required) report_.add(place, "is missing", "text");
    if (found.size() > longest) {
      report_.add(place, "is too long", "at most " + std::to_string(longest) + " bytes");
      return {};
    }
    if (std::string fault = fault_of_text(found); !fault.empty()) {
      report_.add(place, std::move(fault), "UTF-8 text");
      return {};
    }
    return std::string(found);
  }

  matter::Formula formula(const Place& place, const std::string& stated) {
    if (stated.empty()) return {};
    auto parsed = matter::Formula::parse(stated);
    if (parsed) return *std::move(parsed);
    const Problem& problem = parsed.problems().front();
    report_.add(place, problem.what, problem.expected, problem.try_this);
    return {};
  }

  const bath::Source* source(const Place& place, std::uint32_t row) {
    if (row >= 1 && row <= out_.sources.size()) return &out_.sources[row - 1];
    report_.add(place, row == 0 ? "no source is given" : "there is no source " + std::to_string(row),
                "a row of sources, 1 to " + std::to_string(out_.sources.size()));
    return nullptr;
  }
  std::string source_key(const Place& place, std::uint32_t row) {
    const bath::Source* found = source(place, row);
    return found ? found->key : "";
  }

  double number(const Place& place, double stated, double low, double high) {
    if (!(stated >= low && stated <= high))
      report_.add(place, std::isnan(stated) ? "is unknown" : "is out of range",
                  std::to_string(low) + " to " + std::to_string(high));
    return stated;
  }
  double known_or_nan(const Place& place, double stated) {
    if (std::isinf(stated)) report_.add(place, "is infinite", "a number, or NaN where there is none");
    return stated;
  }

  /// A code that the host must understand; roles, qualities and flags it does not know are no error (rule
  /// R2).
  void code(const Place& place, std::uint32_t stated, std::uint32_t last) {
    if (stated < 1 || stated > last)
      report_.add(place, "the code " + std::to_string(stated) + " is not known",
                  "1 to " + std::to_string(last));
  }

  speciation::Constant constant(const char* table, std::size_t row, const bw_datum& log10_K,
                                const bw_datum& dH, const bw_datum& dCp) {
    constexpr double largest_log10_K = 80, largest_heat = 1e4;
    number({table, row, "log10_K"}, log10_K.value, -largest_log10_K, largest_log10_K);
    for (const auto& [field, datum] : {std::pair{"dH_kJ_per_mol", &dH}, {"dCp_J_per_mol_K", &dCp}}) {
      if (std::isnan(datum->value)) continue;
      number({table, row, field}, datum->value, -largest_heat, largest_heat);
      source({table, row, field}, datum->source);
    }
    const auto or_zero = [](double value) { return std::isnan(value) ? 0 : value; };
    return {log10_K.value, or_zero(dH.value), or_zero(dCp.value), or_zero(log10_K.spread),
            !std::isnan(dH.value)};
  }
  std::string citation(const Place& place, const bw_datum& datum) {
    const bath::Source* found = source(place, datum.source);
    return found ? found->citation : "";
  }
  std::string where(const char* table, std::size_t row) const {
    return out_.id + ' ' + table + " row " + std::to_string(row);
  }

  void read_head() {
    out_.id = text({"", 0, "id"}, in_.id, Need::required);
    if (!out_.id.empty() && !is_id(out_.id))
      report_.add({"", 0, "id"}, "'" + out_.id + "' is no id", "lower-case letters, digits and '-'");
    out_.name = text({"", 0, "name"}, in_.name, Need::required);
    out_.version = text({"", 0, "version"}, in_.version, Need::required);
    if (!out_.version.empty() && !is_dotted_version(out_.version))
      report_.add({"", 0, "version"}, "'" + out_.version + "' is no version", "dotted numbers, 1.0.0");
    out_.author = text({"", 0, "author"}, in_.author, Need::required);
    out_.licence = text({"", 0, "licence"}, in_.licence, Need::required);
    out_.summary = text({"", 0, "summary"}, in_.summary, Need::required, Length::generous);
    out_.validity = text({"", 0, "validity"}, in_.validity, Need::required, Length::generous);
    out_.min_C = number({"", 0, "min_C"}, in_.min_C, -50, 200);
    out_.max_C = number({"", 0, "max_C"}, in_.max_C, -50, 200);
    if (in_.min_C >= in_.max_C) report_.add({"", 0, "max_C"}, "is not above min_C", "min_C < max_C");
    out_.max_ionic_strength =
        known_or_nan({"", 0, "max_ionic_strength_mol_per_kg"}, in_.max_ionic_strength_mol_per_kg);
    code({"", 0, "convention"}, in_.convention, BW_ASSOCIATION);
    out_.convention = in_.convention == BW_ASSOCIATION ? activity::Convention::association
                                                       : activity::Convention::interaction;
    code({"", 0, "acid_set"}, in_.acid_set, BW_MUCH_CHLORIDE);
    out_.sets.acid =
        in_.acid_set == BW_MUCH_CHLORIDE ? activity::AcidSet::chloride : activity::AcidSet::sulfate;
    if (in_.zinc_set != 0) code({"", 0, "zinc_set"}, in_.zinc_set, BW_ZINC_IN_ALKALI);
    out_.sets.zinc = in_.zinc_set == BW_ZINC_IN_CHLORIDE ? activity::ZincSet::chloride
                     : in_.zinc_set == BW_ZINC_IN_ALKALI ? activity::ZincSet::alkaline
                                                         : activity::ZincSet::dilute;
  }

  void read_sources() {
    for (const bw_source& row : copy_rows<bw_source>("sources", in_.sources, source_rows, report_)) {
      const std::size_t n = out_.sources.size() + 1;
      out_.sources.push_back(
          {text({"sources", n, "key"}, row.key, Need::required),
           text({"sources", n, "citation"}, row.citation, Need::required, Length::generous),
           text({"sources", n, "terms"}, row.terms, Need::optional, Length::generous)});
    }
  }

  void read_components() {
    for (const bw_component& row :
         copy_rows<bw_component>("components", in_.components, component_rows, report_)) {
      const std::size_t n = out_.components.size() + 1;
      code({"components", n, "found_by"}, row.found_by, BW_BY_BOOK);
      constexpr bath::FoundBy ways[] = {bath::FoundBy::book, bath::FoundBy::analysis, bath::FoundBy::pH,
                                        bath::FoundBy::charge, bath::FoundBy::book};
      out_.components.push_back({text({"components", n, "species"}, row.species, Need::required),
                                 ways[row.found_by <= BW_BY_BOOK ? row.found_by : 0]});
    }
  }

  void read_quantities() {
    for (const bw_quantity& row :
         copy_rows<bw_quantity>("quantities", in_.quantities, quantity_rows, report_)) {
      const std::size_t n = out_.quantities.size() + 1;
      bath::Quantity quantity;
      quantity.id = text({"quantities", n, "id"}, row.id, Need::required);
      quantity.label = text({"quantities", n, "label"}, row.label, Need::required);
      quantity.formula = formula({"quantities", n, "formula"},
                                 text({"quantities", n, "formula"}, row.formula, Need::required));
      quantity.counts = terms({"quantities", n, "counts"}, row.counts, row.count);
      if (quantity.counts.empty()) report_.add({"quantities", n, "counts"}, "counts nothing", "a component");
      quantity.salt_view = (row.flags & BW_SALT_VIEW) != 0;
      quantity.unwanted = row.role == BW_BYPRODUCT || row.role == BW_CONTAMINANT;
      out_.quantities.push_back(std::move(quantity));
    }
  }

  speciation::Composition terms(const Place& place, const bw_term* first, std::uint32_t count) {
    constexpr std::uint32_t most_terms = 64;
    speciation::Composition composition;
    if (count > most_terms || (count > 0 && !first)) {
      report_.add(place, std::to_string(count) + " terms that cannot be read",
                  "at most 64, and a pointer to them");
      return composition;
    }
    for (const bw_term* term = first; term != first + count; ++term) {
      std::string id = text(place, term->id, Need::required);
      if (!std::isfinite(term->coefficient) || term->coefficient == 0)
        report_.add(place, "the coefficient of '" + id + "' is zero or not finite", "a number");
      if (!composition.emplace(id, term->coefficient).second)
        report_.add(place, "'" + id + "' is counted a second time", "each once");
    }
    return composition;
  }

  void read_own_species() {
    constexpr const char* table = "own_species";
    for (const bw_own_species& row :
         copy_rows<bw_own_species>(table, in_.own_species, own_species_rows, report_, unknown_species)) {
      const std::size_t n = out_.own_species.size() + 1;
      speciation::StatedSpecies species;
      species.name = text({table, n, "name"}, row.name, Need::required);
      species.reaction = text({table, n, "reaction"}, row.reaction, Need::optional);
      species.source = citation({table, n, "log10_K"}, row.log10_K);
      species.where = where(table, n);
      if (!species.reaction.empty())
        species.constant = constant(table, n, row.log10_K, row.dH_kJ_per_mol, row.dCp_J_per_mol_K);
      species.measured_at_ionic_strength =
          number({table, n, "medium_mol_per_kg"}, row.medium_mol_per_kg, 0, 20);
      formula({table, n, "name"}, species.name);
      out_.own_species.push_back(std::move(species));
    }
  }

  void read_own_solids() {
    constexpr const char* table = "own_solids";
    for (const bw_own_solid& row :
         copy_rows<bw_own_solid>(table, in_.own_solids, own_solid_rows, report_, unknown_solid)) {
      const std::size_t n = out_.own_solids.size() + 1;
      speciation::StatedSolid solid;
      solid.name = text({table, n, "name"}, row.name, Need::required);
      solid.formula = text({table, n, "formula"}, row.formula, Need::required);
      solid.reaction = text({table, n, "reaction"}, row.reaction, Need::required);
      solid.note = text({table, n, "note"}, row.note, Need::optional, Length::generous);
      solid.source = citation({table, n, "log10_K"}, row.log10_K);
      solid.where = where(table, n);
      solid.constant = constant(table, n, row.log10_K, row.dH_kJ_per_mol, row.dCp_J_per_mol_K);
      solid.min_C = number({table, n, "min_C"}, row.min_C, -50, 200);
      solid.max_C = number({table, n, "max_C"}, row.max_C, row.min_C, 200);
      solid.slow = row.slow != 0;
      formula({table, n, "formula"}, solid.formula);
      out_.own_solids.push_back(std::move(solid));
    }
  }

  void read_watched_solids() {
    constexpr const char* table = "watched_solids";
    for (const bw_watched_solid& row :
         copy_rows<bw_watched_solid>(table, in_.watched_solids, watched_solid_rows, report_)) {
      const std::size_t n = out_.solids.size() + 1;
      out_.solids.push_back({text({table, n, "name"}, row.name, Need::required),
                             text({table, n, "sign_in_tank"}, row.sign_in_tank, Need::required)});
    }
  }

  void read_windows() {
    for (const bw_window& row :
         copy_rows<bw_window>("windows", in_.windows, window_rows, report_, open_window)) {
      const std::size_t n = out_.windows.size() + 1;
      const auto limit = [&](const char* field, double stated) {
        return known_or_nan({"windows", n, field}, stated);
      };
      out_.windows.push_back({text({"windows", n, "subject"}, row.subject, Need::required),
                              limit("low", row.low), limit("aim", row.aim), limit("high", row.high),
                              limit("stop_low", row.stop_low), limit("stop_high", row.stop_high),
                              source_key({"windows", n, "source"}, row.source)});
    }
  }

  void read_additions() {
    constexpr double largest = 1e4;
    for (const bw_addition_rule& row :
         copy_rows<bw_addition_rule>("additions", in_.additions, addition_rows, report_, open_rule)) {
      const std::size_t n = out_.additions.size() + 1;
      const auto positive_or_nan = [&](const char* field, double stated) {
        if (!std::isnan(stated)) number({"additions", n, field}, stated, 1e-6, largest);
        return stated;
      };
      out_.additions.push_back({text({"additions", n, "supply"}, row.supply, Need::required), row.order,
                                positive_or_nan("largest_rise_g_per_L", row.largest_rise_g_per_L),
                                positive_or_nan("largest_pH_step", row.largest_pH_step),
                                number({"additions", n, "wait_h"}, row.wait_h, 0, largest),
                                text({"additions", n, "how"}, row.how, Need::required, Length::generous),
                                source_key({"additions", n, "source"}, row.source),
                                number({"additions", n, "thin_to_parts"}, row.thin_to_parts, 0, largest),
                                row.half_then_analyse != 0});
    }
  }

  void read_cautions() {
    for (const bw_caution& row : copy_rows<bw_caution>("cautions", in_.cautions, caution_rows, report_)) {
      const std::size_t n = out_.cautions.size() + 1;
      code({"cautions", n, "level"}, row.level, BW_STOP);
      out_.cautions.push_back({text({"cautions", n, "subject"}, row.subject, Need::optional),
                               text({"cautions", n, "text"}, row.text, Need::required, Length::generous),
                               static_cast<bath::Level>(std::min<std::uint32_t>(row.level, BW_STOP)),
                               source_key({"cautions", n, "source"}, row.source)});
    }
  }

  void read_indicators() {
    for (const bw_indicator& row :
         copy_rows<bw_indicator>("indicators", in_.indicators, indicator_rows, report_)) {
      const std::size_t n = out_.indicators.size() + 1;
      bath::Indicator indicator;
      indicator.id = text({"indicators", n, "id"}, row.id, Need::required);
      indicator.label = text({"indicators", n, "label"}, row.label, Need::required);
      indicator.meaning = text({"indicators", n, "meaning"}, row.meaning, Need::required, Length::generous);
      indicator.unit = text({"indicators", n, "unit"}, row.unit, Need::optional);
      if (!row.eval) report_.add({"indicators", n, "eval"}, "is missing", "a function");
      indicator.evaluate = call_indicator(out_.id + ' ' + indicator.id, row.eval);
      out_.indicators.push_back(std::move(indicator));
    }
  }

  void read_uses() {
    constexpr const char* table = "uses";
    for (const bw_use& row : copy_rows<bw_use>(table, in_.uses, use_rows, report_, no_use)) {
      const std::size_t n = out_.uses.size() + 1;
      bath::Use use;
      use.id = text({table, n, "id"}, row.id, Need::required);
      use.label = text({table, n, "label"}, row.label, Need::required);
      code({table, n, "counted_in"}, row.counted_in, BW_PER_M2_HOUR);
      use.counted_in =
          static_cast<bath::CountedIn>(std::clamp<std::uint32_t>(row.counted_in, 1, BW_PER_M2_HOUR));
      use.source = source_key({table, n, "source"}, row.source);
      const auto effects = terms({table, n, "effects"}, row.effects, row.effect_count);
      for (const auto& [id, grams] : effects) quantity_of({table, n, "effects"}, id);
      for (std::size_t i = 0; i < effects.size(); ++i)  // in the order of the table, which is that of `rate`
        use.effects.push_back({row.effects[i].id, row.effects[i].coefficient});
      use.effects_u_rel = row.effects_spread;
      if (!std::isnan(row.effects_spread)) number({table, n, "effects_spread"}, row.effects_spread, 0, 10);
      use.deposits = text({table, n, "deposits"}, row.deposits, Need::optional);
      if (!use.deposits.empty()) {
        quantity_of({table, n, "deposits"}, use.deposits);
        if (use.counted_in == bath::CountedIn::ampere_hour) read_current(n, row, use);
      }
      if (row.rate) use.rate = call_rate(out_.id + ' ' + use.id, row.rate, row.effect_count);
      out_.uses.push_back(std::move(use));
    }
  }
  void read_current(std::size_t n, const bw_use& row, bath::Use& use) {
    use.electrons = number({"uses", n, "electrons"}, row.electrons, 1, 8);
    const auto efficiency = [&](const char* field, const bw_datum& stated, double& value, double& u) {
      value = number({"uses", n, field}, stated.value, 0, 1);
      u = stated.spread;
      source({"uses", n, field}, stated.source);
    };
    efficiency("cathode_efficiency", row.cathode_efficiency, use.cathode_efficiency,
               use.u_cathode_efficiency);
    efficiency("anode_efficiency", row.anode_efficiency, use.anode_efficiency, use.u_anode_efficiency);
  }

  void read_incompatibilities() {
    constexpr const char* table = "incompatibilities";
    for (const bw_incompatibility& row :
         copy_rows<bw_incompatibility>(table, in_.incompatibilities, incompatibility_rows, report_)) {
      const std::size_t n = out_.incompatibilities.size() + 1;
      code({table, n, "level"}, row.level, BW_STOP);
      out_.incompatibilities.push_back(
          {text({table, n, "with"}, row.with, Need::required),
           text({table, n, "why"}, row.why, Need::required, Length::generous),
           static_cast<bath::Level>(std::clamp<std::uint32_t>(row.level, 1, BW_STOP)),
           source_key({table, n, "source"}, row.source)});
    }
  }
  void quantity_of(const Place& place, const std::string& id) {
    if (!out_.quantity(id)) report_.add(place, "'" + id + "' is not a quantity", "the id of a quantity");
  }

  bw_bath_type in_;
  bath::BathType out_;
  Report report_;
};

}  // namespace

Result<bath::BathType> read_bath_type(const bw_bath_type& stated, std::vector<Place>* places) {
  if (places) places->assign(1, {});
  if (stated.size < smallest_type || stated.size > largest_row || stated.size % 8 != 0)
    return Problem{
        Fault::inconsistent_data, "bath type size",
        "a bath type of " + std::to_string(stated.size) + " bytes",
        "sizeof(bw_bath_type): at least " + std::to_string(smallest_type) + " bytes, a multiple of 8", ""};
  Reader reader(stated);
  auto type = reader.read();
  if (places) *places = reader.places();
  return type;
}

}  // namespace bathwright::plugin_host
