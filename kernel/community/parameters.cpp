#include "community/parameters.hpp"

#include <cmath>
#include <limits>
#include <string>

#include "community/columns.hpp"
#include "community/fault.hpp"

namespace folkmote {

namespace {

constexpr double infinity = std::numeric_limits<double>::infinity();
using Per = ParameterRule::Per;

constexpr ParameterRule rules[] = {
    {Parameter::prior_mean, "prior_mean", -infinity, infinity, true, true, Per::community},
    {Parameter::prior_precision, "prior_precision", 0.0, infinity, true, true, Per::community},
    {Parameter::signal_precision, "signal_precision", 0.0, infinity, false, true, Per::member},
    {Parameter::relay_precision, "relay_precision", 0.0, infinity, true, false, Per::member},
    {Parameter::stake_sd, "stake_sd", 0.0, infinity, false, true, Per::member},
    {Parameter::benefit, "benefit", 0.0, infinity, false, true, Per::member},
    {Parameter::cost, "cost", -infinity, infinity, true, true, Per::member},
    {Parameter::reach, "reach", 0.0, 1.0, false, false, Per::study},
};

bool inside(const ParameterRule& rule, double value) {
  if (std::isnan(value)) return false;
  const bool above = rule.low_open ? value > rule.low : value >= rule.low;
  const bool below = rule.high_open ? value < rule.high : value <= rule.high;
  return above && below;
}

std::string range_words(const ParameterRule& rule) {
  if (rule.low == -infinity) return "be finite";
  if (rule.high < infinity) return "lie in " + plain_number(rule.low) + " to " + plain_number(rule.high);
  return std::string(rule.low_open ? "be positive" : "be at least 0") +
         (rule.high_open ? " and finite" : "; infinite means exact");
}

}  // namespace

const ParameterRule& parameter_rule(int parameter) {
  for (const ParameterRule& rule : rules) {
    if (static_cast<int>(rule.parameter) == parameter) return rule;
  }
  throw BadArgument("there is no parameter number " + std::to_string(parameter) + "; see folkmote_parameter.");
}

void check_values(const ParameterRule& rule, const Spread& values) {
  if (values.empty()) throw BadArgument(std::string(rule.name) + " has no value; give at least one.");
  for (std::size_t k = 0; k < values.size(); ++k) {
    if (inside(rule, values[k])) continue;
    const std::string which =
        values.size() == 1 ? "" : " (value " + std::to_string(k + 1) + " of " + std::to_string(values.size()) + ")";
    throw BadArgument(std::string(rule.name) + which + " is " +
                      (std::isnan(values[k]) ? "missing" : plain_number(values[k])) + "; it must " + range_words(rule) +
                      ".");
  }
}

void check_length(const ParameterRule& rule, const Spread& values, const Study& study) {
  const std::size_t communities = study.communities.size();
  const std::size_t members = study.roster->members();
  const std::size_t count = values.size();
  if (count == 1 || (rule.finest != Per::study && count == communities) ||
      (rule.finest == Per::member && count == members)) {
    return;
  }
  std::string wanted = "1";
  if (rule.finest != Per::study) wanted += ", or one per community (" + std::to_string(communities) + ")";
  if (rule.finest == Per::member) wanted += ", or one per member (" + std::to_string(members) + ")";
  throw BadArgument(std::string(rule.name) + " has " + std::to_string(count) + " values; give " + wanted + ".");
}

double value_for(const Spread& values, const Study& study, int community, int position) {
  if (values.size() == 1) return values[0];
  if (values.size() == study.communities.size()) return values[community];
  return values[study.roster->row_of[community][position]];
}

}  // namespace folkmote
