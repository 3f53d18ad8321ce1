#include <sys/mman.h>
#include <sys/stat.h>

#include <bathwright/plugin_host/probe_program.hpp>
#include <bathwright/plugin_host/shared_object.hpp>
#include <cerrno>

#include "exercise.hpp"
#include "probe_limits.hpp"
#include "probe_pipe.hpp"
#include "process_watch.hpp"

namespace bathwright::plugin_host {
namespace {

bool write_all(int into, const void* bytes, std::size_t size) {
  const auto* next = static_cast<const char*>(bytes);
  while (size > 0) {
    const ssize_t wrote = ::write(into, next, size);
    if (wrote < 0 && errno != EINTR) return false;
    if (wrote > 0) next += wrote, size -= static_cast<std::size_t>(wrote);
  }
  return true;
}

bool send(int into, FrameHead::Kind kind, const std::string& body) {
  const FrameHead head = {FrameHead::current, kind, static_cast<std::uint32_t>(body.size())};
  return write_all(into, &head, sizeof(head)) && write_all(into, body.data(), body.size());
}

/// The bytes of the plugin, mapped for as long as the process lives.
std::span<const std::byte> mapped(int memory) {
  struct stat status {};
  if (::fstat(memory, &status) != 0 || status.st_size <= 0) return {};
  const auto size = static_cast<std::size_t>(status.st_size);
  const void* bytes = ::mmap(nullptr, size, PROT_READ, MAP_PRIVATE, memory, 0);
  if (bytes == MAP_FAILED) return {};
  return {static_cast<const std::byte*>(bytes), size};
}

Check check_exports(int memory, const std::string& name) {
  Check made{"file: exports bw_entry_1 and nothing else", {}};
  const auto object = read_shared_object(mapped(memory));
  if (!object) {
    made.problems = object.problems();
    for (Problem& problem : made.problems) problem.where = name;
    return made;
  }
  std::string others;
  for (const std::string& symbol : object->exported)
    if (!symbol.starts_with("bw_entry_")) others += (others.empty() ? "" : ", ") + symbol;
  if (!others.empty())
    made.problems.push_back({Fault::inconsistent_data, name, "exports " + others,
                             "bw_entry_1 and nothing else",
                             "Hide the rest: -fvisibility=hidden, static, or a version script."});
  return made;
}

class Probe {
 public:
  Probe(int memory, int report, std::string name) : memory_(memory), pipe_(report), name_(std::move(name)) {}

  ProbeReport run() {
    report_.checks.push_back(check_exports(memory_, name_));
    look_at_plugin();
    report_.checks.push_back(
        {"process: threads, locale, floating point, signals and streams untouched", changes_});
    return std::move(report_);
  }

 private:
  /// The steps in their order, each of which needs those before it.
  void look_at_plugin() {
    announce("while it was loaded");
    const auto library = open_library(Descriptor(memory_), name_);
    if (!made("file: is a library with an entry of interface version 1", library)) return;
    announce("in bw_entry_1");
    const auto stated = stated_types(library->entry, report_.notes, name_);
    if (!made("entry: lists bath types", stated)) return;
    announce("while its tables were read");
    const auto types = read_types(*stated, name_);
    if (!made("tables: every check", types)) return;
    for (const bath::BathType& t : *types)
      report_.types.push_back({t.id, t.name, t.version, t.author, t.licence});
    const Announce next = [this](const std::string& during) { announce(during); };
    add(exercise_entry(library->entry, *stated, name_, next));
    for (std::size_t i = 0; i < types->size(); ++i)
      add(exercise_functions(*(*stated)[i], (*types)[i], name_, next));
    announce("while the process ended");
  }

  /// Whether the step succeeded.
  template <class T>
  bool made(std::string check, const Result<T>& result) {
    report_.checks.push_back({std::move(check), result ? Problems{} : result.problems()});
    note_changes();
    return static_cast<bool>(result);
  }
  void add(const std::vector<Check>& checks) {
    report_.checks.insert(report_.checks.end(), checks.begin(), checks.end());
    note_changes();
  }

  /// What comes next, so that the host can say where the plugin was when it ended this process.
  void announce(const std::string& during) {
    note_changes();
    during_ = during;
    send(pipe_, FrameHead::stage, during);
  }
  void note_changes() {
    const Problems found = watch_.changes(name_, during_);
    changes_.insert(changes_.end(), found.begin(), found.end());
  }

  ProcessWatch watch_;
  int memory_, pipe_;
  std::string name_, during_ = "before it was loaded";
  ProbeReport report_;
  Problems changes_;
};

}  // namespace

int run_probe(int memory, int report, const std::string& name) {
  constexpr int not_limited = 3, not_reported = 4;
  Probe probe(memory, report, name);
  if (!limit_this_process()) return not_limited;
  return send(report, FrameHead::report, encoded(probe.run())) ? 0 : not_reported;
}

}  // namespace bathwright::plugin_host
