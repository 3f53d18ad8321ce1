/* The layout of interface 1.0 on 64-bit machines, written out once and never changed: every field at its
 * place and with its size, every code with its number. A later minor version may add behind them. This file
 * compiling, as C11 and as C++20 without a warning, is the test. */
#include <bathwright_plugin.h>
#include <stddef.h>

#ifdef __cplusplus
#define HOLDS(condition) static_assert(condition, #condition)
#else
#define HOLDS(condition) _Static_assert(condition, #condition)
#endif
#define FROZEN(type, size) HOLDS(sizeof(type) == (size))
#define GROWS(type, size) HOLDS(sizeof(type) >= (size))
#define FIELD(type, field, offset, size) \
  HOLDS(offsetof(type, field) == (offset) && sizeof(((type*)0)->field) == (size))
#define CODE(name, value) HOLDS((name) == (value))

HOLDS(BW_ABI_MAJOR == 1);
HOLDS(sizeof(void*) == 8);
HOLDS(sizeof(bw_status) == 4 && (bw_status)-1 < 0);

FROZEN(bw_rows, 16);
FIELD(bw_rows, first, 0, 8);
FIELD(bw_rows, count, 8, 4);
FIELD(bw_rows, row_size, 12, 4);

FROZEN(bw_term, 16);
FIELD(bw_term, id, 0, 8);
FIELD(bw_term, coefficient, 8, 8);

FROZEN(bw_datum, 24);
FIELD(bw_datum, value, 0, 8);
FIELD(bw_datum, spread, 8, 8);
FIELD(bw_datum, source, 16, 4);
FIELD(bw_datum, quality, 20, 4);

GROWS(bw_source, 24);
FIELD(bw_source, key, 0, 8);
FIELD(bw_source, citation, 8, 8);
FIELD(bw_source, terms, 16, 8);

GROWS(bw_component, 16);
FIELD(bw_component, species, 0, 8);
FIELD(bw_component, found_by, 8, 4);
FIELD(bw_component, reserved, 12, 4);

GROWS(bw_quantity, 48);
FIELD(bw_quantity, id, 0, 8);
FIELD(bw_quantity, label, 8, 8);
FIELD(bw_quantity, formula, 16, 8);
FIELD(bw_quantity, counts, 24, 8);
FIELD(bw_quantity, count, 32, 4);
FIELD(bw_quantity, role, 36, 4);
FIELD(bw_quantity, flags, 40, 4);
FIELD(bw_quantity, reserved, 44, 4);

GROWS(bw_own_species, 96);
FIELD(bw_own_species, name, 0, 8);
FIELD(bw_own_species, reaction, 8, 8);
FIELD(bw_own_species, log10_K, 16, 24);
FIELD(bw_own_species, dH_kJ_per_mol, 40, 24);
FIELD(bw_own_species, dCp_J_per_mol_K, 64, 24);
FIELD(bw_own_species, medium_mol_per_kg, 88, 8);

GROWS(bw_own_solid, 128);
FIELD(bw_own_solid, name, 0, 8);
FIELD(bw_own_solid, formula, 8, 8);
FIELD(bw_own_solid, reaction, 16, 8);
FIELD(bw_own_solid, note, 24, 8);
FIELD(bw_own_solid, log10_K, 32, 24);
FIELD(bw_own_solid, dH_kJ_per_mol, 56, 24);
FIELD(bw_own_solid, dCp_J_per_mol_K, 80, 24);
FIELD(bw_own_solid, min_C, 104, 8);
FIELD(bw_own_solid, max_C, 112, 8);
FIELD(bw_own_solid, slow, 120, 4);
FIELD(bw_own_solid, reserved, 124, 4);

GROWS(bw_watched_solid, 16);
FIELD(bw_watched_solid, name, 0, 8);
FIELD(bw_watched_solid, sign_in_tank, 8, 8);

GROWS(bw_window, 56);
FIELD(bw_window, subject, 0, 8);
FIELD(bw_window, low, 8, 8);
FIELD(bw_window, aim, 16, 8);
FIELD(bw_window, high, 24, 8);
FIELD(bw_window, stop_low, 32, 8);
FIELD(bw_window, stop_high, 40, 8);
FIELD(bw_window, source, 48, 4);
FIELD(bw_window, reserved, 52, 4);

GROWS(bw_addition_rule, 48);
FIELD(bw_addition_rule, supply, 0, 8);
FIELD(bw_addition_rule, how, 8, 8);
FIELD(bw_addition_rule, largest_rise_g_per_L, 16, 8);
FIELD(bw_addition_rule, largest_pH_step, 24, 8);
FIELD(bw_addition_rule, wait_h, 32, 8);
FIELD(bw_addition_rule, order, 40, 4);
FIELD(bw_addition_rule, source, 44, 4);

GROWS(bw_incompatibility, 24);
FIELD(bw_incompatibility, with, 0, 8);
FIELD(bw_incompatibility, why, 8, 8);
FIELD(bw_incompatibility, level, 16, 4);
FIELD(bw_incompatibility, source, 20, 4);

GROWS(bw_caution, 24);
FIELD(bw_caution, subject, 0, 8);
FIELD(bw_caution, text, 8, 8);
FIELD(bw_caution, level, 16, 4);
FIELD(bw_caution, source, 20, 4);

