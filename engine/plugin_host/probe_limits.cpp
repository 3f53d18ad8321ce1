#include "probe_limits.hpp"

#include <fcntl.h>
#include <linux/audit.h>
#include <linux/filter.h>
#include <linux/seccomp.h>
#include <sched.h>
#include <sys/ioctl.h>
#include <sys/prctl.h>
#include <sys/resource.h>
#include <sys/syscall.h>
#include <unistd.h>

#include <cerrno>
#include <cstddef>
#include <cstdint>
#include <vector>

#include "probe_pipe.hpp"

namespace bathwright::plugin_host {
namespace {

#if defined(__SANITIZE_ADDRESS__) || defined(__SANITIZE_THREAD__)
constexpr bool sanitized = true;
#elif defined(__has_feature)
constexpr bool sanitized = __has_feature(address_sanitizer) || __has_feature(thread_sanitizer);
#else
constexpr bool sanitized = false;
#endif

bool limit(decltype(RLIMIT_CPU) what, rlim_t soft, rlim_t hard) {
  const rlimit limits = {soft, hard};
  return ::setrlimit(what, &limits) == 0;
}

#if defined(__x86_64__)
constexpr std::uint32_t machine = AUDIT_ARCH_X86_64;
#elif defined(__aarch64__)
constexpr std::uint32_t machine = AUDIT_ARCH_AARCH64;
#else
#error "Name the AUDIT_ARCH_ of this machine (linux/audit.h)."
#endif

/// A filter of system calls (seccomp(2)), put together from the top: the first rule that fits decides.
class Filter {
 public:
  Filter() {
    load(offsetof(seccomp_data, arch));
    unless_equal(machine, {kill});
    load(offsetof(seccomp_data, nr));
#if defined(__x86_64__)
    constexpr std::uint32_t other_numbering = 0x40000000;  // x32
    code_.push_back(BPF_JUMP(BPF_JMP | BPF_JGE | BPF_K, other_numbering, 0, 1));
    answer(kill);
#endif
  }
  void allow(long call) { if_equal(static_cast<std::uint32_t>(call), {allowed}); }
  /// As if this system did not have the call.
  void deny(long call, int error) {
    if_equal(static_cast<std::uint32_t>(call), {SECCOMP_RET_ERRNO | static_cast<std::uint32_t>(error)});
  }
  /// Only where `argument & mask` is `value`; the upper half of the argument is not looked at.
  void allow_where(long call, int argument, std::uint32_t mask, std::uint32_t value) {
    constexpr std::uint8_t rest_of_rule = 5;
    code_.push_back(BPF_JUMP(BPF_JMP | BPF_JEQ | BPF_K, static_cast<std::uint32_t>(call), 0, rest_of_rule));
    load(offsetof(seccomp_data, args) + sizeof(std::uint64_t) * static_cast<std::size_t>(argument));
    code_.push_back(BPF_STMT(BPF_ALU | BPF_AND | BPF_K, mask));
    code_.push_back(BPF_JUMP(BPF_JMP | BPF_JEQ | BPF_K, value, 0, 1));
    answer(allowed);
    load(offsetof(seccomp_data, nr));
  }
  [[nodiscard]] bool install() {
    answer(kill);
    const sock_fprog program = {static_cast<unsigned short>(code_.size()), code_.data()};
    return ::prctl(PR_SET_NO_NEW_PRIVS, 1, 0, 0, 0) == 0 &&
           ::prctl(PR_SET_SECCOMP, SECCOMP_MODE_FILTER, &program) == 0;
  }

 private:
  static constexpr std::uint32_t kill = SECCOMP_RET_KILL_PROCESS, allowed = SECCOMP_RET_ALLOW;

  void load(std::size_t offset) {
    code_.push_back(BPF_STMT(BPF_LD | BPF_W | BPF_ABS, static_cast<std::uint32_t>(offset)));
  }
  void answer(std::uint32_t action) { code_.push_back(BPF_STMT(BPF_RET | BPF_K, action)); }
  struct Action {
    std::uint32_t value;
  };
  void if_equal(std::uint32_t value, Action action) {
    code_.push_back(BPF_JUMP(BPF_JMP | BPF_JEQ | BPF_K, value, 0, 1));
    answer(action.value);
  }
  void unless_equal(std::uint32_t value, Action action) {
    code_.push_back(BPF_JUMP(BPF_JMP | BPF_JEQ | BPF_K, value, 1, 0));
    answer(action.value);
  }
  std::vector<sock_filter> code_;
};

bool ask_for_little() {
  Filter filter;
  for (const long call : {SYS_read,
                          SYS_pread64,
                          SYS_write,
                          SYS_writev,
                          SYS_close,
                          SYS_lseek,
                          SYS_fstat,
                          SYS_newfstatat,
                          SYS_statx,
                          SYS_getdents64,
                          SYS_readlinkat,
                          SYS_faccessat,
                          SYS_mmap,
                          SYS_mprotect,
                          SYS_munmap,
                          SYS_mremap,
                          SYS_madvise,
                          SYS_brk,
                          SYS_futex,
                          SYS_set_robust_list,
                          SYS_rseq,
                          SYS_set_tid_address,
                          SYS_sched_yield,
                          SYS_sched_getaffinity,
                          SYS_getpid,
                          SYS_gettid,
                          SYS_rt_sigaction,
                          SYS_rt_sigprocmask,
                          SYS_rt_sigreturn,
                          SYS_sigaltstack,
                          SYS_clock_gettime,
                          SYS_clock_getres,
                          SYS_gettimeofday,
                          SYS_nanosleep,
                          SYS_clock_nanosleep,
                          SYS_restart_syscall,
                          SYS_getrandom,
                          SYS_getuid,
                          SYS_geteuid,
                          SYS_uname,
                          SYS_sysinfo,
                          SYS_dup,
                          SYS_dup3,
                          SYS_exit,
                          SYS_exit_group})
    filter.allow(call);
#if defined(__x86_64__)
  for (const long call : {SYS_access, SYS_readlink, SYS_arch_prctl, SYS_dup2}) filter.allow(call);
#endif
  filter.allow_where(SYS_openat, 2, O_ACCMODE | O_CREAT | O_TRUNC, O_RDONLY);
  filter.allow_where(SYS_clone, 0, CLONE_THREAD, CLONE_THREAD);
  filter.deny(SYS_clone3, ENOSYS);  // its flags cannot be seen from here; the library then takes clone
  filter.allow_where(SYS_tgkill, 0, UINT32_MAX, static_cast<std::uint32_t>(::getpid()));  // abort()
  filter.allow_where(SYS_fcntl, 1, UINT32_MAX, F_GETFL);
  filter.deny(SYS_ioctl, ENOTTY);     // no stream here is a terminal
  filter.deny(SYS_prlimit64, EPERM);  // the limits stay
  return filter.install();
}

}  // namespace

bool limit_this_process() {
  if (!limit(RLIMIT_CPU, probe_cpu_s, probe_cpu_s + 1) || !limit(RLIMIT_FSIZE, 0, 0) ||
      !limit(RLIMIT_CORE, 0, 0))
    return false;
  if (sanitized) return true;
  constexpr rlim_t memory = rlim_t{probe_memory_MiB} << 20;
  return limit(RLIMIT_AS, memory, memory) && ask_for_little();
}

}  // namespace bathwright::plugin_host
