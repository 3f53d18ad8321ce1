/* The C interface between Bathwright and a bath-type plugin: what a bath is made of, which limits, rules and
 * cautions it has, as constant tables, and the few figures that need code. C11 and C++20. Version 1.1.
 *
 * Rules
 * R1 Only fixed-width integers, doubles and pointers cross. No C++ type, exception, longjmp, signal handler,
 *    thread, change of locale or of floating-point mode may cross.
 * R2 Top structs begin with their size, tables state the size of their rows; both grow at the end only. What
 *    one side does not know about reads as zero, and zero means "not given". An unknown role, quality or flag
 *    is not an error.
 * R3 Text is UTF-8, ends in NUL, holds no control characters and at most 400 bytes, 1000 where marked long.
 *    Text marked req is never NULL or empty; other text may be NULL.
 * R4 The unit stands in the field's name or comment. An unknown number is NaN, never 0.
 * R5 Tables are constant, owned by the plugin, valid until the process ends; the host copies them while
 *    loading and keeps only the functions. Neither side frees the other's memory. No library is unloaded.
 * R6 A number taken from somewhere says from where: `source` is the 1-based row of `sources`; 0 is refused.
 *
 * Call order and threads
 *   [load] once, on one thread, before any other call.
 *   [calc] later, on any thread, several at once: pure. No globals written, no input or output, same input ->
 *          same bits, back within 2 ms.
 *   found    nothing is called: the file is read, hashed, looked up among those that may run
 *   probed   in a process of its own: all of the below, with odd states of the bath too
 *   loading  bw_entry_1 with 0, 1, 2 ... until BW_END; the tables are checked and copied
 *   ready    eval and rate, in any order, until the process ends or three faults have parked the bath type
 *
 * Whatever a function is handed is the host's and valid during that call alone; it writes the numbers it is
 * asked for and nothing else. What no comment says otherwise of holds for each field: text and tables by R3
 * and R5, numbers by R4 and finite, codes and flags by R2.
 *
 * A library that is a plugin is named <id>.bathtype.so and exports bw_entry_1 and nothing else. */
#ifndef BATHWRIGHT_PLUGIN_H
#define BATHWRIGHT_PLUGIN_H

#include <stdint.h>

