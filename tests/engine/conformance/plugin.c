/* A plugin whose file is read and never run. */
#include <bathwright_plugin.h>

#ifdef FORM_prints_and_starts_threads
#include <stdio.h>
#include <stdlib.h>
#include <threads.h>
static int worker(void* nothing) {
  (void)nothing;
  exit(1);
}
#endif

bw_status bw_entry_1(const bw_host* host, uint32_t index, const bw_bath_type** out) {
  (void)host, (void)index, (void)out;
#ifdef FORM_prints_and_starts_threads
  thrd_t thread;
  puts("hello");
  thrd_create(&thread, worker, NULL);
#endif
  return BW_END;
}
