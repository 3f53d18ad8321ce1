#include "chain.hpp"

#include <sodium.h>

#include <cstdint>
#include <optional>
#include <string_view>

#include "hex.hpp"

namespace bathwright::logbook {
namespace {

constexpr std::size_t hash_bytes = 32;
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

  std::string bytes() {
    std::string hash(hash_bytes, '\0');
    crypto_generichash_final(&state_, reinterpret_cast<unsigned char*>(hash.data()), hash.size());
    return hash;
  }

 private:
  void update(std::string_view bytes) {
    crypto_generichash_update(&state_, reinterpret_cast<const unsigned char*>(bytes.data()), bytes.size());
  }
  crypto_generichash_state state_;
};

/// A number of an entry, or nothing.
std::string optional_number(const std::optional<std::int64_t>& number) {
  return number ? big_endian<8>(static_cast<std::uint64_t>(*number)) : std::string();
}

std::string hash_of_form_1(const Entry& entry) {
  Hasher hasher;
  hasher.field("bathwright logbook 1");
  hasher.field(big_endian<8>(static_cast<std::uint64_t>(entry.seq)));
  hasher.field(name(entry.kind));
  hasher.field(entry.tank);
  hasher.field(entry.shift);
  hasher.field(entry.at);
  hasher.field(entry.station);
  hasher.field(entry.by);
  hasher.field(entry.body);
  hasher.field(optional_number(entry.about));
  hasher.field(entry.program);
  hasher.field(entry.previous);
  return hex(hasher.bytes());
}

}  // namespace

std::string first_previous() { return std::string(2 * hash_bytes, '0'); }

std::string content_digest(const Entry& entry) {
  Hasher hasher;
  hasher.field("bathwright logbook 2");
  hasher.field(big_endian<8>(static_cast<std::uint64_t>(entry.seq)));
  hasher.field(name(entry.kind));
  hasher.field(entry.tank);
  hasher.field(entry.shift);
  hasher.field(entry.at);
  hasher.field(entry.happened);
  hasher.field(entry.uptime.boot);
  hasher.field(big_endian<8>(static_cast<std::uint64_t>(entry.uptime.since.count())));
  hasher.field(entry.station);
  hasher.field(entry.by);
  hasher.field(entry.role);
  hasher.field(entry.witness);
  hasher.field(entry.body);
  hasher.field(optional_number(entry.about));
  hasher.field(entry.program);
  hasher.field(entry.bath_type);
  hasher.field(entry.previous);
  return hasher.bytes();
}

std::string chain_hash(const Entry& entry) {
  if (entry.form == 1) return hash_of_form_1(entry);
  Hasher hasher;
  hasher.field("bathwright logbook 2, link");
  hasher.field(content_digest(entry));
  hasher.field(entry.signature);
  hasher.field(entry.witness_signature);
  return hex(hasher.bytes());
}

}  // namespace bathwright::logbook
