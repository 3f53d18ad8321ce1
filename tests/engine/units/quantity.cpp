// What must not compile: quantities of different units do not add, compare or convert by themselves.
#include <bathwright/units/quantity.hpp>
#include <catch2/catch.hpp>
#include <type_traits>

using namespace bathwright::units;

template <class A, class B>
concept Addable = requires(A a, B b) {
  a + b;
};
template <class A, class B>
concept Comparable = requires(A a, B b) {
  a < b;
};

static_assert(Addable<GramsPerLitre, GramsPerLitre>);
static_assert(!Addable<GramsPerLitre, MolesPerLitre>, "g/L and mol/L add only through a molar mass");
static_assert(!Addable<MolesPerLitre, Molality>, "mol/L and mol/kg add only through a density");
static_assert(!Addable<Litres, double>, "a bare number has no unit");
static_assert(Comparable<Celsius, Celsius>);
static_assert(!Comparable<Celsius, Kilograms>);
static_assert(!std::is_convertible_v<double, Litres>, "a bare number has no unit");

TEST_CASE("quantities of one unit add, scale and compare", "[unit][units]") {
  constexpr Litres sum = Litres{2} + 3 * Litres{0.5};
  CHECK(sum.v == 3.5);
  CHECK((sum - Litres{1}) * 2 == Litres{5});
  CHECK(sum / Litres{7} == 0.5);
  CHECK(Litres{1} < Litres{2});
  CHECK(kelvin(Celsius{25}) == 298.15);
}
