// How the plant's PostgreSQL server is reached: a connection string that is kept secret, over TLS.
// Not for connecting; that is station.hpp and administration.hpp, which also tell when the server is away.
#pragma once

#include <chrono>
#include <filesystem>
#include <string>
#include <string_view>
#include <vector>

#include "bathwright/base/result.hpp"

namespace bathwright::plant {

/// How long to wait for a server that does not answer. A log entry never waits: it is on the local disk
/// before.
struct TimeOuts {
  std::chrono::seconds connecting{5};  ///< for each address of the server, 2 s or more
  std::chrono::seconds answer{20};  ///< for the answer to one question; the server is told to give up as well
};

/// A libpq connection string ("host=... dbname=... user=..." or "postgresql://...") that may be used: TLS
/// with the server's certificate and name verified, unless the string asks for less and names this machine as
/// host.
class Connection {
 public:
  [[nodiscard]] static Result<Connection> of(std::string_view text, const TimeOuts& time_outs = {});

  /// The content of a file that its owner alone may read (mode 0600 or less): it may hold a password.
  [[nodiscard]] static Result<Connection> from_file(const std::filesystem::path& file,
                                                    const TimeOuts& time_outs = {});

  /// The environment variable BATHWRIGHT_PLANT.
  [[nodiscard]] static Result<Connection> from_environment(const TimeOuts& time_outs = {});

  struct Option {
    std::string keyword, value;
  };
  [[nodiscard]] const std::vector<Option>& options() const { return options_; }
  [[nodiscard]] const TimeOuts& time_outs() const { return time_outs_; }

  /// "database shop on pg.plant.example": for messages, without user and password.
  [[nodiscard]] std::string words() const;

  /// `text` without the password, should it hold it.
  [[nodiscard]] std::string without_password(std::string text) const;

 private:
  Connection(std::vector<Option> options, const TimeOuts& time_outs)
      : options_(std::move(options)), time_outs_(time_outs) {}
  [[nodiscard]] std::string value(std::string_view keyword) const;
  std::vector<Option> options_;
  TimeOuts time_outs_;
};

}  // namespace bathwright::plant
