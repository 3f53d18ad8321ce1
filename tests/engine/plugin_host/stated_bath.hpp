// A small, sound bath type as a plugin would state it, in tables that a test can change.
#pragma once

#include <bathwright_plugin.h>

#include <cstdint>
#include <limits>
#include <vector>

/// Nickel chloride in water: one of every table.
struct StatedBath {
  static constexpr double open = std::numeric_limits<double>::quiet_NaN();

  static bw_status chloride(const bw_view* view, double* value) {
    *value = view->quantity_g_per_L[1];
    return BW_OK;
  }

  std::vector<bw_source> sources = {{"a-book", "An author, A book, a publisher, 1976", "facts"}};
  std::vector<bw_component> components = {
      {"H^+", BW_BY_PH, 0}, {"Ni^2+", BW_BY_ANALYSIS, 0}, {"Cl^-", BW_BY_CHARGE, 0}};
  std::vector<bw_term> nickel = {{"Ni^2+", 1}}, chloride_ion = {{"Cl^-", 1}}, effects = {{"Cl^-", -0.1}};
  std::vector<bw_quantity> quantities = {{"Ni^2+", "nickel", "Ni^2+", nickel.data(), 1, BW_METAL, 0, 0},
                                         {"Cl^-", "chloride", "Cl^-", chloride_ion.data(), 1, BW_SALT, 0, 0}};
  std::vector<bw_own_species> own_species = {{"NiClOH",
                                              "Ni^2+ + Cl^- + H2O = NiClOH + H^+",
                                              {-1, 0.1, 1, BW_ESTIMATED},
                                              {5, open, 1, BW_ESTIMATED},
                                              {open, open, 0, 0},
                                              0}};
  std::vector<bw_own_solid> own_solids = {{"NiCl2.4H2O",
                                           "NiCl2.4H2O",
                                           "NiCl2.4H2O(s) = Ni^2+ + 2 Cl^- + 4 H2O",
                                           nullptr,
                                           {3.8, 0.1, 1, BW_ESTIMATED},
                                           {open, open, 0, 0},
                                           {open, open, 0, 0},
                                           30,
                                           60,
                                           0,
                                           0}};
  std::vector<bw_watched_solid> watched_solids = {{"NiCl2.6H2O", "green crystals"},
                                                  {"NiCl2.4H2O", "green crystals"}};
  std::vector<bw_window> windows = {{"Ni^2+", 50, 60, 70, 40, 80, 1, 0},
                                    {"pH", 1, open, 3, open, open, 1, 0}};
  std::vector<bw_addition_rule> additions = {
      {"nickel-chloride", "dissolve in a side tank", 10, open, 1, 1, 1, 0, 0, 0}};
  std::vector<bw_caution> cautions = {{"nickel-chloride", "Toxic.", BW_STOP, 1}};
  std::vector<bw_indicator> indicators = {{"chloride", "chloride", "shows the anodes", "g/L", chloride}};
  std::vector<bw_use> uses = {{"plating",
                               "plating",
                               effects.data(),
                               1,
                               BW_PER_AH,
                               "Ni^2+",
                               2,
                               {0.9, open, 1, 0},
                               {1, open, 1, 0},
                               1,
                               0,
                               0.2,
                               nullptr}};
  std::vector<bw_incompatibility> incompatibilities = {
      {"sulfide", "Nickel sulfide settles out.", BW_WARN, 1}};
  bw_bath_type head = {sizeof(bw_bath_type),
                       BW_ABI_MINOR,
                       "test-bath",
                       "Test bath",
                       "1.2",
                       "an author",
                       "MIT",
                       "a summary",
                       "its limits",
                       10,
                       70,
                       open,
                       BW_INTERACTION,
                       BW_LITTLE_CHLORIDE,
                       BW_ZINC_DILUTE,
                       0,
                       {},
                       {},
                       {},
                       {},
                       {},
                       {},
                       {},
                       {},
                       {},
                       {},
                       {},
                       {}};

  /// The whole, pointing into the tables as they stand.
  bw_bath_type stated() const {
    bw_bath_type type = head;
    const auto rows = [](const auto& table) {
      return bw_rows{table.data(), static_cast<std::uint32_t>(table.size()), sizeof(table[0])};
    };
    type.sources = rows(sources);
    type.components = rows(components);
    type.quantities = rows(quantities);
    type.own_species = rows(own_species);
    type.own_solids = rows(own_solids);
    type.watched_solids = rows(watched_solids);
    type.windows = rows(windows);
    type.additions = rows(additions);
    type.cautions = rows(cautions);
    type.indicators = rows(indicators);
    type.uses = rows(uses);
    type.incompatibilities = rows(incompatibilities);
    return type;
  }
};
