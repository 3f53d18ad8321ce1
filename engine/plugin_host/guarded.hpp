// Memory that shows what a plugin does to it.
#pragma once

#include <sys/mman.h>
#include <unistd.h>

#include <algorithm>
#include <array>
#include <bit>
#include <cstdint>
#include <cstring>
#include <new>
#include <span>
#include <vector>

namespace bathwright::plugin_host {

/// Bytes that cannot be written and end where the next page cannot be read: a plugin that writes to them or
/// reads past them is killed there and then.
class ReadOnlyBytes {
 public:
  explicit ReadOnlyBytes(std::span<const std::byte> bytes) {
    const auto page = static_cast<std::size_t>(::sysconf(_SC_PAGESIZE));
    const std::size_t used = (bytes.size() + page - 1) / page * page;
    size_ = used + page;
    void* mapped = ::mmap(nullptr, size_, PROT_READ | PROT_WRITE, MAP_PRIVATE | MAP_ANONYMOUS, -1, 0);
    if (mapped == MAP_FAILED) throw std::bad_alloc();
    pages_ = static_cast<std::byte*>(mapped);
    first_ = pages_ + used - bytes.size();
    std::copy(bytes.begin(), bytes.end(), first_);
    ::mprotect(pages_, used, PROT_READ);
    ::mprotect(pages_ + used, page, PROT_NONE);
  }
  ~ReadOnlyBytes() { ::munmap(pages_, size_); }
  ReadOnlyBytes(const ReadOnlyBytes&) = delete;
  ReadOnlyBytes& operator=(const ReadOnlyBytes&) = delete;

  template <class T>
  [[nodiscard]] const T* as() const {
    return reinterpret_cast<const T*>(first_);
  }

 private:
  std::byte *pages_ = nullptr, *first_ = nullptr;
  std::size_t size_ = 0;
};

/// `count` numbers to write, between guards.
class GuardedNumbers {
 public:
  explicit GuardedNumbers(std::size_t count) : numbers_(guard + count + guard, pattern()) {}

  [[nodiscard]] double* first() { return numbers_.data() + guard; }
  [[nodiscard]] std::vector<double> values() const {
    return {numbers_.begin() + guard, numbers_.end() - guard};
  }
  [[nodiscard]] bool guards_hold() const {
    const auto held = [](double number) {
      return std::bit_cast<std::uint64_t>(number) == std::bit_cast<std::uint64_t>(pattern());
    };
    return std::all_of(numbers_.begin(), numbers_.begin() + guard, held) &&
           std::all_of(numbers_.end() - guard, numbers_.end(), held);
  }

 private:
  static constexpr std::ptrdiff_t guard = 64;
  static constexpr double pattern() { return std::bit_cast<double>(std::uint64_t{0x7FF8BADC0FFEE000}); }
  std::vector<double> numbers_;
};

}  // namespace bathwright::plugin_host
