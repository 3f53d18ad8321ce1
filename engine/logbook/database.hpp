// One SQLite connection and its statements as values, and SQLite's errors in words for a person.
// Not for: what stands in the tables; that is schema.hpp and stored_entry.hpp.
#pragma once

#include <sqlite3.h>

#include <chrono>
#include <cstdint>
#include <filesystem>
#include <memory>
#include <optional>
#include <string>
#include <string_view>

#include "bathwright/base/result.hpp"
#include "bathwright/logbook/logbook.hpp"

namespace bathwright::logbook {

/// A prepared statement. An error in preparing is kept and comes out of the first step().
class Statement {
 public:
  Statement(sqlite3* connection, std::string_view sql);

  /// Parameters count from 1, in the order of their question marks.
  Statement& bind(int parameter, std::string_view text);
  Statement& bind(int parameter, std::optional<std::int64_t> number);

  /// True while there is a row; false at the end or on an error, told apart by failed().
  bool step();
  bool failed() const { return code_ != SQLITE_OK && code_ != SQLITE_ROW && code_ != SQLITE_DONE; }

  /// Columns count from 0.
  std::int64_t integer(int column) const;
  std::optional<std::int64_t> optional_integer(int column) const;
  std::string_view view(int column) const;  ///< until the next step
  std::string text(int column) const { return std::string(view(column)); }

 private:
  struct Finalize {
    void operator()(sqlite3_stmt* statement) const { sqlite3_finalize(statement); }
  };
  std::unique_ptr<sqlite3_stmt, Finalize> handle_;
  int code_ = SQLITE_OK;
};

class Database {
 public:
  /// Opens the file, makes it only in mode create, and sets what every connection needs: full synchronous,
  /// foreign keys, waiting for other writers. Says nothing about what the file holds.
  static Result<Database> open(const std::filesystem::path& path, OpenMode mode,
                               std::chrono::milliseconds wait);

  /// An empty database that is gone with this object.
  static Database in_memory();

  /// What it holds, in memory, under the same name.
  Result<Database> copied_to_memory() const;

  /// A database whose pages are `image`, to be read only; `image` must stay as it is meanwhile.
  static Database on_image(std::string& image);

  /// Its pages.
  std::string image() const;

  Statement prepare(std::string_view sql) const { return Statement(connection_.get(), sql); }

  /// Runs one or more statements that give no rows.
  Outcome execute(const char* sql) const;

  /// What SQLite last complained about, in words; call it before any other use of the connection.
  Problem problem() const;

  /// The path as the user knows it.
  const std::string& name() const { return name_; }

 private:
  friend class WriteTransaction;
  struct Close {
    void operator()(sqlite3* connection) const { sqlite3_close_v2(connection); }
  };
  Database(sqlite3* connection, std::string name, std::chrono::milliseconds wait);

  std::unique_ptr<sqlite3, Close> connection_;
  std::string name_;
  std::chrono::milliseconds wait_;
};

/// A write transaction that holds the file's one write lock from its beginning, so that what it reads stays
/// true until it commits. Rolled back unless committed.
class WriteTransaction {
 public:
  explicit WriteTransaction(const Database& database) : database_(database) {}
  ~WriteTransaction();
  WriteTransaction(const WriteTransaction&) = delete;
  WriteTransaction& operator=(const WriteTransaction&) = delete;

  Outcome begin();
  /// Success means the changes are on the disk, in the file of that name.
  Outcome commit();

 private:
  const Database& database_;
  bool open_ = false;
};

}  // namespace bathwright::logbook
