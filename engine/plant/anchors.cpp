#include "anchors.hpp"

#include <fmt/format.h>
#include <sodium.h>

#include <array>

namespace bathwright::plant {

std::string anchor_hash(const StoredAnchor& anchor) {
  const std::string text =
      fmt::format("bathwright anchor 1\n{}\n{}\n{}\n{}\n{}\n{}\n{}\n{}\n{}\n{}", anchor.number, anchor.site,
                  anchor.chain, anchor.first_seq, anchor.last_seq, anchor.last_hash, anchor.arrival,
                  anchor.received, anchor.login, anchor.previous);
  std::array<unsigned char, crypto_hash_sha256_BYTES> digest{};
  crypto_hash_sha256(digest.data(), reinterpret_cast<const unsigned char*>(text.data()), text.size());
  std::string hex;
  for (const unsigned char byte : digest) hex += fmt::format("{:02x}", byte);
  return hex;
}

Result<std::vector<StoredAnchor>> read_anchors(Link& link) {
  constexpr int page = 10'000;
  std::vector<StoredAnchor> anchors;
  for (int read = page; read == page;) {
    const auto rows = link.ask(
        fmt::format("SELECT number, site, chain, first_seq, last_seq, last_hash, arrival, received, login, "
                    "previous, hash FROM bathwright.anchor WHERE number > $1 ORDER BY number LIMIT {}",
                    page),
        {std::to_string(anchors.empty() ? 0 : anchors.back().number)});
    if (!rows) return rows.problems();
    read = rows->size();
    for (int row = 0; row < read; ++row)
      anchors.push_back({rows->integer(row, 0), rows->text(row, 1), rows->text(row, 2), rows->integer(row, 3),
                         rows->integer(row, 4), rows->text(row, 5), rows->integer(row, 6), rows->text(row, 7),
                         rows->text(row, 8), rows->text(row, 9), rows->text(row, 10)});
  }
  return anchors;
}

}  // namespace bathwright::plant
