#include <bathwright/sheets/addition_sheet.hpp>
#include <bathwright/sheets/cautions.hpp>
#include <bathwright/sheets/doubts.hpp>
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
  page.add(read_as(Reading::small_print, slip::notes(slip)));
  if (!slip.sheet.plans.empty()) {
    const dosing::Plan& plan = slip.sheet.plans.front();
    if (plan.decant_L > 0) {
      Section out{"Take out first", {}};
      out.blocks.emplace_back(Paragraph{figure(plan.decant_L, 3) +
                                        " L of bath, to the waste treatment, before anything is added."});
      page.add(std::move(out));
    }
    if (plan.additions.empty()) {
      Section nothing{"Additions", {}};
      nothing.blocks.emplace_back(Paragraph{"Nothing to add."});
      page.add(std::move(nothing));
    } else {
      page.add(slip::weighing(slip, plan));
      page.add(slip::order(slip, plan));
      page.add(read_as(Reading::background, slip::expected_after_each(slip, plan)));
      page.add(read_as(Reading::small_print, slip::watch(plan)));
    }
    page.add(read_as(Reading::small_print, slip::promise(slip, plan)));
    page.add(read_as(Reading::small_print, slip::not_at_its_aim(plan)));
    page.add(read_as(Reading::small_print, slip::bringing_down(plan)));
  }
  page.add(read_as(Reading::background, slip::other_plans(slip)));
  page.add(read_as(Reading::small_print, slip::refused(slip)));
  page.add(read_as(Reading::small_print, cautions(slip.sheet.cautions)));
  page.add(read_as(Reading::background, doubts(slip.sheet.now.warnings)));
  page.add(slip::signing(slip));
  return page;
}

}  // namespace bathwright::sheets
