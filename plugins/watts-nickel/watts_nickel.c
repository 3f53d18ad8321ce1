/* Watts nickel: nickel sulfate, nickel chloride and boric acid at pH 3.5 to 5, 45 to 65 degC. All equilibria
 * are those of the shared tables; what is modelled and what is not stands in README.md. */
#include <bathwright_plugin.h>
#include <math.h>
#include <stddef.h>

#define COUNT(table) (sizeof(table) / sizeof(table)[0])
#define TABLE(table) \
  { table, COUNT(table), sizeof(table)[0] }
#define OPEN NAN
#define UNKNOWN NAN
#define SDS_DECIDES " The supplier's SDS, local codes and licensed practice decide."

/* Rows of `sources`, 1-based. */
enum { COMMON_PRACTICE = 1, HANDBOOKS, ENCYCLOPEDIA, ARITHMETIC };
static const bw_source sources[] = {
    {"common-practice", "Common practice of nickel shops; no source.", "free"},
    {"handbooks-from-memory",
     "From memory of electroplating handbooks (Schlesinger & Paunovic, Modern Electroplating, Wiley; ASM "
     "Handbook "
     "vol. 5, Surface Engineering); no page was looked up.",
     "facts"},
    {"encyclopedia",
     "Public encyclopedia article on nickel electroplating, which cites electroplating handbooks.", "facts"},
    {"arithmetic", "Computed from the formulae and the other windows of this bath type.", "free"},
};

static const bw_component components[] = {
    {"H^+", BW_BY_PH, 0},         {"Ni^2+", BW_BY_ANALYSIS, 0}, {"Cl^-", BW_BY_ANALYSIS, 0},
    {"H3BO3", BW_BY_ANALYSIS, 0}, {"SO4^2-", BW_BY_CHARGE, 0},  {"Na^+", BW_BY_BOOK, 0},
    {"Ca^2+", BW_BY_BOOK, 0},
};

/* The first rows of `quantities`, 0-based, as eval functions see them. */
enum { NICKEL, CHLORIDE };
static const bw_term nickel[] = {{"Ni^2+", 1}};
static const bw_term chloride[] = {{"Cl^-", 1}};
static const bw_term boric_acid[] = {{"H3BO3", 1}};
static const bw_term sulfate[] = {{"SO4^2-", 1}};
static const bw_term sodium[] = {{"Na^+", 1}};
static const bw_term calcium[] = {{"Ca^2+", 1}};
/* By trade custom all chloride counts as nickel chloride, the rest of the nickel as nickel sulfate. */
static const bw_term nickel_sulfate[] = {{"Ni^2+", 1}, {"Cl^-", -0.5}};
static const bw_term nickel_chloride[] = {{"Cl^-", 0.5}};
static const bw_quantity quantities[] = {
    {"Ni^2+", "nickel", "Ni^2+", nickel, COUNT(nickel), BW_METAL, 0, 0},
    {"Cl^-", "chloride", "Cl^-", chloride, COUNT(chloride), BW_SALT, 0, 0},
    {"H3BO3", "boric acid", "H3BO3", boric_acid, COUNT(boric_acid), BW_BUFFER, 0, 0},
    {"SO4^2-", "sulfate", "SO4^2-", sulfate, COUNT(sulfate), BW_SALT, 0, 0},
    {"Na^+", "sodium", "Na^+", sodium, COUNT(sodium), BW_CONTAMINANT, 0, 0},
    {"Ca^2+", "calcium", "Ca^2+", calcium, COUNT(calcium), BW_CONTAMINANT, 0, 0},
    {"NiSO4.6H2O", "nickel sulfate hexahydrate", "NiSO4.6H2O", nickel_sulfate, COUNT(nickel_sulfate), BW_SALT,
     BW_SALT_VIEW, 0},
    {"NiCl2.6H2O", "nickel chloride hexahydrate", "NiCl2.6H2O", nickel_chloride, COUNT(nickel_chloride),
     BW_SALT, BW_SALT_VIEW, 0},
};

static const bw_watched_solid watched_solids[] = {
    {"H3BO3", "white flakes on cold walls and pipes, or on the bottom after a weekend"},
    {"NiSO4.7H2O", "green crystals on cold walls, anode bags and pump suctions"},
    {"NiSO4.6H2O (alpha)", "blue-green crystals at the waterline and in idle pipework"},
    {"NiSO4.6H2O (beta)", "green crystals at the waterline of a hot tank that lost water"},
    {"NiCl2.6H2O", "green crystals in a side tank made up too strong"},
    {"Ni(OH)2 (freshly precipitated)", "pale green haze that clogs the filter; rough, dark deposit"},
    {"CaSO4.2H2O (gypsum)", "fine white needles on heaters and parts; roughness on shelves"},
};

