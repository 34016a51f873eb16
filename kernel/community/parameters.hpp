#pragma once
// The parameters of beliefs and payoffs: their numbers, names and ranges, and how values reach members.
#include "numerics/strict.hpp"

#include <vector>

#include "community/study.hpp"

namespace folkmote {

/// Numbers are those of the C interface and are never reused.
enum class Parameter : int {
  prior_mean = 1,
  prior_precision = 2,
  signal_precision = 3,
  relay_precision = 4,
  stake_sd = 5,
  benefit = 16,
  cost = 17,
  reach = 18,
};

struct ParameterRule {
  Parameter parameter;
  const char* name;
  double low;
  double high;
  bool low_open;
  bool high_open;
  enum class Per { study, community, member } finest;
};

/// The rule of a parameter; throws BadArgument for a number that names none.
const ParameterRule& parameter_rule(int parameter);

/// One value, one per community, or one per member; empty: not set.
using Spread = std::vector<double>;

/// Every value within the parameter's range, or BadArgument.
void check_values(const ParameterRule& rule, const Spread& values);

/// The number of values fits the study, or BadArgument.
void check_length(const ParameterRule& rule, const Spread& values, const Study& study);

/// The value for the member at `position` of `community`.
double value_for(const Spread& values, const Study& study, int community, int position);

}  // namespace folkmote
