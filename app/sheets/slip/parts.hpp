// The sections of the addition slip, in the order they stand on it. Private to sheets.
#pragma once

#include <bathwright/sheets/addition_sheet.hpp>

namespace bathwright::sheets::slip {

/// Where, by which limits, of which sample, how it was analysed.
[[nodiscard]] Section origin(const AdditionSlip& slip);
/// What keeps it from being carried out; nothing where nothing does.
[[nodiscard]] Section stopping(const AdditionSlip& slip);
/// Each aim: its limits, what was found, what is expected at the end; earlier results below.
[[nodiscard]] Section levels(const AdditionSlip& slip);
/// The steps in order, one for all portions of a chemical: what to take of which lot, how it goes in.
[[nodiscard]] Section order(const AdditionSlip& slip, const dosing::Plan& plan);
/// What the tank shows when each is in.
[[nodiscard]] Section expected_after_each(const AdditionSlip& slip, const dosing::Plan& plan);
/// What the checks of the steps found that stops nothing.
[[nodiscard]] Section watch(const dosing::Plan& plan);
/// What the shelf can take out as a solid, of a level that ends too high.
[[nodiscard]] Section bringing_down(const AdditionSlip& slip, const dosing::Plan& plan);
/// Aims that are not reached, what is left alone on purpose, and the limits in each other's way.
[[nodiscard]] Section not_at_its_aim(const AdditionSlip& slip, const dosing::Plan& plan);
[[nodiscard]] Section other_plans(const AdditionSlip& slip);
[[nodiscard]] Section refused(const AdditionSlip& slip);
/// What the bath type and the chemicals warn of, the codes of their labels once.
[[nodiscard]] Section warnings(const AdditionSlip& slip);
/// What the analysis and the constants leave open.
[[nodiscard]] Section doubtful(const AdditionSlip& slip);
/// What comes next, and the lines to sign on.
[[nodiscard]] Section signing(const AdditionSlip& slip);

/// "2 x 25 kg and 6.05 kg": whole containers and what is taken of one more; "" where none is whole.
[[nodiscard]] std::string containers(const bath::ShelfItem& item, double amount, const std::string& unit,
                                     const Units& units);
/// "NiSO4.6H2O, 99 %, technical; lot 24-0815, to 2027-06-30".
[[nodiscard]] std::string label_of(const bath::ShelfItem& item);
/// A figure of a rule or label, as it was written: 25, 99.5.
[[nodiscard]] std::string plain(double value);
/// In a unit of which `per_one` make one of what it was written in: to four figures.
[[nodiscard]] std::string plain(double value, double per_one);

}  // namespace bathwright::sheets::slip
