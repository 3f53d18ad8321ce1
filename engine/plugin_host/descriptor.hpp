// A file descriptor that closes itself.
#pragma once

#include <unistd.h>

#include <utility>

namespace bathwright::plugin_host {

class Descriptor {
 public:
  Descriptor() = default;
  explicit Descriptor(int number) : number_(number) {}
  Descriptor(Descriptor&& other) noexcept : number_(other.release()) {}
  Descriptor& operator=(Descriptor&& other) noexcept {
    std::swap(number_, other.number_);
    return *this;
  }
  ~Descriptor() { close(); }

  explicit operator bool() const { return number_ >= 0; }
  [[nodiscard]] int get() const { return number_; }
  int release() { return std::exchange(number_, -1); }
  void close() {
    if (number_ >= 0) ::close(release());
  }

 private:
  int number_ = -1;
};

}  // namespace bathwright::plugin_host
