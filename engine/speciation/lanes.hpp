// Eight numbers that move together. Plain arithmetic on them is compiled to whatever registers the processor
// has (see BATHWRIGHT_LANES_CLONES); nothing here is reassociated, so the width does not change a result.
#pragma once

#include <cstddef>
#include <cstdint>
#include <memory>
#include <new>

namespace bathwright::speciation {

inline constexpr std::size_t lanes = 8;
typedef double Lanes __attribute__((vector_size(8 * lanes), aligned(8 * lanes)));
typedef std::int64_t LaneBits __attribute__((vector_size(8 * lanes), aligned(8 * lanes)));

/// An array of lanes. (As the argument of a standard container they would lose their alignment.)
class LaneArray {
 public:
  explicit LaneArray(std::size_t size)
      : size_(size), memory_(::operator new (size * sizeof(Lanes), std::align_val_t{alignof(Lanes)})) {
    for (std::size_t i = 0; i < size; ++i) begin()[i] = Lanes{};
  }
  [[nodiscard]] std::size_t size() const { return size_; }
  [[nodiscard]] Lanes* begin() const { return static_cast<Lanes*>(memory_.get()); }
  [[nodiscard]] Lanes* end() const { return begin() + size_; }
  Lanes& operator[](std::size_t i) { return begin()[i]; }
  const Lanes& operator[](std::size_t i) const { return begin()[i]; }

 private:
  struct Free {
    void operator()(void* memory) const { ::operator delete (memory, std::align_val_t{alignof(Lanes)}); }
  };
  std::size_t size_;
  std::unique_ptr<void, Free> memory_;
};

/// On a function: compiled for wider registers too, chosen when the program starts. Off where the compiler or
/// a sanitizer cannot do that.
#if defined(__GNUC__) && !defined(__clang__) && defined(__x86_64__) && !defined(__SANITIZE_ADDRESS__) && \
    !defined(__SANITIZE_THREAD__)
#define BATHWRIGHT_LANES_CLONES __attribute__((target_clones("avx512f", "avx2", "default"), flatten))
#else
#define BATHWRIGHT_LANES_CLONES
#endif

inline __attribute__((always_inline)) void set_all(Lanes& to, double value) {
  for (std::size_t l = 0; l < lanes; ++l) to[l] = value;
}

inline __attribute__((always_inline)) void magnitude(Lanes& value) {
  value = (Lanes)((LaneBits)value & 0x7fffffffffffffffLL);
}

/// to = max(to, other), the other where `to` is not a number.
inline __attribute__((always_inline)) void raise(Lanes& to, const Lanes& other) {
  to = to > other ? to : other;
}

/// value = exp(value) within 2 units in the last place, clamped to +-700: 2^k times a polynomial on |r| <=
/// ln(2)/2, Taylor's to the 13th power.
inline __attribute__((always_inline)) void exponential(Lanes& value) {
  constexpr double shift = 6755399441055744.0;  // 1.5 * 2^52: leaves the nearest integer in the low bits
  constexpr double ln2_high = 6.93147180369123816490e-01, ln2_low = 1.90821492927058770002e-10;
  Lanes x = value;
  x = x > 700.0 ? Lanes{} + 700.0 : x;
  x = x < -700.0 ? Lanes{} - 700.0 : x;
  const Lanes shifted = x * 1.44269504088896338700 + shift;
  const Lanes k = shifted - shift;
  const Lanes r = (x - k * ln2_high) - k * ln2_low;
  constexpr double inverse_factorial[] = {
      1.0 / 6227020800, 1.0 / 479001600, 1.0 / 39916800, 1.0 / 3628800, 1.0 / 362880, 1.0 / 40320, 1.0 / 5040,
      1.0 / 720,        1.0 / 120,       1.0 / 24,       1.0 / 6,       0.5,          1.0,         1.0};
  Lanes p = Lanes{} + inverse_factorial[0];
  for (int i = 1; i < 14; ++i) p = p * r + inverse_factorial[i];
  value = (Lanes)((LaneBits)p + ((LaneBits)shifted << 52));
}

}  // namespace bathwright::speciation