static const bw_window windows[] = {
    {"Ni^2+", 60, 75, 90, OPEN, OPEN, ARITHMETIC, 0},
    {"Cl^-", 12, 15, 22, OPEN, OPEN, ARITHMETIC, 0},
    {"H3BO3", 38, 42, 50, OPEN, OPEN, ENCYCLOPEDIA, 0},
    {"NiSO4.6H2O", 225, 280, 300, OPEN, OPEN, ENCYCLOPEDIA, 0},
    {"NiCl2.6H2O", 40, 50, 75, OPEN, OPEN, ENCYCLOPEDIA, 0},
    {"Na^+", OPEN, OPEN, 5, OPEN, 15, HANDBOOKS, 0},
    {"Ca^2+", OPEN, OPEN, 0.15, OPEN, 0.5, HANDBOOKS, 0},
    {"pH", 3.5, 4.2, 5.0, OPEN, 5.5, HANDBOOKS, 0},
    {"temperature", 45, 55, 65, OPEN, OPEN, ENCYCLOPEDIA, 0},
    {"chloride-to-nickel", 0.15, 0.2, 0.3, OPEN, OPEN, ARITHMETIC, 0},
};

/* The buffer goes in before the pH is trimmed. */
static const bw_addition_rule additions[] = {
    {"boric-acid",
     "Dissolve in hot bath or hot water in a side tank and filter in, or hang it in a bag in the flow of an "
     "anode "
     "corner; never loose into the tank.",
     5, OPEN, 2, 1, COMMON_PRACTICE, 0, 0, 0},
    {"nickel-sulfate", "Dissolve hot in a side tank, treat with carbon, filter in.", 10, OPEN, 0.75, 2,
     COMMON_PRACTICE, 0, 0, 0},
    {"nickel-chloride", "Dissolve in a side tank (it dissolves fast) and filter in.", 10, OPEN, 0.75, 3,
     COMMON_PRACTICE, 0, 0, 0},
    {"sulfuric-acid",
     "Dilute one to ten first, the acid into cold stirred water; run in slowly at the filter return.", OPEN,
     0.2, 0.25, 4, COMMON_PRACTICE, 10, 0, 0},
    {"nickel-carbonate",
     "Slurry in a vented side tank or on the filter and circulate until it is gone; filter out the residue.",
     OPEN, 0.2, 0.25, 4, COMMON_PRACTICE, 0, 0, 0},
};

static const bw_caution cautions[] = {
    {"",
     "Nickel salts cause cancer when breathed in as mist or dust and sensitise skin and airways. Extraction "
     "over the "
     "warm tank, no skin contact, and nobody already sensitised does this work." SDS_DECIDES,
     BW_STOP, COMMON_PRACTICE},
    {"",
     "A warm, air-stirred tank throws an acid mist of nickel salts. Check extraction and level before "
     "working over it." SDS_DECIDES,
     BW_STOP, COMMON_PRACTICE},
    {"nickel-sulfate",
     "Carcinogen by inhalation and sensitiser: weigh under extraction, make no dust, wet the empty "
     "bag." SDS_DECIDES,
     BW_STOP, COMMON_PRACTICE},
    {"nickel-chloride",
     "Toxic if swallowed or breathed in, carcinogen by inhalation and sensitiser: weigh under extraction, "
     "make no "
     "dust." SDS_DECIDES,
     BW_STOP, COMMON_PRACTICE},
    {"nickel-carbonate",
     "Carcinogen by inhalation and sensitiser, and in acid it foams and gives off carbon dioxide: small "
     "portions, open "
     "ventilated vessel, never a closed filter or pit." SDS_DECIDES,
     BW_STOP, COMMON_PRACTICE},
    {"boric-acid",
     "May damage fertility or the unborn child: no dust, and not by anyone whom the site's assessment "
     "excludes." SDS_DECIDES,
     BW_STOP, COMMON_PRACTICE},
    {"sulfuric-acid",
     "Acid into water, never water into acid: it boils and throws acid. Face shield, gloves and apron, "
     "eyewash within "
     "reach; keep the acid away from cyanide and sulfide." SDS_DECIDES,
     BW_STOP, COMMON_PRACTICE},
    {"Na^+",
     "Sodium stays in the bath and stresses the deposit: raise the pH with nickel carbonate. Strong caustic "
     "also throws "
     "nickel hydroxide where it meets the bath.",
     BW_WARN, COMMON_PRACTICE},
    {"Ca^2+",
     "Hard water brings calcium, and gypsum is less soluble hot: make up evaporation with deionised water.",
     BW_NOTICE, COMMON_PRACTICE},
    {"H3BO3",
     "Boric acid crystallises where the bath is coldest: look at idle pipework before raising its target.",
     BW_NOTICE, COMMON_PRACTICE},
};

