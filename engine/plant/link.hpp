// One connection to the server: connects when needed, never waits longer than the time-outs, and turns the
// server's errors into words for a person.
// Not for: what is asked; that is station.cpp, verify.cpp and administration.cpp.
#pragma once

#include <libpq-fe.h>

#include <chrono>
#include <cstdint>
#include <memory>
#include <optional>
#include <string>
#include <vector>

#include "bathwright/base/result.hpp"
#include "bathwright/plant/connection.hpp"

namespace bathwright::plant {

/// What the server answered. Rows and columns count from 0.
class Rows {
 public:
  explicit Rows(PGresult* result) : result_(result) {}
  [[nodiscard]] int size() const { return PQntuples(result_.get()); }
  [[nodiscard]] std::int64_t changed() const { return std::atoll(PQcmdTuples(result_.get())); }
  [[nodiscard]] std::string text(int row, int column) const {
    return {PQgetvalue(result_.get(), row, column),
            static_cast<std::size_t>(PQgetlength(result_.get(), row, column))};
  }
  [[nodiscard]] std::int64_t integer(int row, int column) const {
    return std::atoll(PQgetvalue(result_.get(), row, column));
  }
  [[nodiscard]] bool is_null(int row, int column) const {
    return PQgetisnull(result_.get(), row, column) != 0;
  }

 private:
  struct Clear {
    void operator()(PGresult* result) const { PQclear(result); }
  };
  std::unique_ptr<PGresult, Clear> result_;
};

using Parameters = std::vector<std::optional<std::string>>;

class Link {
 public:
  explicit Link(Connection connection) : connection_(std::move(connection)) {}

  /// Asks one statement; $1, $2 ... are the parameters. Connects first where there is no connection, and asks
  /// again over a new one where the old one turns out to be cut: so only what may be done twice is asked.
  Result<Rows> ask(const std::string& sql, const Parameters& parameters = {});

  /// Runs several statements, one after the other.
  Outcome run(const std::string& script);

  /// The SQLSTATE and the DETAIL of the last refusal; empty where the server was not reached.
  [[nodiscard]] const std::string& sqlstate() const { return sqlstate_; }
  [[nodiscard]] const std::string& detail() const { return detail_; }

  /// `name` as SQL may hold it.
  Result<std::string> identifier(const std::string& name);

  [[nodiscard]] const Connection& connection() const { return connection_; }

 private:
  friend class Transaction;
  using Deadline = std::chrono::steady_clock::time_point;
  struct Finish {
    void operator()(PGconn* handle) const { PQfinish(handle); }
  };
  enum class Ready { yes, no, timed_out };

  Outcome connect();
  void cut();
  [[nodiscard]] bool wait(bool to_write, Deadline deadline) const;
  Ready flush(Deadline deadline);
  Result<Rows> answer(bool sent);
  Problem silent();
  Problem broken();
  Problem refusal(const PGresult* result);

  Connection connection_;
  std::unique_ptr<PGconn, Finish> handle_;
  bool in_transaction_ = false;
  std::string sqlstate_, detail_;
};

/// Several questions as one: what was not committed when it ends never was. Its link does not go over to a
/// new connection meanwhile.
class Transaction {
 public:
  explicit Transaction(Link& link) : link_(link) {}
  ~Transaction();
  Transaction(const Transaction&) = delete;
  Transaction& operator=(const Transaction&) = delete;

  Outcome begin() { return begin_as("BEGIN"); }
  /// Everything asked is answered as of the moment of the first question; nothing may be written.
  Outcome begin_snapshot() { return begin_as("BEGIN ISOLATION LEVEL REPEATABLE READ READ ONLY"); }
  Outcome commit();

 private:
  Outcome begin_as(const char* statement);
  Link& link_;
};

}  // namespace bathwright::plant
