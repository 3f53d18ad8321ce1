// The entry of one libFuzzer program; FUZZ_TARGET names the target.
#include <cstdint>
#include <cstdio>
#include <cstdlib>

#include "targets.hpp"

extern "C" int LLVMFuzzerTestOneInput(const std::uint8_t* bytes, std::size_t size) {
  const fuzz::BrokenPromise broken = fuzz::FUZZ_TARGET({reinterpret_cast<const char*>(bytes), size});
  if (!broken.empty()) {
    std::fprintf(stderr, "broken promise: %s\n", broken.c_str());
    std::abort();
  }
  return 0;
}
