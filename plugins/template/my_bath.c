/* my-bath: nickel sulfate in water, as a start for a bath type of your own. README.md says what to do. The
 * terms of this file: MIT, as of Bathwright; its numbers are placeholders and good for nothing. */
#include <bathwright_plugin.h>
#include <math.h>

#define COUNT(table) (sizeof(table) / sizeof(table)[0])
#define TABLE(table) \
  { table, COUNT(table), sizeof(table)[0] }

enum { PLACEHOLDER = 1 }; /* rows of `sources`, 1-based */
static const bw_source sources[] = {
    {"placeholder", "A book or paper, with authors, publisher or journal, volume, page, table.", "facts"},
};

static const bw_component components[] = {
    {"H^+", BW_BY_PH, 0}, {"Ni^2+", BW_BY_ANALYSIS, 0}, {"SO4^2-", BW_BY_CHARGE, 0}};

static const bw_term nickel[] = {{"Ni^2+", 1}};
static const bw_quantity quantities[] = {
    {"NiSO4.6H2O", "nickel sulfate", "NiSO4.6H2O", nickel, COUNT(nickel), BW_METAL, 0, 0}};

static const bw_own_species own_species[] = {{.name = "NiOH^+",
                                              .reaction = "Ni^2+ + H2O = NiOH^+ + H^+",
                                              .log10_K = {-9.5, 0.5, PLACEHOLDER, BW_ESTIMATED},
                                              .dH_kJ_per_mol = {50, NAN, PLACEHOLDER, BW_ESTIMATED},
                                              .dCp_J_per_mol_K = {NAN, NAN, 0, 0}}};

static const bw_window windows[] = {{"NiSO4.6H2O", 200, 250, 300, NAN, NAN, PLACEHOLDER, 0},
                                    {"pH", 3, 4, 5, NAN, NAN, PLACEHOLDER, 0}};

static const bw_caution cautions[] = {
    {"", "Nickel salts cause cancer when breathed in and sensitise skin. The supplier's SDS decides.",
     BW_STOP, PLACEHOLDER}};

static bw_status eval_free_nickel(const bw_view* view, double* value) {
  const uint32_t ni = bw_species_index(view, "Ni^2+");
  if (ni == UINT32_MAX) return BW_NOT_KNOWN;
  if (!(view->activity[ni] > 0)) return BW_OUT_OF_RANGE;
  *value = log10(view->activity[ni]);
  return isfinite(*value) ? BW_OK : BW_OUT_OF_RANGE;
}
static const bw_indicator indicators[] = {{"free-nickel", "free nickel, log10 of its activity",
                                           "What the cathode sees of the nickel.", "", eval_free_nickel}};

static const bw_bath_type my_bath = {
    .size = sizeof(bw_bath_type),
    .abi_minor = BW_ABI_MINOR,
    .id = "my-bath",
    .name = "My bath",
    .version = "0.1.0",
    .author = "You",
    .licence = "MIT",
    .summary = "Nickel sulfate in water.",
    .validity = "To 2 mol/kg, pH 2 to 6, 10 to 60 degC.",
    .min_C = 10,
    .max_C = 60,
    .max_ionic_strength_mol_per_kg = 8,
    .convention = BW_INTERACTION,
    .acid_set = BW_LITTLE_CHLORIDE,
    .sources = TABLE(sources),
    .components = TABLE(components),
    .quantities = TABLE(quantities),
    .own_species = TABLE(own_species),
    .windows = TABLE(windows),
    .cautions = TABLE(cautions),
    .indicators = TABLE(indicators),
};

bw_status bw_entry_1(const bw_host* host, uint32_t index, const bw_bath_type** out) {
  (void)host;
  if (index > 0) return BW_END;
  *out = &my_bath;
  return BW_OK;
}
