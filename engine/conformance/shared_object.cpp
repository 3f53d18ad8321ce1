#include "shared_object.hpp"

#include <fcntl.h>
#include <gelf.h>
#include <unistd.h>

#include <array>
#include <memory>

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

class OpenFile {
 public:
  explicit OpenFile(const std::filesystem::path& file)
      : descriptor_(::open(file.c_str(), O_RDONLY | O_CLOEXEC)) {}
  ~OpenFile() {
    if (descriptor_ >= 0) ::close(descriptor_);
  }
  OpenFile(const OpenFile&) = delete;
  OpenFile& operator=(const OpenFile&) = delete;
  [[nodiscard]] int descriptor() const { return descriptor_; }

 private:
  int descriptor_;
};

using Handle = std::unique_ptr<Elf, decltype([](Elf* elf) { ::elf_end(elf); })>;

void read_symbols(Elf* elf, Elf_Scn* section, const GElf_Shdr& head, SharedObject& into) {
  Elf_Data* data = ::elf_getdata(section, nullptr);
  if (!data || head.sh_entsize == 0) return;
  for (int i = 1; i < static_cast<int>(head.sh_size / head.sh_entsize); ++i) {
    GElf_Sym symbol;
    if (!::gelf_getsym(data, i, &symbol)) return;
    const char* name = ::elf_strptr(elf, head.sh_link, symbol.st_name);
    if (!name || GELF_ST_BIND(symbol.st_info) == STB_LOCAL) continue;
    (symbol.st_shndx == SHN_UNDEF ? into.imported : into.exported).emplace_back(name);
  }
}

void read_dynamic(Elf_Scn* section, const GElf_Shdr& head, SharedObject& into) {
  Elf_Data* data = ::elf_getdata(section, nullptr);
  if (!data || head.sh_entsize == 0) return;
  for (int i = 0; i < static_cast<int>(head.sh_size / head.sh_entsize); ++i) {
    GElf_Dyn entry;
    if (!::gelf_getdyn(data, i, &entry)) return;
    const auto has = [&](GElf_Xword flag) { return (entry.d_un.d_val & flag) != 0; };
    if (entry.d_tag == DT_TEXTREL || (entry.d_tag == DT_FLAGS && has(DF_TEXTREL)))
      into.text_relocations = true;
    if (entry.d_tag == DT_BIND_NOW || (entry.d_tag == DT_FLAGS && has(DF_BIND_NOW)) ||
        (entry.d_tag == DT_FLAGS_1 && has(DF_1_NOW)))
      into.bound_at_once = true;
  }
}

}  // namespace

Result<SharedObject> read_shared_object(const std::filesystem::path& file) {
  const Problem no_library{Fault::bad_input, file.string(), "is not a shared object",
                           "a library built for this machine", ""};
  ::elf_version(EV_CURRENT);
  const OpenFile opened(file);
  const Handle elf(opened.descriptor() < 0 ? nullptr : ::elf_begin(opened.descriptor(), ELF_C_READ, nullptr));
  if (!elf || ::elf_kind(elf.get()) != ELF_K_ELF) return no_library;
  SharedObject object;
  bool has_symbols = false;
  for (Elf_Scn* section = nullptr; (section = ::elf_nextscn(elf.get(), section));) {
    GElf_Shdr head;
    if (!::gelf_getshdr(section, &head)) return no_library;
    if (head.sh_type == SHT_DYNSYM) read_symbols(elf.get(), section, head, object), has_symbols = true;
    if (head.sh_type == SHT_DYNAMIC) read_dynamic(section, head, object);
  }
  if (!has_symbols) return no_library;
  return object;
}

std::vector<Check> check_shared_object(const SharedObject& object, const std::string& where) {
  const auto fault = [&](std::string what, std::string expected, std::string try_this) {
    return Problem{Fault::inconsistent_data, where, std::move(what), std::move(expected),
                   std::move(try_this)};
  };
  Check exports{Group::file, "exports bw_entry_1 and nothing else"};
  bool has_entry = false;
  for (const std::string& symbol : object.exported) {
    if (symbol == "bw_entry_1")
      has_entry = true;
    else
      exports.problems.push_back(
          fault("exports " + symbol, "bw_entry_1 alone",
                "Make it static, or build with hidden visibility (bathwright_bath_type does)."));
  }
  if (!has_entry)
    exports.problems.push_back(
        fault("does not export bw_entry_1", "bw_entry_1", "Declare it with the header."));

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
  return {exports, code, binding, imports};
}

}  // namespace bathwright::conformance
