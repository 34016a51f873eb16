#include "numerics/strict.hpp"

#include <algorithm>

#include "guard.hpp"
#include "handles.hpp"
#include "turnout/sensitivity_tables.hpp"

using folkmote::guard;
using folkmote::needed;
using folkmote::Sensitive;

namespace {

folkmote::Execution execution_of(const folkmote_options* options) {
  return options == nullptr ? folkmote::Execution{} : options->execution;
}

/// The parameters asked for; all of them when none is named.
std::vector<Sensitive> read_parameters(int64_t count, const int* parameters) {
  if (count < 0) {
    throw folkmote::BadArgument("parameter_count is " + std::to_string(count) + "; it must be at least 0.");
  }
  if (count == 0) {
    return {Sensitive::prior_mean,
            Sensitive::prior_precision,
            Sensitive::signal_precision,
            Sensitive::relay_precision,
            Sensitive::stake_sd,
            Sensitive::benefit,
            Sensitive::cost,
            Sensitive::broadcast_precision};
  }
  needed(parameters, "parameters");
  std::vector<Sensitive> asked;
  for (int64_t k = 0; k < count; ++k) {
    const auto parameter = static_cast<Sensitive>(parameters[k]);
    const char* const name = folkmote::sensitive_name(parameter);
    if (std::find(asked.begin(), asked.end(), parameter) != asked.end()) {
      throw folkmote::BadArgument(std::string(name) + " is asked for twice; name each parameter once.");
    }
    asked.push_back(parameter);
  }
  return asked;
}

}  // namespace

folkmote_status folkmote_sensitivity(const folkmote_equilibrium* equilibrium, int64_t parameter_count,
                                     const int* parameters, int level, const folkmote_options* options,
                                     folkmote_table** table, char* message) {
  return guard(message, [&] {
    *needed(table, "table") = nullptr;
    const std::vector<Sensitive> asked = read_parameters(parameter_count, parameters);
    if (level != FOLKMOTE_BY_COMMUNITY && level != FOLKMOTE_BY_MEMBER) {
      throw folkmote::BadArgument("there is no level " + std::to_string(level) + "; see folkmote_level.");
    }
    const folkmote::Solution& solution = needed(equilibrium, "equilibrium")->solution;
    *table = new folkmote_table(level == FOLKMOTE_BY_MEMBER
                                    ? folkmote::member_sensitivity_table(solution, asked, execution_of(options))
                                    : folkmote::sensitivity_table(solution, asked, execution_of(options)));
  });
}

folkmote_status folkmote_link_sensitivity(const folkmote_equilibrium* equilibrium, const folkmote_options* options,
                                          folkmote_table** table, char* message) {
  return guard(message, [&] {
    *needed(table, "table") = nullptr;
    *table = new folkmote_table(
        folkmote::link_sensitivity_table(needed(equilibrium, "equilibrium")->solution, execution_of(options)));
  });
}
