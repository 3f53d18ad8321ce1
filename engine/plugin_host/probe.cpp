#include "probe.hpp"

#include <fcntl.h>
#include <poll.h>
#include <signal.h>
#include <spawn.h>
#include <sys/resource.h>
#include <sys/wait.h>

#include <array>
#include <cerrno>
#include <chrono>
#include <cstring>
#include <optional>
#include <system_error>
#include <thread>

#include "probe_pipe.hpp"

extern char** environ;

namespace bathwright::plugin_host {
namespace {

using Clock = std::chrono::steady_clock;

/// The way out of a probe that gave no report.
ProbeReport ended(const std::string& name, std::string what, std::string try_this = {}) {
  ProbeReport report;
  report.checks.push_back(
      {"process: survives", {{Fault::inconsistent_data, name, std::move(what), "", std::move(try_this)}}});
  return report;
}

ProbeReport not_started(const std::string& name, const std::string& why) {
  ProbeReport report = ended(name, "could not be probed (" + why + ")", "Install Bathwright anew.");
  report.checks.back().problems.back().kind = Fault::io;
  report.repeatable = false;
  return report;
}

/// A child in a process group of its own; killed and reaped at the latest when this goes.
class Child {
 public:
  /// 0, or the error number. The child has nothing of ours open but `memory` and `report`.
  int start(const std::filesystem::path& program, const std::string& name, int memory, int report) {
    constexpr int out_of_the_way = 16;  // so that placing one does not close the other
    const Descriptor high_memory(::fcntl(memory, F_DUPFD_CLOEXEC, out_of_the_way));
    const Descriptor high_report(::fcntl(report, F_DUPFD_CLOEXEC, out_of_the_way));
    posix_spawn_file_actions_t files;
    ::posix_spawn_file_actions_init(&files);
    ::posix_spawn_file_actions_addopen(&files, STDIN_FILENO, "/dev/null", O_RDONLY, 0);
    ::posix_spawn_file_actions_addopen(&files, STDOUT_FILENO, "/dev/null", O_WRONLY, 0);
    ::posix_spawn_file_actions_adddup2(&files, STDOUT_FILENO, STDERR_FILENO);
    ::posix_spawn_file_actions_adddup2(&files, high_memory.get(), probe_memory);
    ::posix_spawn_file_actions_adddup2(&files, high_report.get(), probe_report);
    ::posix_spawn_file_actions_addclosefrom_np(&files, probe_report + 1);
    posix_spawnattr_t how;
    ::posix_spawnattr_init(&how);
    ::posix_spawnattr_setflags(&how, POSIX_SPAWN_SETPGROUP | POSIX_SPAWN_SETSIGDEF | POSIX_SPAWN_SETSIGMASK);
    ::posix_spawnattr_setpgroup(&how, 0);
    sigset_t signals;
    ::sigfillset(&signals);
    ::posix_spawnattr_setsigdefault(&how, &signals);
    ::sigemptyset(&signals);
    ::posix_spawnattr_setsigmask(&how, &signals);
    std::string path = program.string(), shown = name;
    char* arguments[] = {path.data(), shown.data(), nullptr};
    const int error = ::posix_spawn(&id_, path.c_str(), &files, &how, arguments, environ);
    ::posix_spawnattr_destroy(&how);
    ::posix_spawn_file_actions_destroy(&files);
    if (error != 0) id_ = 0;
    return error;
  }
  ~Child() {
    if (id_ > 0) kill_and_wait();
  }

  struct End {
    int status = 0;
    rusage used{};
  };
  /// How it ended by itself; nothing when it did not until `deadline`.
  std::optional<End> wait_until(Clock::time_point deadline) {
    using namespace std::chrono_literals;
    while (true) {
      End end;
      if (::wait4(id_, &end.status, WNOHANG, &end.used) == id_) {
        id_ = 0;
        return end;
      }
      if (Clock::now() >= deadline) return {};
      std::this_thread::sleep_for(200us);
    }
  }

