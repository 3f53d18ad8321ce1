// Analyses from a laboratory's CSV file. No row is lost: each comes back as an analysis, as a repetition of
// an earlier row, or as rejected with everything that is wrong with it. Not for: our own tables of constants
// (data/csv.hpp). Read next: analysis_columns.hpp.
#pragma once

#include <bathwright/base/result.hpp>
#include <bathwright/shifts/time_zone.hpp>
#include <bathwright/shopfiles/analysis_columns.hpp>
#include <bathwright/units/quantity.hpp>
#include <cstddef>
#include <optional>
#include <string>
#include <string_view>
#include <vector>

namespace bathwright::shopfiles {

struct ImportedLevel {
  std::string quantity;
  units::GramsPerLitre value;
  bool operator==(const ImportedLevel&) const = default;
};

/// One good row. A cell left empty is not measured.
struct ImportedAnalysis {
  std::size_t line = 0;  ///< of the file, from 1; the first of a row that spans several
  std::string tank;
  shifts::UtcTime sampled;
  std::vector<ImportedLevel> levels{};  ///< in the order of the columns
  std::optional<double> pH{};
  std::optional<units::Celsius> temperature{};
  std::optional<units::Litres> volume{};
};

/// What is wrong with a row; its `where` names file, line and column.
struct Rejection {
  std::string column;  ///< heading; empty where it concerns the whole row
  Problem problem;
};

struct RejectedRow {
  std::size_t line = 0;
  std::string written;  ///< the row as it stands in the file
  std::vector<Rejection> reasons;
};

/// A value that an earlier row of the file gave already, of the same tank, moment and column. It is left out
/// of its row's analysis, and a row where nothing else is left gives no analysis.
struct Repetition {
  std::size_t line = 0, first_line = 0;
  std::string column;
  std::string tank;
  shifts::UtcTime sampled;
};

struct ImportedAnalyses {
  std::size_t rows = 0;  ///< in the file, without its headings and blank rows
  std::vector<ImportedAnalysis> analyses;
  std::vector<RejectedRow> rejected;
  std::vector<Repetition> repeated;
};

inline constexpr std::size_t longest_csv_bytes = 64 << 20;

/// Reads a text in UTF-8, with or without a byte order mark, lines ended by LF, CR LF or CR, fields quoted as
/// RFC 4180 has it; a first line "sep=;" is obeyed. `name` stands for the file in messages.
/// Fails, with nothing read, where `columns` make no sense, the text is no UTF-8 or too long, the delimiter
/// is not clear, or a column is not there or there twice. All else is told row by row.
Result<ImportedAnalyses> import_analyses_text(std::string_view name, std::string_view text,
                                              const AnalysisColumns& columns);
Result<ImportedAnalyses> import_analyses(const std::string& path, const AnalysisColumns& columns);

/// The headings of a CSV text, to choose columns from. Fails like the import.
Result<std::vector<std::string>> csv_headings(std::string_view name, std::string_view text,
                                              std::optional<char> delimiter = {});

}  // namespace bathwright::shopfiles