GROWS(bw_view, 80);
FIELD(bw_view, size, 0, 4);
FIELD(bw_view, quantity_count, 4, 4);
FIELD(bw_view, species_count, 8, 4);
FIELD(bw_view, reserved, 12, 4);
FIELD(bw_view, temp_C, 16, 8);
FIELD(bw_view, volume_L, 24, 8);
FIELD(bw_view, pH, 32, 8);
FIELD(bw_view, ionic_strength_mol_per_kg, 40, 8);
FIELD(bw_view, quantity_g_per_L, 48, 8);
FIELD(bw_view, species, 56, 8);
FIELD(bw_view, molality_mol_per_kg, 64, 8);
FIELD(bw_view, activity, 72, 8);

GROWS(bw_indicator, 40);
FIELD(bw_indicator, id, 0, 8);
FIELD(bw_indicator, label, 8, 8);
FIELD(bw_indicator, meaning, 16, 8);
FIELD(bw_indicator, unit, 24, 8);
FIELD(bw_indicator, eval, 32, 8);

GROWS(bw_use, 120);
FIELD(bw_use, id, 0, 8);
FIELD(bw_use, label, 8, 8);
FIELD(bw_use, effects, 16, 8);
FIELD(bw_use, effect_count, 24, 4);
FIELD(bw_use, counted_in, 28, 4);
FIELD(bw_use, deposits, 32, 8);
FIELD(bw_use, electrons, 40, 8);
FIELD(bw_use, cathode_efficiency, 48, 24);
FIELD(bw_use, anode_efficiency, 72, 24);
FIELD(bw_use, source, 96, 4);
FIELD(bw_use, reserved, 100, 4);
FIELD(bw_use, effects_spread, 104, 8);
FIELD(bw_use, rate, 112, 8);

GROWS(bw_host, 48);
FIELD(bw_host, size, 0, 4);
FIELD(bw_host, abi_minor, 4, 4);
FIELD(bw_host, ctx, 8, 8);
FIELD(bw_host, name, 16, 8);
FIELD(bw_host, version, 24, 8);
FIELD(bw_host, note, 32, 8);
FIELD(bw_host, formula_g_per_mol, 40, 8);

GROWS(bw_bath_type, 296);
FIELD(bw_bath_type, size, 0, 4);
FIELD(bw_bath_type, abi_minor, 4, 4);
FIELD(bw_bath_type, id, 8, 8);
FIELD(bw_bath_type, name, 16, 8);
FIELD(bw_bath_type, version, 24, 8);
FIELD(bw_bath_type, author, 32, 8);
FIELD(bw_bath_type, licence, 40, 8);
FIELD(bw_bath_type, summary, 48, 8);
FIELD(bw_bath_type, validity, 56, 8);
FIELD(bw_bath_type, min_C, 64, 8);
FIELD(bw_bath_type, max_C, 72, 8);
FIELD(bw_bath_type, max_ionic_strength_mol_per_kg, 80, 8);
FIELD(bw_bath_type, convention, 88, 4);
FIELD(bw_bath_type, acid_set, 92, 4);
FIELD(bw_bath_type, zinc_set, 96, 4);
FIELD(bw_bath_type, reserved, 100, 4);
FIELD(bw_bath_type, sources, 104, 16);
FIELD(bw_bath_type, components, 120, 16);
FIELD(bw_bath_type, quantities, 136, 16);
FIELD(bw_bath_type, own_species, 152, 16);
FIELD(bw_bath_type, own_solids, 168, 16);
FIELD(bw_bath_type, watched_solids, 184, 16);
FIELD(bw_bath_type, windows, 200, 16);
FIELD(bw_bath_type, additions, 216, 16);
FIELD(bw_bath_type, cautions, 232, 16);
FIELD(bw_bath_type, indicators, 248, 16);
FIELD(bw_bath_type, uses, 264, 16);
FIELD(bw_bath_type, incompatibilities, 280, 16);

CODE(BW_OK, 0);
CODE(BW_END, 1);
CODE(BW_REFUSED, 2);
CODE(BW_OUT_OF_RANGE, 3);
CODE(BW_NOT_KNOWN, 4);
CODE(BW_NOTICE, 1);
CODE(BW_WARN, 2);
CODE(BW_STOP, 3);
CODE(BW_BY_ANALYSIS, 1);
CODE(BW_BY_PH, 2);
CODE(BW_BY_CHARGE, 3);
CODE(BW_BY_BOOK, 4);
CODE(BW_METAL, 1);
CODE(BW_LIGAND, 2);
CODE(BW_BUFFER, 3);
CODE(BW_SALT, 4);
CODE(BW_REDUCER, 5);
CODE(BW_BYPRODUCT, 6);
CODE(BW_CONTAMINANT, 7);
CODE(BW_SALT_VIEW, 1);
CODE(BW_INTERACTION, 1);
CODE(BW_ASSOCIATION, 2);
CODE(BW_LITTLE_CHLORIDE, 1);
CODE(BW_MUCH_CHLORIDE, 2);
CODE(BW_ZINC_DILUTE, 1);
CODE(BW_ZINC_IN_CHLORIDE, 2);
CODE(BW_ZINC_IN_ALKALI, 3);
CODE(BW_PER_AH, 1);
CODE(BW_PER_G_DEPOSIT, 2);
CODE(BW_PER_M2, 3);
CODE(BW_PER_HOUR, 4);
CODE(BW_PER_M2_HOUR, 5);
CODE(BW_REVIEWED, 1);
CODE(BW_MEASURED, 2);
CODE(BW_ESTIMATED, 3);
