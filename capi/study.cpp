#include "numerics/strict.hpp"

#include <memory>
#include <utility>

#include "guard.hpp"
#include "handles.hpp"

using folkmote::guard;
using folkmote::needed;

namespace {

const folkmote::Table* table_or_none(const folkmote_table* table) { return table == nullptr ? nullptr : &table->table; }

/// Edits a copy and then puts it in place: an edit that fails half-way, for want of memory, leaves the scenario as it
/// was.
template <class Edit>
void edit_whole(folkmote_scenario* scenario, const Edit& edit) {
  folkmote::Scenario edited = needed(scenario, "scenario")->scenario;
  edit(edited);
  scenario->scenario = std::move(edited);
}

}  // namespace

folkmote_status folkmote_study_create(const folkmote_table* members, const folkmote_table* links,
                                      const folkmote_table* broadcasts, const folkmote_table* gatherings,
                                      const folkmote_table* communities, int mutual, folkmote_study** study,
                                      char* message) {
  return guard(message, [&] {
    *needed(study, "study") = nullptr;
    const folkmote::StudyTables tables{needed(members, "members")->table, table_or_none(links),
                                       table_or_none(broadcasts),         table_or_none(gatherings),
                                       table_or_none(communities),        mutual != 0};
    *study = new folkmote_study(std::make_shared<const folkmote::Study>(folkmote::make_study(tables)));
  });
}

void folkmote_study_destroy(folkmote_study* study) { delete study; }

folkmote_status folkmote_study_summary(const folkmote_study* study, folkmote_table** table, char* message) {
  return guard(message, [&] {
    *needed(table, "table") = nullptr;
    *table = new folkmote_table(folkmote::summarise(*needed(study, "study")->study));
  });
}

uint64_t folkmote_study_digest(const folkmote_study* study) {
  return study == nullptr ? 0 : folkmote::guard_digest([&] { return study->study->digest(); });
}

folkmote_status folkmote_scenario_create(const folkmote_study* study, folkmote_scenario** scenario, char* message) {
  return guard(message, [&] {
    *needed(scenario, "scenario") = nullptr;
    *scenario = new folkmote_scenario(needed(study, "study")->study);
  });
}

void folkmote_scenario_destroy(folkmote_scenario* scenario) { delete scenario; }

folkmote_status folkmote_scenario_add_links(folkmote_scenario* scenario, const folkmote_table* links, int mutual,
                                            char* message) {
  return guard(message, [&] {
    edit_whole(scenario, [&](auto& edited) { edited.add_links(needed(links, "links")->table, mutual != 0); });
  });
}

folkmote_status folkmote_scenario_cut_links(folkmote_scenario* scenario, const folkmote_table* links, int mutual,
                                            char* message) {
  return guard(message, [&] {
    edit_whole(scenario, [&](auto& edited) { edited.cut_links(table_or_none(links), mutual != 0); });
  });
}

folkmote_status folkmote_scenario_thin_links(folkmote_scenario* scenario, double share, uint64_t seed, char* message) {
  return guard(message, [&] { edit_whole(scenario, [&](auto& edited) { edited.thin_links(share, seed); }); });
}

folkmote_status folkmote_scenario_rewire_links(folkmote_scenario* scenario, double share, uint64_t seed,
                                               char* message) {
  return guard(message, [&] { edit_whole(scenario, [&](auto& edited) { edited.rewire_links(share, seed); }); });
}

folkmote_status folkmote_scenario_broadcast(folkmote_scenario* scenario, const folkmote_table* audience,
                                            double precision, char* message) {
  return guard(message, [&] {
    edit_whole(scenario, [&](auto& edited) { edited.broadcast(table_or_none(audience), precision); });
  });
}

folkmote_status folkmote_scenario_gathering(folkmote_scenario* scenario, const folkmote_table* audience,
                                            char* message) {
  return guard(message,
               [&] { edit_whole(scenario, [&](auto& edited) { edited.gathering(table_or_none(audience)); }); });
}

folkmote_status folkmote_scenario_shift_cost(folkmote_scenario* scenario, const folkmote_table* audience, double by,
                                             char* message) {
  return guard(message,
               [&] { edit_whole(scenario, [&](auto& edited) { edited.shift_cost(table_or_none(audience), by); }); });
}

folkmote_status folkmote_scenario_shift_benefit(folkmote_scenario* scenario, const folkmote_table* audience, double by,
                                                char* message) {
  return guard(message,
               [&] { edit_whole(scenario, [&](auto& edited) { edited.shift_benefit(table_or_none(audience), by); }); });
}

folkmote_status folkmote_scenario_set_beliefs(folkmote_scenario* scenario, int parameter, int64_t count,
                                              const double* values, char* message) {
  return guard(message, [&] {
    const folkmote::ParameterRule& rule = folkmote::parameter_rule(parameter);
    edit_whole(scenario,
               [&](auto& edited) { edited.set_beliefs(rule.parameter, folkmote::read_spread(rule, count, values)); });
  });
}

folkmote_status folkmote_scenario_forward_reports(folkmote_scenario* scenario, int hops, char* message) {
  return guard(message, [&] { edit_whole(scenario, [&](auto& edited) { edited.forward_reports(hops); }); });
}

folkmote_status folkmote_scenario_study(const folkmote_scenario* scenario, folkmote_study** study, char* message) {
  return guard(message, [&] {
    *needed(study, "study") = nullptr;
    const folkmote::Study& edited = needed(scenario, "scenario")->scenario.edited();
    *study = new folkmote_study(std::make_shared<const folkmote::Study>(edited));
  });
}

uint64_t folkmote_scenario_digest(const folkmote_scenario* scenario) {
  return scenario == nullptr ? 0 : folkmote::guard_digest([&] { return scenario->scenario.digest(); });
}
