#include "process_watch.hpp"

#include <fcntl.h>
#include <fenv.h>
#include <sys/stat.h>
#include <unistd.h>

#include <algorithm>
#include <charconv>
#include <chrono>
#include <clocale>
#include <cstdio>
#include <string_view>
#include <thread>
#ifdef __SSE__
#include <xmmintrin.h>
#endif

namespace bathwright::plugin_host {

ProcessWatch::ProcessWatch() {
  int ends[2];
  if (::pipe2(ends, O_CLOEXEC | O_NONBLOCK) == 0) {  // never waits: a full pipe is chatter enough
    chatter_ = Descriptor(ends[0]);
    const Descriptor into(ends[1]);
    ::dup2(into.get(), STDOUT_FILENO);
    ::dup2(into.get(), STDERR_FILENO);
  }
  stat_ = Descriptor(::open("/proc/self/stat", O_RDONLY | O_CLOEXEC));
  threads_ = thread_count();
  locale_ = std::setlocale(LC_ALL, nullptr);
  std::fegetenv(&floating_point_);
  mode_ = floating_point_mode();
  for (int signal = 1; signal <= last_signal; ++signal) ::sigaction(signal, nullptr, &handlers_[signal]);
  streams_ = streams();
}

/// num_threads of /proc/self/stat, the 18th field after the name in brackets (proc(5)); 0 where unreadable.
int ProcessWatch::thread_count() const {
  std::array<char, 1024> text{};
  const ssize_t size = ::pread(stat_.get(), text.data(), text.size(), 0);
  if (size <= 0) return 0;
  std::string_view rest(text.data(), static_cast<std::size_t>(size));
  rest.remove_prefix(rest.rfind(')') + 1);
  constexpr int field = 18;
  for (int i = 0; i < field && !rest.empty(); ++i)
    rest.remove_prefix(std::min(rest.find(' ') + 1, rest.size()));
  int count = 0;
  std::from_chars(rest.data(), rest.data() + rest.size(), count);
  return count;
}

/// A thread that was joined may be counted for a moment longer.
bool ProcessWatch::threads_left() const {
#ifdef __SANITIZE_THREAD__
  return false;  // the sanitizer has a thread of its own from the first one on
#endif
  using namespace std::chrono_literals;
  for (int tries = 0; tries < 20; ++tries) {
    if (thread_count() == threads_) return false;
    std::this_thread::sleep_for(1ms);
  }
  return true;
}

std::array<ProcessWatch::Stream, 3> ProcessWatch::streams() {
  std::array<Stream, 3> all{};
  for (std::size_t i = 0; i < all.size(); ++i)
    if (struct stat status{}; ::fstat(static_cast<int>(i), &status) == 0)
      all[i] = {status.st_dev, status.st_ino};
  return all;
}

/// What came out since the last look: its first 60 bytes, in plain letters.
std::string ProcessWatch::printed() const {
  std::fflush(stdout);
  std::fflush(stderr);
  std::string first;
  std::array<char, 4096> part{};
  constexpr std::size_t shown = 60;
  for (ssize_t got; (got = ::read(chatter_.get(), part.data(), part.size())) > 0;)
    if (first.size() < shown) first.append(part.data(), static_cast<std::size_t>(got));
  first.resize(std::min(first.size(), shown));
  std::ranges::replace_if(
      first, [](unsigned char c) { return c < ' ' || c > '~'; }, '?');
  return first;
}

/// Rounding, trapped exceptions and, where the processor has them, flushing of denormals to zero.
unsigned ProcessWatch::floating_point_mode() {
  constexpr unsigned trap_shift = 16;
  const unsigned mode = static_cast<unsigned>(std::fegetround()) | static_cast<unsigned>(::fegetexcept())
                                                                       << trap_shift;
#ifdef __SSE__
  constexpr unsigned flushing = 0x8040;  // FTZ and DAZ of MXCSR
  return mode | (_mm_getcsr() & flushing);
#else
  return mode;
#endif
}

Problems ProcessWatch::changes(const std::string& where, const std::string& during) {
  Problems problems;
  const auto add = [&](const std::string& what) {
    problems.push_back(
        {Fault::inconsistent_data, where, what + ' ' + during, "nothing of the kind (rule R1)", ""});
  };
  if (threads_left()) {
    add("started a thread");
    threads_ = thread_count();
  }
  if (locale_ != std::setlocale(LC_ALL, nullptr)) {
    add("changed the locale");
    std::setlocale(LC_ALL, locale_.c_str());
  }
  if (floating_point_mode() != mode_) {
    add("changed the rounding or another floating-point mode");
    std::fesetenv(&floating_point_);
  }
  for (int signal = 1; signal <= last_signal; ++signal) {
    struct sigaction now {};
    if (::sigaction(signal, nullptr, &now) != 0 || now.sa_handler == handlers_[signal].sa_handler) continue;
    add("installed a handler for signal " + std::to_string(signal));
    ::sigaction(signal, &handlers_[signal], nullptr);
  }
  if (const auto now = streams(); now != streams_) {
    add("replaced a standard stream");
    streams_ = now;
  }
  if (const std::string text = printed(); !text.empty()) add("printed \"" + text + '"');
  return problems;
}

}  // namespace bathwright::plugin_host
