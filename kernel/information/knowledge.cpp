#include "information/knowledge.hpp"

#include <cmath>
#include <limits>

#include "community/fault.hpp"
#include "community/hearing.hpp"
#include "information/two_sum.hpp"

namespace folkmote {

namespace {

bool has_signal_column(const Study& study) {
  // A column is given for every member or for none.
  return !std::isnan(study.communities.front().values.signal_precision.front());
}

/// beta_ij: what a report of an own signal of precision `signal` is worth after a relay of precision `relay`.
double report_precision(double signal, double relay) {
  if (std::isinf(relay)) return signal;
  return signal * (relay / (signal + relay));
}

double own_or(double own, double otherwise) { return std::isnan(own) ? otherwise : own; }

void add_reports(Knowledge& knowledge, const Study& study, const Beliefs& beliefs, int community) {
  std::vector<double> relay(knowledge.size);
  for (int i = 0; i < knowledge.size; ++i) relay[i] = value_for(beliefs.relay_precision, study, community, i);
  HeardSet heard(study.communities[community], std::move(relay));
  knowledge.start.reserve(knowledge.size + 1);
  knowledge.start.push_back(0);
  for (int i = 0; i < knowledge.size; ++i) {
    for (const Heard& h : heard.of(i)) {
      knowledge.speaker.push_back(h.speaker);
      knowledge.relay_precision.push_back(h.relay_precision);
      knowledge.relay_slope.push_back(h.relay_slope);
      knowledge.report_precision.push_back(report_precision(knowledge.signal_precision[h.speaker], h.relay_precision));
    }
    knowledge.start.push_back(static_cast<std::int64_t>(knowledge.speaker.size()));
  }
}

/// K_i, summed over speakers in increasing order with the own signal in its place, then over broadcasts: the order
/// in which shared information is summed too.
std::vector<TwoSum> held_information(const Knowledge& knowledge) {
  std::vector<TwoSum> held(knowledge.size);
  for (int i = 0; i < knowledge.size; ++i) {
    bool own_added = false;
    for (std::int64_t k = knowledge.start[i]; k < knowledge.start[i + 1]; ++k) {
      if (!own_added && knowledge.speaker[k] > i) {
        held[i].add(knowledge.signal_precision[i]);
        own_added = true;
      }
      held[i].add(knowledge.report_precision[k]);
    }
    if (!own_added) held[i].add(knowledge.signal_precision[i]);
  }
  for (const Broadcast& broadcast : knowledge.broadcasts) {
    for (int i : broadcast.audience) held[i].add(broadcast.precision);
  }
  return held;
}

}  // namespace

Spread& Beliefs::of(Parameter parameter) {
  switch (parameter) {
    case Parameter::prior_mean:
      return prior_mean;
    case Parameter::prior_precision:
      return prior_precision;
    case Parameter::signal_precision:
      return signal_precision;
    case Parameter::relay_precision:
      return relay_precision;
    case Parameter::stake_sd:
      return stake_sd;
    default:
      throw BadArgument("this parameter belongs to the payoff, not to beliefs.");
  }
}

void check_beliefs(const Study& study, const Beliefs& beliefs) {
  Beliefs copy = beliefs;
  for (int number = 1; number <= 5; ++number) {
    const ParameterRule& rule = parameter_rule(number);
    const Spread& values = copy.of(rule.parameter);
    if (values.empty()) {
      if (rule.parameter == Parameter::signal_precision && has_signal_column(study)) continue;
      throw BadArgument(std::string("beliefs: ") + rule.name + " is not set; give it a value.");
    }
    check_length(rule, values, study);
  }
}

Knowledge make_knowledge(const Study& study, const Beliefs& beliefs, int community) {
  const Community& source = study.communities[community];
  Knowledge knowledge;
  knowledge.size = source.size;
  knowledge.prior_mean = value_for(beliefs.prior_mean, study, community, 0);
  knowledge.prior_precision = value_for(beliefs.prior_precision, study, community, 0);
  for (int i = 0; i < source.size; ++i) {
    const double given = source.values.signal_precision[i];
    knowledge.signal_precision.push_back(std::isnan(given) ? value_for(beliefs.signal_precision, study, community, i)
                                                           : given);
    knowledge.stake_sd.push_back(own_or(source.values.stake_sd[i], value_for(beliefs.stake_sd, study, community, i)));
  }
  knowledge.broadcasts = source.broadcasts;
  add_reports(knowledge, study, beliefs, community);
  const double alpha = knowledge.prior_precision;
  for (const TwoSum& sum : held_information(knowledge)) {
    const double held = sum.value();
    const double sigma = knowledge.stake_sd[knowledge.held.size()];
    const double variance = held / (alpha * (alpha + held));
    knowledge.held.push_back(held);
    knowledge.posterior_precision.push_back(alpha + held);
    knowledge.estimate_variance.push_back(variance);
    knowledge.index_variance.push_back(variance + sigma * sigma);
  }
  return knowledge;
}

}  // namespace folkmote
