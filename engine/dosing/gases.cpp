#include "gases.hpp"

#include <algorithm>
#include <bathwright/data/tables.hpp>
#include <bathwright/matter/reactive_kind.hpp>
#include <bathwright/units/show.hpp>

namespace bathwright::dosing {
namespace {

using units::significant;

constexpr double ppm_per_bar = 1e6;

/// What a product gives off in its own drum.
bool is_vapour_of(const matter::StockChemical& stock, const std::string& gas) {
  if (stock.formula == gas) return true;
  const char* kind = gas == "HF"    ? "hydrofluoric-acid"
                     : gas == "NH3" ? "ammonia"
                     : gas == "SO2" ? "sulfite"
                                    : "";
  return matter::is_of_kind(stock.formula, kind);
}

std::string ppm(double value) { return significant(value, 2) + " ppm"; }

}  // namespace

const std::vector<GasCaution>& gas_cautions() {
  static const std::vector<GasCaution> read = [] {
    std::vector<GasCaution> rows;
    const auto table = data::built_in_table("dosing/gas_cautions.csv", {"caution_ppm", "danger_ppm"});
    for (std::size_t i = 0; i < table.size(); ++i)
      rows.push_back({std::string(table[i]["gas"]), std::string(table[i]["name"]),
                      table[i].number("caution_ppm"), table[i].number("danger_ppm")});
    return rows;
  }();
  return read;
}

GasRule::GasRule(const bath::Chemistry& chemistry, const speciation::Equilibrium& start,
                 const std::optional<speciation::Equilibrium>& at_aims)
    : start_pH_(start.pH()) {
  const auto& gases = chemistry.working().system().gases();
  for (const GasCaution& caution : gas_cautions())
    for (std::size_t g = 0; g < gases.size(); ++g)
      if (gases[g].name == caution.gas)
        watched_.push_back({caution, g, ppm_per_bar * start.gas_bar[g],
                            at_aims ? ppm_per_bar * at_aims->gas_bar[g] : ppm_per_bar * start.gas_bar[g]});
}

void GasRule::check_cyanide_pH(double pH, const bath::Held& held, std::vector<Check>& checks) const {
  if (!held.find("cyanide")) return;
  constexpr double rounding = 0.01;
  const bool ok = pH >= std::min(cyanide_pH_floor, start_pH_ - rounding);
  checks.push_back({"cyanide kept alkaline", ok, true,
                    "pH " + significant(pH, 3) + ", stop below " + significant(cyanide_pH_floor, 3) +
                        (ok ? "" : ": hydrogen cyanide leaves the solution"),
                    true});
}

void GasRule::check_tank(const speciation::Equilibrium& after, const bath::Held& held,
                         std::vector<Check>& checks) const {
  for (const Watched& one : watched_) {
    const double now = ppm_per_bar * after.gas_bar[one.gas];
    constexpr double rounding = 1.05;
    const double never = most_over_danger * one.caution.danger_ppm;
    const bool too_much = now > never;
    const bool raised = now > one.caution.caution_ppm && now > most_over_normal * one.aims_ppm &&
                        now > rounding * one.start_ppm;
    if (now < one.caution.caution_ppm && one.start_ppm < one.caution.caution_ppm) continue;
    std::string detail = ppm(now) + " over still liquid, " + ppm(one.aims_ppm) + " at the aims";
    if (too_much)
      detail += "; above " + ppm(never) + " no plan passes";
    else if (raised)
      detail += "; a step may not bring it above 3 times that";
    checks.push_back({one.caution.name, !too_much && !raised, true, std::move(detail), true});
  }
  check_cyanide_pH(after.pH(), held, checks);
}

void GasRule::check_dosing_point(const speciation::Equilibrium& there, const matter::StockChemical& stock,
                                 std::vector<Check>& checks) const {
  for (const Watched& one : watched_) {
    if (is_vapour_of(stock, one.caution.gas)) continue;
    const double now = ppm_per_bar * there.gas_bar[one.gas];
    const double never = most_over_danger * one.caution.danger_ppm;
    const bool more = now > one.caution.caution_ppm && now > most_over_normal * one.aims_ppm &&
                      now > most_over_normal * one.start_ppm;
    const bool acid_on_cyanide = more && one.caution.gas == "HCN" && there.pH() < cyanide_pH_floor;
    const bool stops = now > never || acid_on_cyanide;
    if (!stops && !more) continue;
    std::string detail = ppm(now) + " where it goes in, at pH " + significant(there.pH(), 3);
    if (now > never)
      detail += "; above " + ppm(never) + " no plan passes";
    else if (stops)
      detail += "; cyanide is kept above pH " + significant(cyanide_pH_floor, 3) + " there too";
    else
      detail += "; slowly, stirred, with the extraction on";
    checks.push_back({one.caution.name + " at the dosing point", false, stops, std::move(detail), stops});
  }
}

}  // namespace bathwright::dosing
