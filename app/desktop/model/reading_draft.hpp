// Readings while they are typed: texts as a person writes them, with undo, kept on the disk with every
// letter. They become readings through the one reader of readings files, so that a file and a screen never
// differ.
#pragma once

#include <bathwright/analysis/method.hpp>
#include <bathwright/bath/tank.hpp>
#include <filesystem>
#include <map>

#include "../panels/intent.hpp"

namespace bathwright::desktop {

struct DraftRow {
  std::string quantity;
  std::vector<std::string> methods;  ///< ids of methods; "" is a concentration found by other means
  int method = 0;
  std::string sample, titrant, burette, value;

  [[nodiscard]] bool is_value() const { return methods[static_cast<std::size_t>(method)].empty(); }
  /// Nothing typed that is needed beside what usually stands there.
  [[nodiscard]] bool is_empty() const { return is_value() ? value.empty() : burette.empty(); }
  bool operator==(const DraftRow&) const = default;
};

struct Draft {
  std::string sampled;  ///< when the first reading was typed, by the shop's clock, "2026-03-02T05:40:00"
  std::string volume, temperature, pH;
  std::vector<DraftRow> rows;
  bool operator==(const Draft&) const = default;
};

/// One row for each aim of the tank that is not a pH, with the methods that find it and what is usual for
/// them.
[[nodiscard]] Draft blank_draft(const bath::Tank& tank, const bath::BathType& type);

/// What a bare number in a field means; burettes and samples are in mL, titrants in mol/L.
struct HeadUnits {
  std::string volume = "L", temperature = "degC";
  std::map<std::string, std::string> value{};  ///< of a concentration, by quantity; else g/L
};

/// The text of a readings file: what is typed, empty rows left out. `line_of_row` gets the line each row's
/// block begins on (0: left out), to bring a message back to its row.
[[nodiscard]] std::string readings_text(const Draft& draft, const HeadUnits& units,
                                        std::vector<int>& line_of_row);

/// The draft with the unit of every bare number written out: what is kept means the same whatever is shown
/// later.
[[nodiscard]] Draft with_units(Draft draft, const HeadUnits& units);

/// A draft with its past. Typing on in one field is one step.
class DraftHistory {
 public:
  explicit DraftHistory(Draft draft) : now_(std::move(draft)) {}

  [[nodiscard]] const Draft& now() const { return now_; }
  [[nodiscard]] bool can_undo() const { return !past_.empty(); }
  [[nodiscard]] bool can_redo() const { return !future_.empty(); }

  /// `now`: local time, for the first reading of a sample.
  void type(const TypeReading& typed, const std::string& now);
  void choose(const ChooseMethod& chosen);
  /// Everything typed is put away, for the next sample; can be undone.
  void start_again(Draft blank);
  void undo();
  void redo();
  /// Bare numbers of now and before keep the meaning they had when they were typed.
  void write_out(const HeadUnits& units);

 private:
  void begin_step(int row, Field field);

  Draft now_;
  std::vector<Draft> past_, future_;
  int last_row_ = -2;
  Field last_field_ = Field::volume;
};

/// Keeps the draft of a tank in a file; whole or not at all.
Outcome keep_draft(const std::filesystem::path& file, const Draft& draft);
/// What was kept; nothing where there is no file. Rows the tank no longer aims at are left out. Fails (io,
/// bad_input) on a file that cannot be read.
Result<std::optional<Draft>> kept_draft(const std::filesystem::path& file, const Draft& blank);

}  // namespace bathwright::desktop
