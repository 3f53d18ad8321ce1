#include <bathwright/sheets/cautions.hpp>
#include <bathwright/sheets/doubts.hpp>
#include <bathwright/sheets/names.hpp>
#include <catch2/catch.hpp>

using namespace bathwright::sheets;

TEST_CASE("a doubt is shortened to its pair and what was done", "[unit][sheets]") {
  CHECK(in_few_words("Ni^2+ - Cl^-: analogy, weakly tested (25 C row, shift of MgCl2 (set warm))") ==
        "Ni²⁺ - Cl⁻: analogy, weakly tested");
  CHECK(in_few_words("Ni^2+ - SO4^2-: analogy (Eng. 48:723 doi:10.1016/0016-7037(84)90098-X)") ==
        "Ni²⁺ - SO₄²⁻: analogy");
  CHECK(in_few_words("the ionic strength is beyond the model") == "the ionic strength is beyond the model");
  CHECK(in_few_words("unbalanced) words)") == "unbalanced) words)");
  CHECK(in_few_words("").empty());
}

TEST_CASE("a caution stands without its own deferral", "[unit][sheets]") {
  Lines lines;
  append(lines,
         cautions({"Make no dust. The supplier's SDS, local codes and licensed practice decide.",
                   "The supplier's safety data sheet, local codes and licensed practice decide; so be it.",
                   "The supplier's drum is blue."}));
  REQUIRE(lines.size() == 4);
  CHECK(lines[2] == "  Make no dust.");
  CHECK(lines[3] == "  The supplier's drum is blue.");
}

TEST_CASE("what rounds to zero carries no sign", "[unit][sheets]") {
  CHECK(fixed(-0.001, 2) == "0.00");
  CHECK(fixed(-0.0, 1) == "0.0");
  CHECK(fixed(-0.01, 2) == "-0.01");
}
