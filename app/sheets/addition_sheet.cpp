#include <bathwright/sheets/addition_sheet.hpp>
#include <bathwright/sheets/names.hpp>

#include "slip/parts.hpp"

namespace bathwright::sheets {
namespace {

Section read_as(Reading reading, Section section) {
  section.reading = reading;
  return section;
}

}  // namespace

Page addition_page(const AdditionSlip& slip) {
  const bath::Tank& tank = slip.tank;
  Page page;
  page.left = tank.name;
  for (const std::string& where : {tank.line, tank.shop})
    if (!where.empty()) page.left += ", " + where;
  page.right = slip.signature.slip ? "Slip " + std::to_string(*slip.signature.slip) : "Addition sheet";
  page.add(slip::origin(slip));
  page.add(slip::stopping(slip));
  page.add(slip::levels(slip));
  if (!slip.sheet.plans.empty()) {
    const dosing::Plan& plan = slip.sheet.plans.front();
    if (plan.steps.empty()) {
      Section nothing{"Additions", {}};
      nothing.blocks.emplace_back(Paragraph{"Nothing to add."});
      page.add(std::move(nothing));
    } else {
      page.add(slip::order(slip, plan));
      page.add(read_as(Reading::background, slip::expected_after_each(slip, plan)));
      page.add(read_as(Reading::small_print, slip::watch(plan)));
    }
    page.add(read_as(Reading::small_print, slip::not_at_its_aim(slip, plan)));
    page.add(read_as(Reading::small_print, slip::bringing_down(slip, plan)));
  }
  page.add(read_as(Reading::background, slip::other_plans(slip)));
  page.add(read_as(Reading::small_print, slip::refused(slip)));
  page.add(read_as(Reading::small_print, slip::warnings(slip)));
  page.add(read_as(Reading::background, slip::doubtful(slip)));
  page.add(slip::signing(slip));
  return page;
}

}  // namespace bathwright::sheets