 private:
  void kill_and_wait() {
    ::kill(-id_, SIGKILL);  // the group is the child's and holds what it may have started
    while (::waitpid(id_, nullptr, 0) < 0 && errno == EINTR) {
    }
  }
  pid_t id_ = 0;
};

/// Everything that comes out of the pipe until it is closed, `deadline` or more than any report is long.
std::string read_until(int pipe, Clock::time_point deadline) {
  std::string all;
  std::array<char, 65536> part{};
  while (all.size() <= 2 * longest_frame) {
    const auto left = std::chrono::duration_cast<std::chrono::milliseconds>(deadline - Clock::now());
    pollfd ready = {pipe, POLLIN, 0};
    if (left.count() <= 0 || ::poll(&ready, 1, static_cast<int>(left.count())) == 0) break;
    const ssize_t got = ::read(pipe, part.data(), part.size());
    if (got == 0) break;
    if (got > 0) all.append(part.data(), static_cast<std::size_t>(got));
    if (got < 0 && errno != EINTR) break;
  }
  return all;
}

struct Frames {
  std::string stage = "before it was loaded";
  std::optional<std::string> report;
  bool broken = false;
};

Frames frames_of(std::string_view text) {
  Frames frames;
  while (!text.empty()) {
    FrameHead head{};
    frames.broken = text.size() < sizeof(head);
    if (frames.broken) return frames;
    std::memcpy(&head, text.data(), sizeof(head));
    text.remove_prefix(sizeof(head));
    frames.broken = head.version != FrameHead::current || head.length > longest_frame ||
                    head.length > text.size() || frames.report ||
                    (head.kind != FrameHead::stage && head.kind != FrameHead::report);
    if (frames.broken) return frames;
    std::string body(text.substr(0, head.length));
    text.remove_prefix(head.length);
    if (head.kind == FrameHead::report)
      frames.report = std::move(body);
    else
      frames.stage = std::move(body);
  }
  return frames;
}

std::string memory_taken(const rusage& used) {
  constexpr long KiB_per_MiB = 1024, worth_a_word = probe_memory_MiB / 2;
  const long MiB = used.ru_maxrss / KiB_per_MiB;
  if (MiB < worth_a_word) return {};
  return "; it had taken " + std::to_string(MiB) + " MiB of memory, and may have " +
         std::to_string(probe_memory_MiB);
}

ProbeReport killed(const std::string& name, const std::string& stage, int signal, const rusage& used) {
  switch (signal) {
    case SIGXCPU:
      return ended(name, "used more than " + std::to_string(probe_cpu_s) + " s of processor time " + stage);
    case SIGSYS:
      return ended(name, "asked the system for what no bath type needs " + stage +
                             " (to write or make a file, a network, another process)");
    case SIGXFSZ:
      return ended(name, "wrote to a file " + stage);
    default:
      return ended(name, "crashed " + stage + " (signal " + std::to_string(signal) + ", " +
                             ::strsignal(signal) + memory_taken(used) + ")");
  }
}

}  // namespace

ProbeReport probe(const SealedCopy& plugin, const std::filesystem::path& program) {
  const std::string name = plugin.file.filename().string();
  int ends[2];
  if (::pipe2(ends, O_CLOEXEC) != 0) return not_started(name, std::generic_category().message(errno));
  const Descriptor from_child(ends[0]);
  Descriptor to_us(ends[1]);
  Child child;
  if (const int error = child.start(program, name, plugin.memory.get(), to_us.get()); error != 0)
    return not_started(name, program.string() + ": " + std::generic_category().message(error));
  to_us.close();

  const auto deadline = Clock::now() + std::chrono::seconds(probe_wall_s);
  const Frames frames = frames_of(read_until(from_child.get(), deadline));
  const auto end = child.wait_until(deadline);
  if (!end) {
    ProbeReport report =
        ended(name, "had not answered after " + std::to_string(probe_wall_s) + " s " + frames.stage);
    report.repeatable = false;
    return report;
  }
  if (WIFSIGNALED(end->status)) return killed(name, frames.stage, WTERMSIG(end->status), end->used);
  if (!frames.report && !frames.broken)
    return ended(name, "ended its process " + frames.stage + " (exit status " +
                           std::to_string(WEXITSTATUS(end->status)) + ")");
  auto report = frames.report && !frames.broken ? decoded(*frames.report) : Problem{};
  if (!report) return ended(name, "gave a report that cannot be read, the last " + frames.stage);
  if (WEXITSTATUS(end->status) != 0)
    return ended(name, "ended its process " + frames.stage + " (exit status " +
                           std::to_string(WEXITSTATUS(end->status)) + ")");
  return *std::move(report);
}

}  // namespace bathwright::plugin_host
