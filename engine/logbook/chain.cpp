#include "chain.hpp"

#include <sodium.h>

#include <array>
#include <string_view>

namespace bathwright::logbook {
namespace {

constexpr std::size_t hash_bytes = 32;
constexpr std::string_view format_tag = "bathwright logbook 1";

/// `value` as `Bytes` bytes, the most significant first.
template <std::size_t Bytes>
std::string big_endian(std::uint64_t value) {
  std::string bytes(Bytes, '\0');
  for (std::size_t i = Bytes; i-- > 0; value >>= 8) bytes[i] = static_cast<char>(value & 0xFF);
  return bytes;
}

class Hasher {
 public:
  Hasher() { crypto_generichash_init(&state_, nullptr, 0, hash_bytes); }

  /// The length in front keeps ("ab", "c") and ("a", "bc") apart.
  void field(std::string_view bytes) {
    update(big_endian<4>(bytes.size()));
    update(bytes);
  }

  std::string hex() {
    std::array<unsigned char, hash_bytes> hash{};
    crypto_generichash_final(&state_, hash.data(), hash.size());
    std::string text(2 * hash_bytes + 1, '\0');  // sodium ends the text with a zero
    sodium_bin2hex(text.data(), text.size(), hash.data(), hash.size());
    text.pop_back();
    return text;
  }

 private:
  void update(std::string_view bytes) {
    crypto_generichash_update(&state_, reinterpret_cast<const unsigned char*>(bytes.data()), bytes.size());
  }
  crypto_generichash_state state_;
};

}  // namespace

std::string first_previous() { return std::string(2 * hash_bytes, '0'); }

std::string chain_hash(const Entry& entry) {
  Hasher hasher;
  hasher.field(format_tag);
  hasher.field(big_endian<8>(static_cast<std::uint64_t>(entry.seq)));
  hasher.field(name(entry.kind));
  hasher.field(entry.tank);
  hasher.field(entry.shift);
  hasher.field(entry.at);
  hasher.field(entry.station);
  hasher.field(entry.by);
  hasher.field(entry.body);
  hasher.field(entry.corrects ? big_endian<8>(static_cast<std::uint64_t>(*entry.corrects)) : "");
  hasher.field(entry.program);
  hasher.field(entry.previous);
  return hasher.hex();
}

}  // namespace bathwright::logbook
