// A bath type with one fault, chosen by FAULT_...; broken.cpp says how each is refused.
#include <bathwright_plugin.h>

#include "../stated_bath.hpp"

#include <errno.h>
#include <fcntl.h>
#include <pthread.h>
#include <unistd.h>

#include <cfenv>
#include <clocale>
#include <csignal>
#include <cstdio>
#include <cstdlib>
#include <string_view>

namespace {

[[gnu::noipa, maybe_unused]] void crash() { *static_cast<volatile int*>(nullptr) = 1; }

[[gnu::noipa, maybe_unused]] void spin(unsigned long turns) {
  for (; turns > 0; --turns) asm volatile("");
}

[[maybe_unused]] void loop_for_ever() {
  while (true) spin(1000);
}

/// What a constructor does that runs before anybody has asked for anything.
struct AtLoad {
  AtLoad() {
#if defined FAULT_crashes_at_load
    crash();
#elif defined FAULT_aborts
    std::abort();
#elif defined FAULT_loops_at_load
    loop_for_ever();
#elif defined FAULT_exits
    std::exit(0);
#elif defined FAULT_starts_a_thread
    pthread_t thread;
    ::pthread_create(
        &thread, nullptr, [](void*) -> void* { return ::sleep(60), nullptr; }, nullptr);
#elif defined FAULT_changes_locale
    std::setlocale(LC_ALL, "C.UTF-8");
#elif defined FAULT_installs_a_handler
    std::signal(SIGTERM, [](int) {});
#elif defined FAULT_forks
    if (::fork() == 0) ::sleep(60);
#elif defined FAULT_writes_a_file
    ::open("/tmp/written-by-a-plugin", O_WRONLY | O_CREAT, 0600);
#elif defined FAULT_takes_memory
    constexpr std::size_t MiB = 1 << 20;
    while (true) {
      auto* more = static_cast<volatile char*>(std::malloc(MiB));
      for (std::size_t i = 0; i < MiB; i += 4096) more[i] = 1;  // at the end, a null pointer
    }
#elif defined FAULT_crashes_in_the_host
    if (std::string_view(program_invocation_short_name) != "bathwright_probe") crash();
#elif defined FAULT_hangs
    ::sleep(60);
#endif
  }
  ~AtLoad() {
#ifdef FAULT_crashes_at_exit
    crash();
#endif
  }
} at_load;

bw_status faulty(const bw_view* view, double* value) {
  *value = view->quantity_count;
#if defined FAULT_gives_nan
  *value = StatedBath::open;
#elif defined FAULT_throws_in_an_indicator
  throw 1;
#elif defined FAULT_loops_in_an_indicator
  loop_for_ever();
#elif defined FAULT_crashes_unsolved
  if (view->species_count == 0) crash();
#elif defined FAULT_writes_past_its_result
  value[1] = 1;
#elif defined FAULT_reads_past_its_view
  *value = view->quantity_g_per_L[view->quantity_count] > 0 ? 1 : 0;
#elif defined FAULT_writes_into_its_view
  const_cast<double*>(view->quantity_g_per_L)[0] = 1;
#elif defined FAULT_changes_rounding
  std::fesetround(FE_UPWARD);
#elif defined FAULT_is_slow
  spin(20'000'000);
#elif defined FAULT_remembers
  static double calls = 0;
  *value = ++calls;
#elif defined FAULT_gives_odd_status
  return 42;
#elif defined FAULT_prints_in_an_indicator
  std::printf("hello");
#endif
  return BW_OK;
}

[[maybe_unused]] bw_bath_type faulty_type() {
  static StatedBath tables;
  tables.indicators[0].eval = faulty;
#if defined FAULT_unbalanced_reaction
  tables.own_species[0].reaction = "Ni^2+ + 2 Cl^- + H2O = NiClOH + H^+";
#elif defined FAULT_no_source
  tables.windows[0].source = 0;
#endif
  bw_bath_type type = tables.stated();
#ifdef FAULT_another_sound
  type.version = "1.3";
#endif
#if defined FAULT_lies_about_row_size
  type.quantities.row_size = 20;
#elif defined FAULT_lies_about_count
  type.cautions.count = 4000;
#elif defined FAULT_has_no_rows
  type.components.first = nullptr;
#elif defined FAULT_lies_about_its_size
  type.size = 16;
#endif
  return type;
}

}  // namespace

#ifdef FAULT_exports_more
extern "C" BW_EXPORT int helper_for_everybody(void);
int helper_for_everybody(void) { return 1; }
#endif

#ifdef FAULT_needs_what_nobody_has
extern "C" int nowhere_to_be_found(void);
#endif

#ifdef FAULT_wrong_major_version
extern "C" BW_EXPORT bw_status bw_entry_2(const bw_host*, std::uint32_t, const bw_bath_type**);
bw_status bw_entry_2(const bw_host*, std::uint32_t, const bw_bath_type**) { return BW_END; }
#else
bw_status bw_entry_1(const bw_host* host, std::uint32_t index, const bw_bath_type** out) {
  static const bw_bath_type type = faulty_type();
#if defined FAULT_needs_what_nobody_has
  if (nowhere_to_be_found() == 1) return BW_REFUSED;
#elif defined FAULT_prints
  std::puts("loading");
#elif defined FAULT_throws
  throw index;
#elif defined FAULT_refuses
  host->note(host->ctx, BW_WARN, "licence", "no key found");
  return BW_REFUSED;
#elif defined FAULT_odd_status
  return 42;
#elif defined FAULT_endless_list
  *out = &type;
  return BW_OK;
#elif defined FAULT_ends_by_crashing
  if (index > 1) crash();
#elif defined FAULT_another_each_time
  static int calls = 0;
  static bw_bath_type copies[8];
  *out = &(copies[calls++ % 8] = type);
  return index == 0 ? BW_OK : BW_END;
#elif defined FAULT_wants_this_host
  if (host->size != sizeof(bw_host)) return BW_REFUSED;
#endif
  (void)host;
  *out = &type;
  return index == 0 ? BW_OK : BW_END;
}
#endif