#ifdef __cplusplus
extern "C" {
#endif

#define BW_ABI_MAJOR 1u /* part of the entry's name: a changed field, meaning, unit or call order */
#define BW_ABI_MINOR 1u /* +1 for every appended field, code or table                             */

typedef int32_t bw_status; /* negative values are reserved for the host */
enum {
  BW_OK = 0,
  BW_END = 1,          /* bw_entry_1: no bath type with this index                 */
  BW_REFUSED = 2,      /* bw_entry_1: the reason went to bw_host.note              */
  BW_OUT_OF_RANGE = 3, /* eval: the state lies outside what the figure is good for */
  BW_NOT_KNOWN = 4     /* eval: something the figure needs was not analysed        */
};

/* Levels of cautions and notes. Stop: somebody may be killed or injured. */
enum { BW_NOTICE = 1, BW_WARN = 2, BW_STOP = 3 };

/* How the total of a component is known when a tank is analysed. */
enum {
  BW_BY_ANALYSIS = 1, /* titrated, or reported by a laboratory; H^+ by way of a quantity such as H2SO4 or
                       * NaOH, in baths whose acid or alkali is titrated                  */
  BW_BY_PH = 2,       /* H^+, and only H^+                                               */
  BW_BY_CHARGE = 3,   /* what electroneutrality leaves: exactly one per bath type; H^+ in chromic acid */
  BW_BY_BOOK = 4      /* carried from the last state of the tank                         */
};

/* What a quantity is there for. */
enum {
  BW_METAL = 1,
  BW_LIGAND = 2,
  BW_BUFFER = 3,
  BW_SALT = 4,
  BW_REDUCER = 5,
  BW_BYPRODUCT = 6,
  BW_CONTAMINANT = 7
};

/* Quantity flags. Salt view: another way to state components that are quantities of their own. */
enum { BW_SALT_VIEW = 1 };

/* Which constants of the shared tables the bath type is written for: weak ion pairs inside the activity
 * coefficients (interaction, Pitzer) or as explicit species (association, Davies and Debye-Hueckel). */
enum { BW_INTERACTION = 1, BW_ASSOCIATION = 2 };
enum { BW_LITTLE_CHLORIDE = 1, BW_MUCH_CHLORIDE = 2 };
enum { BW_ZINC_DILUTE = 1, BW_ZINC_IN_CHLORIDE = 2, BW_ZINC_IN_ALKALI = 3 };

/* What one unit of a use is. */
enum {
  BW_PER_AH = 1,
  BW_PER_G_DEPOSIT = 2, /* of the metal that `deposits` names */
  BW_PER_M2 = 3,        /* of work, both sides */
  BW_PER_HOUR = 4,
  BW_PER_M2_HOUR = 5 /* of the open surface of the tank */
};

/* Quality of a number; 0 is unrated. */
enum { BW_REVIEWED = 1, BW_MEASURED = 2, BW_ESTIMATED = 3 };

/* ---- Building blocks: these three never change within major version 1. ------------------------------------
 */

/* A table: `count` rows of `row_size` bytes each, which is sizeof(row) in the plugin's own build. */
typedef struct bw_rows {
  const void* first;
  uint32_t count, row_size;
} bw_rows;

typedef struct bw_term {
  const char* id; /* [req] what is counted: see the field that holds the terms */
  double coefficient;
} bw_term;

typedef struct bw_datum {
  double value;
  double spread;    /* one standard uncertainty, in the unit of the value; NaN unknown */
  uint32_t source;  /* R6 */
  uint32_t quality; /* BW_REVIEWED ... */
} bw_datum;

/* ---- Rows -------------------------------------------------------------------------------------------------
 */

typedef struct bw_source {
  const char* key;      /* [req] unique, letters, digits, '-' and '_': "handbook-1976" */
  const char* citation; /* [req][long] authors, title, publisher or journal, volume, page, table */
  const char* terms;    /* [long] on what terms the numbers may be used again */
} bw_source;

/* A component of the solution chemistry. Every species and solid of the shared tables that can form from the
 * components takes part; H^+ is one of them, H2O is not listed. */
typedef struct bw_component {
  const char* species; /* [req] a basis species of the shared tables or of own_species: "Ni^2+" */
  uint32_t found_by;   /* BW_BY_ANALYSIS ... */
  uint32_t reserved;   /* 0 */
} bw_component;

/* What the lab and the tank file speak of, in g/L of `formula`. */
typedef struct bw_quantity {
  const char* id;        /* [req] unique: "Ni^2+", "NiSO4.6H2O" */
  const char* label;     /* [req] "nickel" */
  const char* formula;   /* [req] the molar mass is computed from it */
  const bw_term* counts; /* mol of the quantity = sum of coefficient * total mol of the component `id` */
  uint32_t count;        /* number of terms, >= 1 */
  uint32_t role;         /* BW_METAL ... */
  uint32_t flags;        /* BW_SALT_VIEW or 0 */
  uint32_t reserved;     /* 0 */
} bw_quantity;

/* A dissolved species the shared tables lack, or state otherwise. */
typedef struct bw_own_species {
  const char* name;         /* [req] a formula with its charge: "NiOH^+" */
  const char* reaction;     /* forms one of it: "Ni^2+ + OH^- = NiOH^+" (terms joined by " + "). NULL: made of
                             * nothing else, to be a component; its constants are not read but for the source */
  bw_datum log10_K;         /* 25 degC, molal */
  bw_datum dH_kJ_per_mol;   /* NaN unknown: no correction for temperature */
  bw_datum dCp_J_per_mol_K; /* NaN unknown: taken as 0 */
  double medium_mol_per_kg; /* ionic strength log10_K was measured at; 0 = extrapolated to zero */
} bw_own_species;

/* A solid the shared tables lack, or state otherwise. */
typedef struct bw_own_solid {
  const char* name;     /* [req] unique phase name: "NiSO4.6H2O (alpha)" */
  const char* formula;  /* [req] "NiSO4.6H2O" */
  const char* reaction; /* [req] dissolves one of it: "NiSO4.6H2O(s) = Ni^2+ + SO4^2- + 6 H2O" */
  const char* note;     /* [long] */
  bw_datum log10_K, dH_kJ_per_mol, dCp_J_per_mol_K; /* as in bw_own_species */
  double min_C, max_C;                              /* where the constants hold */
  uint32_t slow;     /* 1: forms too slowly to count on; shown as supersaturated, not precipitated */
  uint32_t reserved; /* 0 */
} bw_own_solid;

/* A solid whose headroom is shown. */
typedef struct bw_watched_solid {
  const char* name;         /* [req] a solid of the shared tables or of own_solids */
  const char* sign_in_tank; /* [req] what an operator would see: "needles on cold pipes" */
} bw_watched_solid;

/* Default limits, which a tank file may narrow or widen. NaN = open. */
typedef struct bw_window {
  const char* subject;        /* [req] id of a quantity (g/L) or indicator, "pH", "temperature" (degC) or
                               * "current-density" (A/dm2, of the work) */
  double low, aim, high;      /* where the bath should be kept */
  double stop_low, stop_high; /* outside these no work goes in; on or outside low and high */
  uint32_t source, reserved;  /* R6; 0 */
} bw_window;

/* How one stock chemical goes into the bath. */
typedef struct bw_addition_rule {
  const char* supply; /* [req] id of a stock chemical: "nickel-sulfate" */
  const char* how;    /* [req][long] "dissolve hot in a side tank, filter in" */
  double
      largest_rise_g_per_L; /* in one addition, of the substance as on the label; NaN: no limit of its own */
  double largest_pH_step;   /* in one addition; NaN: no limit of its own */
  double wait_h;            /* after it, before the next addition, >= 0 */
  uint32_t order;           /* smaller goes in earlier */
  uint32_t source;          /* R6 */
  /* since 1.1 */
  double thin_to_parts;       /* a liquid: thinned with so many volumes of water first; 0: as it is */
  uint32_t half_then_analyse; /* 1: half the need, then an analysis before the rest */
  uint32_t reserved;          /* 0 */
} bw_addition_rule;

/* What must never go into the bath, or never meet it. */
typedef struct bw_incompatibility {
  const char* with; /* [req] id of a stock chemical, or of a kind of incompatibility of the shared tables
                     * ("acid_cyanide": whatever stock chemical is of that kind) */
  const char* why;  /* [req][long] what would happen, in plain words */
  uint32_t level;   /* BW_STOP: the host refuses to plan or record it; BW_WARN: it says so */
  uint32_t source;  /* R6 */
} bw_incompatibility;

typedef struct bw_caution {
  const char* subject;    /* id of a quantity or supply; NULL or "": the whole bath */
  const char* text;       /* [req][long] one to three plain sentences */
  uint32_t level, source; /* BW_NOTICE ...; R6 */
} bw_caution;

/* [calc] The solved bath: what an indicator may look at. Owned by the host, valid during one call. */
typedef struct bw_view {
  uint32_t size;           /* of this struct in the host's build */
  uint32_t quantity_count; /* rows of the plugin's own table of quantities */
  uint32_t species_count;
  uint32_t reserved;
  double temp_C, volume_L; /* of the solution */
  double pH;               /* -log10 of the activity of H^+ */
  double ionic_strength_mol_per_kg;
  const double* quantity_g_per_L;    /* in the order of `quantities`; NaN = not known */
  const char* const* species;        /* names of the solved species */
  const double* molality_mol_per_kg; /* of each species */
  const double* activity;            /* of each species: activity coefficient * molality */
} bw_view;

/* The place of a species in a view, or UINT32_MAX when it does not take part. */
static inline uint32_t bw_species_index(const bw_view* view, const char* name) {
  for (uint32_t i = 0; i < view->species_count; ++i) {
    const char *a = view->species[i], *b = name;
    while (*a && *a == *b) ++a, ++b;
    if (*a == *b) return i;
  }
  return UINT32_MAX;
}

/* A figure derived from the solved bath. */
typedef struct bw_indicator {
  const char* id;                                        /* [req] unique, also among the quantities */
  const char* label;                                     /* [req] "chloride to nickel" */
  const char* meaning;                                   /* [req][long] why an operator looks at it */
  const char* unit;                                      /* "g/g"; NULL: a pure number */
  bw_status (*eval)(const bw_view* view, double* value); /* [calc][req] one finite number with BW_OK, in
                                                          * `unit`; any other status leaves it unread */
} bw_indicator;

/* What one unit of work does to the bath, drag-out apart. The host computes the metal per ampere-hour from
 * its formula and `electrons`; current that deposits no metal evolves hydrogen and uses up H^+. */
typedef struct bw_use {
  const char *id, *label;      /* [req] */
  const bw_term* effects;      /* quantity `id` -> g of its formula per unit, the deposited metal apart;
                                * < 0 is consumed. What charge all of it leaves is made up in H^+ and water */
  uint32_t effect_count;       /* may be 0 */
  uint32_t counted_in;         /* BW_PER_AH ... */
  const char* deposits;        /* quantity id of the metal plated out; NULL: none */
  double electrons;            /* per atom of it; NaN when no current flows */
  bw_datum cathode_efficiency; /* fraction of the current that deposits metal, 0..1 */
  bw_datum anode_efficiency;   /* fraction of the current that dissolves metal, 0..1; 0: inert anodes */
  uint32_t source, reserved;   /* R6, of the effects; 0 */
  double effects_spread;       /* relative standard uncertainty of the effects; NaN unknown */
  /* [calc] or NULL: the effects in this state of the bath, n = effect_count of them, in place of the table's;
   * n finite values with BW_OK. */
  bw_status (*rate)(const bw_view* view, double* g_per_unit, uint32_t n);
} bw_use;

/* ---- Top structs ------------------------------------------------------------------------------------------
 */

/* [load] What the host offers. Valid only during the call of bw_entry_1 that it was passed to. */
typedef struct bw_host {
  uint32_t size, abi_minor;
  void* ctx;                  /* hand back unchanged */
  const char *name, *version; /* of the host program */
  /* For the user: level BW_NOTICE ..., subject NULL, "" or what it is about; text [req][long] is copied at
   * once. */
  void (*note)(void* ctx, int32_t level, const char* subject, const char* text);
  /* Molar mass of a formula, g/mol; NaN where it cannot be read. */
  double (*formula_g_per_mol)(void* ctx, const char* formula);
} bw_host;

typedef struct bw_bath_type {
  uint32_t size, abi_minor;
  const char* id;                       /* [req] lower-case letters, digits, '-': "watts-nickel" */
  const char* name;                     /* [req] for people */
  const char* version;                  /* [req] dotted numbers; goes up whenever an answer may change */
  const char* author;                   /* [req] */
  const char* licence;                  /* [req] */
  const char* summary;                  /* [req][long] */
  const char* validity;                 /* [req][long] the limits, in words */
  double min_C, max_C;                  /* where the bath type may be used */
  double max_ionic_strength_mol_per_kg; /* NaN: as far as the activity model goes */
  uint32_t convention;                  /* BW_INTERACTION or BW_ASSOCIATION */
  uint32_t acid_set;                    /* BW_LITTLE_CHLORIDE or BW_MUCH_CHLORIDE (more than a third of the
                                         * sulfate): which regressed interactions serve acid in a metal sulfate */
  uint32_t zinc_set;                    /* BW_ZINC_DILUTE ...: which interactions serve zinc; 0: dilute */
  uint32_t reserved;                    /* 0 */
  bw_rows sources;                      /* bw_source, >= 1 */
  bw_rows components;                   /* bw_component, >= 1 */
  bw_rows quantities;                   /* bw_quantity, >= 1 */
  bw_rows own_species;                  /* bw_own_species */
  bw_rows own_solids;                   /* bw_own_solid */
  bw_rows watched_solids;               /* bw_watched_solid */
  bw_rows windows;                      /* bw_window */
  bw_rows additions;                    /* bw_addition_rule */
  bw_rows cautions;                     /* bw_caution */
  bw_rows indicators;                   /* bw_indicator */
  bw_rows uses;                         /* bw_use */
  bw_rows incompatibilities;            /* bw_incompatibility */
} bw_bath_type;

#define BW_EXPORT __attribute__((visibility("default")))

/* [load] The only exported symbol. Called with index 0, 1, 2 ... until BW_END; with BW_OK *out points to a
 * bath type. */
BW_EXPORT bw_status bw_entry_1(const bw_host* host, uint32_t index, const bw_bath_type** out);

#ifdef __cplusplus
}
#endif

#endif /* BATHWRIGHT_PLUGIN_H */
