#include "exercise.hpp"

#include <algorithm>
#include <cmath>
#include <cstddef>
#include <optional>
#include <thread>

#include "guarded.hpp"
#include "parking.hpp"
#include "rows.hpp"

namespace bathwright::plugin_host {
namespace {

Problem fault(const std::string& where, std::string what, std::string expected) {
  return {Fault::inconsistent_data, where, std::move(what), std::move(expected), ""};
}

// ---- the entry

/// The end of bw_host in version 1.0.
constexpr std::size_t first_host_size =
    offsetof(bw_host, formula_g_per_mol) + sizeof(bw_host::formula_g_per_mol);

/// `host` as a host of another version has it: shorter, with unreadable memory behind, or longer with zeros.
class OtherHost {
 public:
  OtherHost(const bw_host& host, std::size_t size) : bytes_(as_bytes(host, size)) {}
  [[nodiscard]] const bw_host& get() const { return *bytes_.as<bw_host>(); }

 private:
  static std::vector<std::byte> as_bytes(bw_host host, std::size_t size) {
    host.size = static_cast<std::uint32_t>(size);
    std::vector<std::byte> bytes(size);
    std::memcpy(bytes.data(), &host, std::min(size, sizeof(host)));
    return bytes;
  }
  ReadOnlyBytes bytes_;
};

std::string described(const Answer& answer) {
  if (!answer.thrown.empty()) return "let out " + answer.thrown;
  return "gave status " + std::to_string(answer.status);
}

// ---- the functions

/// A function of any table: fills `outputs` numbers from a view.
struct Function {
  std::string name;  ///< "indicator 'free-nickel'"
  std::uint32_t outputs;
  std::function<bw_status(const bw_view*, double*)> call;
};

std::vector<Function> functions_of(const bw_bath_type& stated, const bath::BathType& type) {
  std::vector<Function> all;
  Report unused("");  // the tables have passed, whatever the length of their rows
  constexpr RowLimits passed{sizeof(void*)};
  const auto indicators = copy_rows<bw_indicator>("indicators", stated.indicators, passed, unused);
  for (std::size_t i = 0; i < indicators.size(); ++i)
    all.push_back({"indicator '" + type.indicators.at(i).id + '\'', 1, indicators[i].eval});
  const auto uses = copy_rows<bw_use>("uses", stated.uses, passed, unused);
  for (std::size_t i = 0; i < uses.size(); ++i)
    if (const auto rate = uses[i].rate)
      all.push_back({"rate of use '" + type.uses.at(i).id + '\'', uses[i].effect_count,
                     [rate, n = uses[i].effect_count](const bw_view* view, double* values) {
                       return rate(view, values, n);
                     }});
  return all;
}

/// A view that a function gets, in memory that it cannot change.
class View {
 public:
  std::string name;  ///< "zero levels"

  struct Numbers {
    double level, molality, pH, ionic_strength;
    bool solved = true;
  };
  View(std::string view_name, const bath::BathType& type, const Numbers& numbers)
      : name(std::move(view_name)) {
    const std::size_t count = numbers.solved ? type.components.size() : 0;
    std::vector<const char*> species;
    for (std::size_t i = 0; i < count; ++i) species.push_back(type.components[i].species.c_str());
    const auto* levels = keep(std::vector<double>(type.quantities.size(), numbers.level));
    const auto* names = keep(species);
    const auto* molalities = keep(std::vector<double>(count, numbers.molality));
    const auto* activities = keep(std::vector<double>(count, numbers.molality / 2));
    constexpr double temp_C = 25, volume_L = 1000;
    view_ = keep(std::vector<bw_view>{{sizeof(bw_view), static_cast<std::uint32_t>(type.quantities.size()),
                                       static_cast<std::uint32_t>(count), 0, temp_C, volume_L, numbers.pH,
                                       numbers.ionic_strength, levels, names, molalities, activities}});
  }
  [[nodiscard]] const bw_view* get() const { return view_; }

 private:
  template <class T>
  const T* keep(const std::vector<T>& values) {
    if (values.empty()) return nullptr;
    return kept_.emplace_back(std::make_unique<ReadOnlyBytes>(std::as_bytes(std::span(values))))
        ->template as<T>();
  }
  std::vector<std::unique_ptr<ReadOnlyBytes>> kept_;
  const bw_view* view_ = nullptr;
};

std::vector<View> views_of(const bath::BathType& type) {
  constexpr double huge = 1e12, none = bath::not_given;
  std::vector<View> views;
  views.emplace_back("usual levels", type, View::Numbers{10, 1, 5, 3});
  views.emplace_back("zero levels", type, View::Numbers{0, 0, 7, 0});
  views.emplace_back("huge levels", type, View::Numbers{huge, huge, 14, huge});
  views.emplace_back("unknown levels", type, View::Numbers{none, 1, 5, 3});
  views.emplace_back("an unsolved bath", type, View::Numbers{10, none, none, none, false});
  return views;
}

struct Called {
  bw_status status = BW_REFUSED;
  std::vector<double> values;
  bool threw = false, guards_hold = true;
  double seconds = 0;

