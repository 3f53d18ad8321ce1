// A plugin in C++, in one of several forms: FORM_sound loads, each other form has one fault.
#include <bathwright_plugin.h>

#include "../stated_bath.hpp"

#ifdef FORM_no_entry

BW_EXPORT bw_status bw_entry_2(const bw_host*, uint32_t, const bw_bath_type**) { return BW_END; }

#else

bw_status bw_entry_1(const bw_host* host, uint32_t index, const bw_bath_type** out) {
  static const StatedBath tables;
  static bw_bath_type type = tables.stated();
  *out = &type;
#if defined FORM_refuses
  host->note(host->ctx, BW_WARN, "licence", "no key found");
  return BW_REFUSED;
#elif defined FORM_odd_status
  return 42;
#elif defined FORM_endless
  return BW_OK;
#elif defined FORM_throws
  throw index;
#elif defined FORM_unsound
  type.author = nullptr;
#elif defined FORM_sound
  const double water = host->formula_g_per_mol(host->ctx, "H2O");
  host->note(host->ctx, BW_NOTICE, "", water > 18 && water < 18.1 ? "water is known" : "water is not known");
#endif
  (void)host;
  return index == 0 ? BW_OK : BW_END;
}

#endif