static bw_status eval_chloride_to_nickel(const bw_view* view, double* value) {
  const double cl = view->quantity_g_per_L[CHLORIDE], ni = view->quantity_g_per_L[NICKEL];
  if (isnan(cl) || isnan(ni)) return BW_NOT_KNOWN;
  if (!(ni > 0)) return BW_OUT_OF_RANGE;
  *value = cl / ni;
  return BW_OK;
}

static bw_status eval_free_nickel(const bw_view* view, double* value) {
  const uint32_t ni = bw_species_index(view, "Ni^2+");
  if (ni == UINT32_MAX) return BW_NOT_KNOWN;
  if (!(view->activity[ni] > 0)) return BW_OUT_OF_RANGE;
  *value = log10(view->activity[ni]);
  return BW_OK;
}

static bw_status eval_undissociated_boric_acid(const bw_view* view, double* value) {
  const uint32_t acid = bw_species_index(view, "H3BO3");
  if (acid == UINT32_MAX) return BW_NOT_KNOWN;
  *value = view->molality_mol_per_kg[acid];
  return BW_OK;
}

static const bw_indicator indicators[] = {
    {"chloride-to-nickel", "chloride to nickel",
     "Too low and the anodes passivate; too high and the deposit is stressed.", "g/g",
     eval_chloride_to_nickel},
    {"free-nickel", "free nickel, log10 of its activity",
     "What the cathode sees of the nickel; falls with dilution and as sulfate holds it.", "",
     eval_free_nickel},
    {"undissociated-boric-acid", "boric acid, undissociated",
     "The part that buffers the film at the cathode and that crystallises in the cold.", "mol/kg",
     eval_undissociated_boric_acid},
};

/* Nothing beside nickel and acid is used up by the current, so there are no effects to list. */
static const bw_use uses[] = {
    {"deposition",
     "nickel plated from soluble anodes",
     NULL,
     0,
     BW_PER_AH,
     "Ni^2+",
     2,
     {0.96, UNKNOWN, HANDBOOKS, BW_ESTIMATED},
     {1.0, UNKNOWN, HANDBOOKS, BW_ESTIMATED},
     HANDBOOKS,
     0,
     UNKNOWN,
     NULL},
};

static const bw_incompatibility incompatibilities[] = {
    {"acid_cyanide", "Cyanide in this acid bath gives off hydrogen cyanide gas.", BW_STOP, COMMON_PRACTICE},
    {"acid_sulfide", "Sulfide in this acid bath gives off hydrogen sulfide gas and throws nickel sulfide.",
     BW_STOP, COMMON_PRACTICE},
};

static const bw_bath_type watts_nickel = {
    .size = sizeof(bw_bath_type),
    .abi_minor = BW_ABI_MINOR,
    .id = "watts-nickel",
    .name = "Watts nickel",
    .version = "1.0.0",
    .author = "Bathwright contributors",
    .licence = "MIT",
    .summary =
        "Bright or semi-bright nickel from sulfate and chloride, buffered with boric acid, on soluble "
        "anodes.",
    .validity =
        "Solutions of nickel sulfate, nickel chloride and boric acid up to an ionic strength of 10 mol/kg, "
        "pH 2 to 6, 0 to "
        "75 degC; sodium and calcium as traces. Brighteners, wetters and metal impurities are not modelled.",
    .min_C = 0,
    .max_C = 75,
    .max_ionic_strength_mol_per_kg = 10,
    .convention = BW_INTERACTION,
    .acid_set = BW_MUCH_CHLORIDE,
    .sources = TABLE(sources),
    .components = TABLE(components),
    .quantities = TABLE(quantities),
    .watched_solids = TABLE(watched_solids),
    .windows = TABLE(windows),
    .additions = TABLE(additions),
    .cautions = TABLE(cautions),
    .indicators = TABLE(indicators),
    .uses = TABLE(uses),
    .incompatibilities = TABLE(incompatibilities),
};

bw_status bw_entry_1(const bw_host* host, uint32_t index, const bw_bath_type** out) {
  (void)host;
  if (index > 0) return BW_END;
  *out = &watts_nickel;
  return BW_OK;
}
