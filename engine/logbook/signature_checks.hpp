// Signatures to verify, in batches over all processors: each takes some 50 microseconds, and a log has many.
#pragma once

#include <cstdint>
#include <functional>
#include <string>
#include <vector>

namespace bathwright::logbook {

struct SignatureToCheck {
  std::int64_t seq = 0;
  std::string key, digest, signature;  ///< as signed_by takes them
};

class SignatureChecks {
 public:
  /// `wrong` is told the number of each entry whose signature is not its signer's, by the calling thread.
  explicit SignatureChecks(std::function<void(std::int64_t)> wrong) : wrong_(std::move(wrong)) {}

  void check(SignatureToCheck signature);
  /// Verifies what is left.
  void finish();

 private:
  std::function<void(std::int64_t)> wrong_;
  std::vector<SignatureToCheck> waiting_;
};

}  // namespace bathwright::logbook
