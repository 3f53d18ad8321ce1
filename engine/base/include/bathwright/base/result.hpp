// A value, or every problem found on the way to it. All engine functions that can fail because of data,
// files, plugins or chemistry return a Result; a broken promise inside our own code is an assert.
// Not for: control flow inside a part. Read next: data/csv.hpp for problems with a file position.
#pragma once

#include <cassert>
#include <string>
#include <utility>
#include <variant>
#include <vector>

namespace bathwright {

/// What kind of trouble it is; a caller may act on it, the text is for the person.
enum class Fault {
  bad_input,          ///< what was typed or stands in a file cannot be read or makes no sense
  out_of_range,       ///< readable, but outside what the model or the data covers
  not_converged,      ///< a calculation did not reach its own test of success
  inconsistent_data,  ///< constants or tables contradict each other
  io,                 ///< a file, folder or database could not be used
  refused             ///< possible, but not allowed (safety rule, trust, role)
};

/// One problem, in the words of the person who must mend it.
struct Problem {
  Fault kind = Fault::bad_input;
  std::string where;     ///< file:line: key, or the field of a form; may be empty
  std::string what;      ///< what was found
  std::string expected;  ///< what would have been right; may be empty
  std::string try_this;  ///< how to mend it; may be empty

  /// "where: what; expected ... Try: ..." with the empty pieces left out.
  [[nodiscard]] std::string text() const;
};

using Problems = std::vector<Problem>;

/// One line a problem, in order.
[[nodiscard]] std::string text(const Problems& problems);

/// A value, or one or more problems (never none). Test it before use.
template <class T>
class [[nodiscard]] Result {
 public:
  Result(T value) : state_(std::in_place_index<0>, std::move(value)) {}
  Result(Problem problem) : state_(std::in_place_index<1>, Problems{std::move(problem)}) {}
  Result(Problems problems) : state_(std::in_place_index<1>, std::move(problems)) {
    assert(!std::get<1>(state_).empty());
  }

  explicit operator bool() const { return state_.index() == 0; }
  const T& value() const& {
    assert(*this);
    return *std::get_if<0>(&state_);
  }
  T&& value() && {
    assert(*this);
    return std::move(*std::get_if<0>(&state_));
  }
  const T& operator*() const& { return value(); }
  T&& operator*() && { return std::move(*this).value(); }
  const T* operator->() const { return &value(); }
  const Problems& problems() const {
    assert(!*this);
    return *std::get_if<1>(&state_);
  }

 private:
  std::variant<T, Problems> state_;
};

/// For functions that only succeed or fail.
struct Done {};
using Outcome = Result<Done>;

}  // namespace bathwright
