// One thing at a time that is signed and logged, or printed, on a thread of its own: proving a PIN takes a
// tenth of a second on purpose. Nothing that was begun is dropped.
#pragma once

#include <bathwright/base/result.hpp>
#include <functional>
#include <future>
#include <optional>
#include <string>

#include "../panels/intent.hpp"
#include "work/session.hpp"

namespace bathwright::desktop {

/// A session in which these people sign; their PINs are answered from here.
[[nodiscard]] work::Session signed_by(work::Session session, const Names& names);

class Signing {
 public:
  /// What came of it, in words.
  using Work = std::function<Result<std::string>()>;

  explicit Signing(std::function<void()> done) : done_(std::move(done)) {}

  /// Nothing while another runs: a second click is no second entry.
  void start(Work work);
  [[nodiscard]] bool busy() const { return running_.valid(); }
  /// What came of the last one, once.
  [[nodiscard]] std::optional<Result<std::string>> take();

 private:
  std::function<void()> done_;
  std::future<Result<std::string>> running_;
};

}  // namespace bathwright::desktop
