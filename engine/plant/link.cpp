#include "link.hpp"

#include <fmt/format.h>
#include <poll.h>
#include <sys/socket.h>

#include <algorithm>
#include <cstring>

namespace bathwright::plant {
namespace {

using std::chrono::milliseconds;
using std::chrono::steady_clock;

constexpr std::string_view cut_advice = "the local log goes on; send again when the server is back";

/// The first line, without the end of the line: the others are libpq's advice to programmers.
std::string first_line(const char* text) {
  std::string line = text ? text : "";
  return line.substr(0, line.find('\n'));
}

std::string field(const PGresult* result, int code) {
  const char* text = PQresultErrorField(result, code);
  return text ? text : "";
}

/// What every session of ours is set to, so that nothing of the server's or the user's settings stands in for
/// our own names, and so that the server lets go of what nobody waits for any more.
std::string session_settings(const TimeOuts& time_outs) {
  return fmt::format(
      "SET search_path = pg_catalog; SET synchronous_commit = on; SET statement_timeout = '{0}s';"
      " SET lock_timeout = '{0}s'; SET idle_in_transaction_session_timeout = '{0}s';",
      time_outs.answer.count());
}

}  // namespace

void Link::cut() {
  if (!handle_) return;
  // PQfinish says goodbye first, which must not wait for a server that does not listen.
  shutdown(PQsocket(handle_.get()), SHUT_RDWR);
  handle_.reset();
}

Outcome Link::connect() {
  std::vector<const char*> keywords, values;
  for (const auto& option : connection_.options()) {
    keywords.push_back(option.keyword.c_str());
    values.push_back(option.value.c_str());
  }
  keywords.push_back(nullptr);
  values.push_back(nullptr);
  handle_.reset(PQconnectdbParams(keywords.data(), values.data(), 0));
  if (!handle_ || PQstatus(handle_.get()) != CONNECTION_OK) {
    const std::string why = first_line(handle_ ? PQerrorMessage(handle_.get()) : "out of memory");
    handle_.reset();
    return Problem{Fault::io, connection_.words(), "cannot be reached: " + connection_.without_password(why),
                   "", std::string(cut_advice)};
  }
  PQsetNoticeProcessor(
      handle_.get(), [](void*, const char*) {}, nullptr);
  PQsetnonblocking(handle_.get(), 1);
  const auto set = answer(PQsendQuery(handle_.get(), session_settings(connection_.time_outs()).c_str()) != 0);
  if (!set) {
    cut();
    return set.problems();
  }
  return Done{};
}

bool Link::wait(bool to_write, Deadline deadline) const {
  pollfd socket{PQsocket(handle_.get()), static_cast<short>(POLLIN | (to_write ? POLLOUT : 0)), 0};
  for (;;) {
    const auto left = std::chrono::duration_cast<milliseconds>(deadline - steady_clock::now());
    if (left <= milliseconds::zero()) return false;
    const int ready = poll(&socket, 1, static_cast<int>(left.count()));
    if (ready > 0) return true;
    if (ready == 0 || errno != EINTR) return false;
  }
}

Link::Ready Link::flush(Deadline deadline) {
  for (;;) {
    const int left = PQflush(handle_.get());
    if (left == 0) return Ready::yes;
    if (left < 0) return Ready::no;
    if (!wait(true, deadline)) return Ready::timed_out;
    // The server may be waiting for us to read before it reads on.
    if (PQconsumeInput(handle_.get()) == 0) return Ready::no;
  }
}

Problem Link::silent() {
  cut();
  return {Fault::io, connection_.words(),
          fmt::format("did not answer within {} s", connection_.time_outs().answer.count()), "",
          std::string(cut_advice)};
}

Problem Link::broken() {
  const std::string why = connection_.without_password(first_line(PQerrorMessage(handle_.get())));
  cut();
  return {Fault::io, connection_.words(), "the connection broke off: " + why, "", std::string(cut_advice)};
}

Problem Link::refusal(const PGresult* result) {
  sqlstate_ = field(result, PG_DIAG_SQLSTATE);
  detail_ = field(result, PG_DIAG_MESSAGE_DETAIL);
  const std::string words = connection_.without_password(field(result, PG_DIAG_MESSAGE_PRIMARY));
  const std::string hint = field(result, PG_DIAG_MESSAGE_HINT);
  if (sqlstate_.starts_with("BW"))  // our own words, from migrations.hpp
    return {Fault::refused, connection_.words(), words, "", hint};
  if (sqlstate_ == "42501")  // insufficient_privilege
    return {Fault::refused, connection_.words(), words, "a login with a role and a site of the plant",
            "ask the administrator to grant it: bathwright plant grant"};
  if (sqlstate_ == "3F000" || sqlstate_ == "42P01")  // invalid_schema_name, undefined_table
    return {Fault::bad_input, connection_.words(), "has no tables of Bathwright", "",
            "let the administrator run bathwright plant set-up, or correct the database's name"};
  // 57: the server shuts down, gives up on a statement or cuts us off; 08 and 53: it cannot go on just now.
  const bool passing = sqlstate_.starts_with("57") || sqlstate_.starts_with("08") ||
                       sqlstate_.starts_with("53") || sqlstate_ == "55P03" || sqlstate_ == "25P03";
  return {Fault::io, connection_.words(), words, "", passing ? std::string(cut_advice) : hint};
}

Result<Rows> Link::answer(bool sent) {
  sqlstate_.clear();
  detail_.clear();
  const Deadline deadline = steady_clock::now() + connection_.time_outs().answer;
  if (!sent) return broken();
  if (const Ready flushed = flush(deadline); flushed != Ready::yes)
    return flushed == Ready::timed_out ? silent() : broken();
  std::optional<Rows> rows;
  std::optional<Problem> refused;
  for (;;) {
    while (PQisBusy(handle_.get()) != 0) {
      if (!wait(false, deadline)) return silent();
      if (PQconsumeInput(handle_.get()) == 0) return broken();
    }
    PGresult* result = PQgetResult(handle_.get());
    if (!result) break;
    const ExecStatusType status = PQresultStatus(result);
    Rows keeper(result);
    if (status == PGRES_TUPLES_OK || status == PGRES_COMMAND_OK || status == PGRES_EMPTY_QUERY)
      rows.emplace(std::move(keeper));
    else if (!refused && PQresultErrorField(result, PG_DIAG_SQLSTATE))
      refused = refusal(result);
  }
  if (PQstatus(handle_.get()) != CONNECTION_OK) {
    if (!refused) return broken();
    cut();  // the server said why before it left
  }
  if (refused) return *std::move(refused);
  if (!rows) return broken();
  return *std::move(rows);
}

Result<Rows> Link::ask(const std::string& sql, const Parameters& parameters) {
  const bool had_connection = handle_ != nullptr;
  if (!had_connection && in_transaction_)
    return Problem{Fault::io, connection_.words(), "the connection broke off", "", std::string(cut_advice)};
  if (!had_connection)
    if (auto connected = connect(); !connected) return connected.problems();
  std::vector<const char*> values;
  for (const auto& parameter : parameters) values.push_back(parameter ? parameter->c_str() : nullptr);
  const auto once = [&] {
    return answer(PQsendQueryParams(handle_.get(), sql.c_str(), static_cast<int>(values.size()), nullptr,
                                    values.data(), nullptr, nullptr, 0) != 0);
  };
  const auto started = steady_clock::now();
  auto rows = once();
  const bool cut_off = !rows && !handle_ && steady_clock::now() - started < connection_.time_outs().answer;
  if (!cut_off || !had_connection || in_transaction_) return rows;
  if (auto connected = connect(); !connected) return connected.problems();
  return once();
}

Outcome Link::run(const std::string& script) {
  if (!handle_)
    if (auto connected = connect(); !connected) return connected.problems();
  const auto rows = answer(PQsendQuery(handle_.get(), script.c_str()) != 0);
  if (!rows) return rows.problems();
  return Done{};
}

Result<std::string> Link::identifier(const std::string& name) {
  if (!handle_)
    if (auto connected = connect(); !connected) return connected.problems();
  const std::unique_ptr<char, decltype(&PQfreemem)> quoted(
      PQescapeIdentifier(handle_.get(), name.data(), name.size()), PQfreemem);
  if (!quoted) return Problem{Fault::bad_input, "login", "is no text in UTF-8", "the name of a login", ""};
  return std::string(quoted.get());
}

Outcome Transaction::begin_as(const char* statement) {
  const auto begun = link_.ask(statement);
  if (!begun) return begun.problems();
  link_.in_transaction_ = true;
  return Done{};
}

Outcome Transaction::commit() {
  const auto committed = link_.ask("COMMIT");
  link_.in_transaction_ = false;
  if (!committed) return committed.problems();
  return Done{};
}

Transaction::~Transaction() {
  if (!link_.in_transaction_) return;
  if (link_.handle_) (void)link_.ask("ROLLBACK");
  link_.in_transaction_ = false;
}

}  // namespace bathwright::plant
