#include "binary.hpp"

namespace bathwright::conformance {
namespace {

/// Functions of the C library that a bath type has no business with, and what they do. Names as in the table
/// of dynamic symbols, those of a fortified build included. A list can never be complete: the probe catches
/// in the act what is not here.
struct Reach {
  std::string_view does;
  std::vector<std::string_view> names;
};

const std::vector<Reach>& reaches() {
  static const std::vector<Reach> all = {
      {"ends the program",
       {"exit", "_exit", "_Exit", "quick_exit", "abort", "__assert_fail", "atexit", "raise", "kill"}},
      {"sets a signal handler",
       {"signal", "sigaction", "sigprocmask", "pthread_sigmask", "sigaltstack", "bsd_signal"}},
      {"starts a thread or a process",
       {"pthread_create", "thrd_create",
        "_ZNSt6thread15_M_start_threadESt10unique_ptrINS_6_StateESt14default_deleteIS1_EEPFvvE", "fork",
        "vfork", "clone", "system", "popen", "posix_spawn", "posix_spawnp", "execl", "execle", "execlp",
        "execv", "execve", "execvp"}},
      {"changes the locale", {"setlocale", "uselocale", "newlocale", "_ZNSt6locale6globalERKS_"}},
      {"changes the floating-point mode",
       {"fesetround", "fesetenv", "feupdateenv", "feholdexcept", "feenableexcept", "fedisableexcept"}},
      {"jumps across calls", {"longjmp", "_longjmp", "siglongjmp", "__longjmp_chk"}},
      {"prints or reads streams",
       {"printf",        "vprintf",        "__printf_chk", "__vprintf_chk", "fprintf",  "vfprintf",
        "__fprintf_chk", "__vfprintf_chk", "puts",         "fputs",         "putchar",  "putc",
        "fputc",         "fwrite",         "perror",       "write",         "scanf",    "getchar",
        "fgets",         "stdin",          "stdout",       "stderr",        "_ZSt3cin", "_ZSt4cout",
        "_ZSt4cerr",     "_ZSt4clog"}},
      {"opens files or sockets",
       {"fopen", "fopen64", "open", "open64", "openat", "creat", "freopen", "remove", "unlink", "rename",
        "socket", "connect", "tmpfile"}},
      {"loads code", {"dlopen", "dlmopen", "mprotect"}},
      {"depends on more than its arguments",
       {"getenv", "secure_getenv", "setenv", "putenv", "time", "clock", "clock_gettime", "gettimeofday",
        "rand", "srand", "random", "drand48", "getrandom"}},
  };
  return all;
}

/// What the function does that it must not; empty for all others.
std::string_view reach_of(std::string_view symbol) {
  for (const Reach& reach : reaches())
    for (const std::string_view name : reach.names)
      if (name == symbol) return reach.does;
  return {};
}

}  // namespace

std::vector<Check> check_shared_object(const plugin_host::SharedObject& object, const std::string& where) {
  const auto fault = [&](std::string what, std::string expected, std::string try_this) {
    return Problem{Fault::inconsistent_data, where, std::move(what), std::move(expected),
                   std::move(try_this)};
  };
  Check code{Group::file, "its code is loaded unchanged"};
  if (object.text_relocations)
    code.problems.push_back(
        fault("has text relocations", "position-independent code", "Compile with -fPIC."));

  Check binding{Group::file, "is bound at once"};
  if (!object.bound_at_once)
    binding.problems.push_back(fault("looks functions up when they are first called", "immediate binding",
                                     "Link with -Wl,-z,now (bathwright_bath_type does)."));

  Check imports{Group::file, "calls nothing that reaches beyond its results"};
  for (const std::string& symbol : object.imported)
    if (const std::string_view does = reach_of(symbol); !does.empty())
      imports.problems.push_back(fault("uses " + symbol + ", which " + std::string(does),
                                       "pure functions (rule R1)", "Do without it."));
  return {code, binding, imports};
}

}  // namespace bathwright::conformance