  /// The same status and, with BW_OK, the same bits.
  [[nodiscard]] bool same_as(const Called& other) const {
    return status == other.status && threw == other.threw &&
           (status != BW_OK ||
            std::memcmp(values.data(), other.values.data(), values.size() * sizeof(double)) == 0);
  }
};

Called call(const Function& function, const View& view) {
  Called called;
  GuardedNumbers numbers(function.outputs);
  const double begun_s = thread_time_s();
  try {
    called.status = function.call(view.get(), numbers.first());
  } catch (...) {
    called.threw = true;
  }
  called.seconds = thread_time_s() - begun_s;
  called.values = numbers.values();
  called.guards_hold = numbers.guards_hold();
  return called;
}

std::optional<Problem> fault_of(const Called& called, const std::string& where) {
  if (called.threw) return fault(where, "let out an exception", "a status (rule R1)");
  if (!called.guards_hold) return fault(where, "wrote outside its result", "at most the numbers asked for");
  if (called.status != BW_OK && called.status != BW_NOT_KNOWN && called.status != BW_OUT_OF_RANGE)
    return fault(where, "gave status " + std::to_string(called.status),
                 "BW_OK, BW_NOT_KNOWN or BW_OUT_OF_RANGE");
  if (called.status == BW_OK &&
      !std::ranges::all_of(called.values, [](double v) { return std::isfinite(v); }))
    return fault(where, "gave no finite number with BW_OK",
                 "a finite number, BW_NOT_KNOWN or BW_OUT_OF_RANGE");
  return {};
}

/// What four threads get that call every function with every view, over and over, against `first`; functions
/// in the order of `functions`, true where an answer differs.
std::vector<bool> differs_in_threads(const std::vector<Function>& functions, const std::vector<View>& views,
                                     const std::vector<std::vector<Called>>& first) {
  constexpr int threads = 4, repeats = 50;
  std::vector<std::vector<char>> differs(threads, std::vector<char>(functions.size()));
  std::vector<std::thread> running;
  for (auto& mine : differs)
    running.emplace_back([&] {
      for (int repeat = 0; repeat < repeats; ++repeat)
        for (std::size_t f = 0; f < functions.size(); ++f)
          for (std::size_t v = 0; v < views.size(); ++v)
            if (!call(functions[f], views[v]).same_as(first[f][v])) mine[f] = 1;
    });
  for (std::thread& thread : running) thread.join();
  std::vector<bool> any(functions.size());
  for (const auto& mine : differs)
    for (std::size_t f = 0; f < functions.size(); ++f) any[f] = any[f] || mine[f];
  return any;
}

}  // namespace

std::vector<Check> exercise_entry(Entry entry, const std::vector<const bw_bath_type*>& types,
                                  const std::string& name, const Announce& announce) {
  Notes notes;
  const bw_host host = host_for(notes);
  const auto count = static_cast<std::uint32_t>(types.size());
  const auto same_types = [&](std::string check, const bw_host& given) {
    Check made{std::move(check), {}};
    for (std::uint32_t i = 0; i < count; ++i)
      if (const Answer answer = ask(entry, given, i); answer.status != BW_OK || answer.type != types[i])
        made.problems.push_back(fault(
            name,
            "bw_entry_1 " + described(answer) + (answer.type == types[i] ? "" : " and another bath type"),
            "the bath type it gave before"));
    return made;
  };

  std::vector<Check> checks;
  announce("in bw_entry_1, called again");
  checks.push_back(same_types("entry: gives the same bath type twice", host));
  announce("in bw_entry_1, past the end");
  Check& end = checks.emplace_back(Check{"entry: past the end it gives BW_END", {}});
  for (const std::uint32_t index : {count, count + 1, UINT32_MAX})
    if (const Answer answer = ask(entry, host, index); answer.status != BW_END)
      end.problems.push_back(
          fault(name, "bw_entry_1 " + described(answer) + " past the end of its list", "BW_END"));
  announce("in bw_entry_1, with a host of version 1.0");
  checks.push_back(
      same_types("entry: works with a host of version 1.0", OtherHost(host, first_host_size).get()));
  announce("in bw_entry_1, with a host of a later version");
  constexpr std::size_t later = sizeof(bw_host) + 64;
  checks.push_back(same_types("entry: works with a host of a later version", OtherHost(host, later).get()));
  return checks;
}

std::vector<Check> exercise_functions(const bw_bath_type& stated, const bath::BathType& type,
                                      const std::string& name, const Announce& announce) {
  const std::vector<Function> functions = functions_of(stated, type);
  const std::vector<View> views = views_of(type);
  Check answers{"functions: give a status and finite numbers, inside their buffer", {}};
  Check repeats{"functions: give the same bits twice", {}};
  Check threads{"functions: give the same bits from four threads at once", {}};
  Check times{"functions: are back within 2 ms", {}};

  std::vector<std::vector<Called>> first(functions.size());
  for (std::size_t f = 0; f < functions.size(); ++f) {
    double longest_s = 0;
    bool same = true;
    std::optional<Problem> wrong;
    for (const View& view : views) {
      const std::string during = "in " + functions[f].name + " (" + view.name + ')';
      announce(during);
      const Called& once = first[f].emplace_back(call(functions[f], view));
      const Called again = call(functions[f], view);
      longest_s =
          std::max(longest_s, std::min(once.seconds, again.seconds));  // the first pays for page faults
      same = same && once.same_as(again);
      if (!wrong) wrong = fault_of(once, name + ": " + functions[f].name + " (" + view.name + ')');
    }
    const std::string where = name + ": " + functions[f].name;
    if (wrong) answers.problems.push_back(*wrong);
    if (!same) repeats.problems.push_back(fault(where, "gave other bits the second time", "the same bits"));
    if (longest_s > longest_call_s)
      times.problems.push_back(
          fault(where, "took " + std::to_string(longest_s * 1e3) + " ms", "at most 2 ms"));
  }
  if (answers.problems.empty() && repeats.problems.empty() && times.problems.empty()) {
    announce("in its functions, called from four threads at once");
    const std::vector<bool> differs = differs_in_threads(functions, views, first);
    for (std::size_t f = 0; f < functions.size(); ++f)
      if (differs[f])
        threads.problems.push_back(fault(name + ": " + functions[f].name,
                                         "gave other bits from four threads at once", "the same bits"));
  }
  return {answers, repeats, times, threads};
}

}  // namespace bathwright::plugin_host
