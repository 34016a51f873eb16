#include "community/columns.hpp"
#include "guard.hpp"
#include "handles.hpp"

using folkmote::guard;
using folkmote::needed;

namespace folkmote {

Spread read_spread(const ParameterRule& rule, int64_t count, const double* values) {
  if (count < 1)
    throw BadArgument(std::string(rule.name) + " has " + std::to_string(count) + " values; give at least one.");
  needed(values, "values");
  Spread spread(values, values + count);
  check_values(rule, spread);
  return spread;
}

}  // namespace folkmote

folkmote_status folkmote_parameter_bounds(int parameter, double* low, double* high, int* low_open, int* high_open,
                                          char* message) {
  return guard(message, [&] {
    const folkmote::ParameterRule& rule = folkmote::parameter_rule(parameter);
    // All are checked before any is written: a failure leaves every output as it was.
    needed(low, "low");
    needed(high, "high");
    needed(low_open, "low_open");
    needed(high_open, "high_open");
    *low = rule.low;
    *high = rule.high;
    *low_open = rule.low_open;
    *high_open = rule.high_open;
  });
}

folkmote_status folkmote_beliefs_create(folkmote_beliefs** beliefs, char* message) {
  return guard(message, [&] {
    *needed(beliefs, "beliefs") = nullptr;
    *beliefs = new folkmote_beliefs;
  });
}

void folkmote_beliefs_destroy(folkmote_beliefs* beliefs) { delete beliefs; }

folkmote_status folkmote_beliefs_set(folkmote_beliefs* beliefs, int parameter, int64_t count, const double* values,
                                     char* message) {
  return guard(message, [&] {
    const folkmote::ParameterRule& rule = folkmote::parameter_rule(parameter);
    folkmote::Spread& place = needed(beliefs, "beliefs")->beliefs.of(rule.parameter);
    place = folkmote::read_spread(rule, count, values);
  });
}

folkmote_status folkmote_payoff_create(int kind, folkmote_payoff** payoff, char* message) {
  return guard(message, [&] {
    *needed(payoff, "payoff") = nullptr;
    if (kind != FOLKMOTE_SHARE_PAYOFF) {
      throw folkmote::BadArgument("there is no payoff of kind " + std::to_string(kind) + "; see folkmote_payoff_kind.");
    }
    *payoff = new folkmote_payoff;
  });
}

void folkmote_payoff_destroy(folkmote_payoff* payoff) { delete payoff; }

folkmote_status folkmote_payoff_set(folkmote_payoff* payoff, int parameter, int64_t count, const double* values,
                                    char* message) {
  return guard(message, [&] {
    const folkmote::ParameterRule& rule = folkmote::parameter_rule(parameter);
    folkmote::Spread& place = needed(payoff, "payoff")->payoff.of(rule.parameter);
    place = folkmote::read_spread(rule, count, values);
  });
}

namespace {

struct OptionRule {
  int option;
  const char* name;
  double low;
  double high;
  bool whole;
};

constexpr OptionRule option_rules[] = {
    {FOLKMOTE_TOLERANCE, "tolerance", 1e-13, 1.0, false},  {FOLKMOTE_SWEEPS, "sweeps", 1.0, 1e9, true},
    {FOLKMOTE_THREADS, "threads", 1.0, 1024.0, true},      {FOLKMOTE_COMMON_DRAWS, "common draws", 0.0, 1.0, true},
    {FOLKMOTE_OVER_STAKES, "over stakes", 0.0, 1.0, true}, {FOLKMOTE_CONTROL, "control", 0.0, 1.0, true},
};

const OptionRule& option_rule(int option) {
  for (const OptionRule& rule : option_rules) {
    if (rule.option == option) return rule;
  }
  throw folkmote::BadArgument("there is no option number " + std::to_string(option) + "; see folkmote_option.");
}

}  // namespace

folkmote_status folkmote_options_create(folkmote_options** options, char* message) {
  return guard(message, [&] {
    *needed(options, "options") = nullptr;
    *options = new folkmote_options;
  });
}

void folkmote_options_destroy(folkmote_options* options) { delete options; }

folkmote_status folkmote_options_set(folkmote_options* options, int option, double value, char* message) {
  return guard(message, [&] {
    const OptionRule& rule = option_rule(option);
    needed(options, "options");
    if (!(value >= rule.low && value <= rule.high) ||
        (rule.whole && value != static_cast<double>(static_cast<int64_t>(value)))) {
      throw folkmote::BadArgument(std::string(rule.name) + " is " + folkmote::plain_number(value) + "; it must be a " +
                                  (rule.whole ? "whole " : "") + "number from " + folkmote::plain_number(rule.low) +
                                  " to " + folkmote::plain_number(rule.high) + ".");
    }
    if (option == FOLKMOTE_TOLERANCE) options->rule.tolerance = value;
    if (option == FOLKMOTE_SWEEPS) options->rule.sweeps = static_cast<int64_t>(value);
    if (option == FOLKMOTE_THREADS) options->execution.threads = static_cast<int>(value);
    if (option == FOLKMOTE_COMMON_DRAWS) options->estimator.common_draws = value != 0.0;
    if (option == FOLKMOTE_OVER_STAKES) options->estimator.over_stakes = value != 0.0;
    if (option == FOLKMOTE_CONTROL) options->estimator.control = value != 0.0;
  });
}

folkmote_status folkmote_options_progress(folkmote_options* options, folkmote_progress callback, void* user,
                                          char* message) {
  return guard(message, [&] {
    needed(options, "options");
    if (callback == nullptr) {
      options->execution.progress = nullptr;
      return;
    }
    options->execution.progress = [callback, user](std::int64_t done, std::int64_t total) {
      return callback(done, total, user) != 0;
    };
  });
}
