#pragma once
// A scenario: a study with edits, beside the baseline that it came from (MODEL.md, section 7).
#include "numerics/strict.hpp"

#include <cstdint>
#include <memory>
#include <vector>

#include "information/knowledge.hpp"

namespace folkmote {

class Scenario {
 public:
  explicit Scenario(std::shared_ptr<const Study> baseline);

  const std::shared_ptr<const Study>& baseline() const { return baseline_; }
  const Study& edited() const { return edited_; }

  /// The beliefs that hold under the scenario, given those of the baseline.
  Beliefs apply(Beliefs beliefs) const;

  // Edits, in order. Each throws BadData or BadArgument and leaves the scenario as it was.
  void add_links(const Table& links, bool mutual);
  /// nullptr: every link.
  void cut_links(const Table* links, bool mutual);
  void thin_links(double share, std::uint64_t seed);
  void rewire_links(double share, std::uint64_t seed);
  /// nullptr: everyone.
  void broadcast(const Table* audience, double precision);
  void gathering(const Table* audience);
  void shift_cost(const Table* audience, double by);
  /// A benefit below 0 is found where the payoff is known: when the scenario is solved.
  void shift_benefit(const Table* audience, double by);
  void set_beliefs(Parameter parameter, Spread values);
  void forward_reports(int hops);

  /// Digest of baseline, edits and their result.
  std::uint64_t digest() const;

 private:
  struct Override {
    Parameter parameter;
    Spread values;
  };

  std::shared_ptr<const Study> baseline_;
  Study edited_;
  std::vector<Override> overrides_;
};

}  // namespace folkmote
