/* A bath type as it was built for interface 1.0, with the header of that day: one of every table. It is never
 * changed; every later host must load it. */
#include <bathwright_plugin.h>
#include <math.h>
#include <stddef.h>

#define TABLE(table) \
  { table, sizeof(table) / sizeof(table)[0], sizeof(table)[0] }

static const bw_source sources[] = {{"a-book", "An author, A book, a publisher, 1976, table 3.", "facts"}};
static const bw_component components[] = {
    {"H^+", BW_BY_PH, 0}, {"Ni^2+", BW_BY_ANALYSIS, 0}, {"Cl^-", BW_BY_CHARGE, 0}};
static const bw_term nickel[] = {{"Ni^2+", 1}}, chloride[] = {{"Cl^-", 1}}, effects[] = {{"Cl^-", -0.1}};
static const bw_quantity quantities[] = {{"Ni^2+", "nickel", "Ni^2+", nickel, 1, BW_METAL, 0, 0},
                                         {"Cl^-", "chloride", "Cl^-", chloride, 1, BW_SALT, 0, 0}};
static const bw_own_species own_species[] = {{"NiClOH",
                                              "Ni^2+ + Cl^- + H2O = NiClOH + H^+",
                                              {-1, 0.1, 1, BW_ESTIMATED},
                                              {5, NAN, 1, BW_ESTIMATED},
                                              {NAN, NAN, 0, 0},
                                              0}};
static const bw_own_solid own_solids[] = {{"NiCl2.4H2O",
                                           "NiCl2.4H2O",
                                           "NiCl2.4H2O(s) = Ni^2+ + 2 Cl^- + 4 H2O",
                                           "forms above 29 degC",
                                           {3.8, 0.1, 1, BW_ESTIMATED},
                                           {NAN, NAN, 0, 0},
                                           {NAN, NAN, 0, 0},
                                           30,
                                           60,
                                           1,
                                           0}};
static const bw_watched_solid watched[] = {{"NiCl2.4H2O", "green crystals"}};
static const bw_window windows[] = {{"Ni^2+", 50, 60, 70, 40, 80, 1, 0}};
static const bw_addition_rule additions[] = {{"nickel-chloride", "in a side tank", 10, NAN, 1, 3, 1}};
static const bw_caution cautions[] = {{"nickel-chloride", "Toxic.", BW_STOP, 1}};
static const bw_incompatibility incompatibilities[] = {{"sulfide", "Nickel sulfide settles.", BW_WARN, 1}};

static bw_status eval_chloride(const bw_view* view, double* value) {
  if (view->size < sizeof(bw_view) || view->quantity_count != 2) return BW_NOT_KNOWN;
  *value = view->quantity_g_per_L[1];
  return BW_OK;
}
static const bw_indicator indicators[] = {
    {"free-chloride", "chloride", "keeps the anodes open", "g/L", eval_chloride}};
static bw_status rate(const bw_view* view, double* g_per_unit, uint32_t n) {
  if (n != 1) return BW_NOT_KNOWN;
  g_per_unit[0] = -0.01 * view->temp_C;
  return BW_OK;
}
static const bw_use uses[] = {{"plating",
                               "plating",
                               effects,
                               1,
                               BW_PER_AH,
                               "Ni^2+",
                               2,
                               {0.9, NAN, 1, 0},
                               {1, NAN, 1, 0},
                               1,
                               0,
                               0.2,
                               rate}};

static const bw_bath_type type = {
    .size = sizeof(bw_bath_type),
    .abi_minor = BW_ABI_MINOR,
    .id = "kept-1-0",
    .name = "Kept",
    .version = "1.0",
    .author = "an author",
    .licence = "MIT",
    .summary = "Nickel chloride in water.",
    .validity = "Nothing but a test.",
    .min_C = 10,
    .max_C = 70,
    .max_ionic_strength_mol_per_kg = NAN,
    .convention = BW_INTERACTION,
    .acid_set = BW_LITTLE_CHLORIDE,
    .zinc_set = BW_ZINC_DILUTE,
    .sources = TABLE(sources),
    .components = TABLE(components),
    .quantities = TABLE(quantities),
    .own_species = TABLE(own_species),
    .own_solids = TABLE(own_solids),
    .watched_solids = TABLE(watched),
    .windows = TABLE(windows),
    .additions = TABLE(additions),
    .cautions = TABLE(cautions),
    .indicators = TABLE(indicators),
    .uses = TABLE(uses),
    .incompatibilities = TABLE(incompatibilities),
};

bw_status bw_entry_1(const bw_host* host, uint32_t index, const bw_bath_type** out) {
  if (index > 0) return BW_END;
  /* Only what was there in 1.0 is looked at, whatever the host's size. */
  if (host->size < sizeof(bw_host) || !(host->formula_g_per_mol(host->ctx, "H2O") > 18)) return BW_REFUSED;
  *out = &type;
  return BW_OK;
}
