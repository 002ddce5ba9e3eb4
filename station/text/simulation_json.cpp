#include "station/text/simulation_words.h"

namespace probewright::text {
namespace {

using namespace sequence::production;
using limits::statistics::exact_interval;
using limits::statistics::Interval;

Json json_of(const Interval& interval) {
  Json json = Json::array();
  json.add(interval.low).add(interval.high);
  return json;
}

/// {"count", "of", "share", "interval"}; the last two null where there is nothing to share.
Json share_of(long long count, long long of) {
  Json json = Json::object();
  json.set("count", count).set("of", of);
  const auto share = static_cast<double>(count) / static_cast<double>(of);
  json.set("share", of > 0 ? Json{share} : Json{});
  return json.set("interval", of > 0 ? json_of(exact_interval(count, of, simulation_confidence)) : Json{});
}

Json json_of_share(const Simulation& simulation, const SimulatedShare& share) {
  Json json = share_of(share.count(simulation.all), simulation.all.probes);
  const auto stations = over_stations(simulation, share);
  Json between = Json::object();
  between.set("least", stations.least).set("median", stations.median).set("most", stations.most);
  between.set("between_sd", stations.between_sd);
  between.set("mean_interval", stations.groups > 1 ? json_of(stations.mean) : Json{});
  return json.set("stations", std::move(between));
}

Json json_of(const Decisions& decisions) {
  Json json = Json::object();
  return json.set("passed", decisions.passed)
      .set("false_accepts", decisions.false_accepts)
      .set("false_rejects", decisions.false_rejects);
}

Json json_of(const ProbeTally& tally) {
  Json json = Json::object();
  return json.set("probes", tally.probes)
      .set("nonconforming", tally.nonconforming)
      .set("first", json_of(tally.first))
      .set("final", json_of(tally.final))
      .set("retested", tally.retested)
      .set("voids", tally.voids);
}

Json json_of(const CheckTally& check) {
  Json json = Json::object();
  return json.set("check", check.check)
      .set("nonconforming", check.nonconforming)
      .set("false_accepts", share_of(check.false_accepts, check.compared))
      .set("false_rejects", share_of(check.false_rejects, check.compared))
      .set("no_reading", check.no_reading);
}

Json json_of(const FaultTally& fault) {
  Json json = Json::object();
  return json.set("fault", fault.fault)
      .set("tally", json_of(fault.probes))
      .set("escapes", share_of(fault.probes.final.false_accepts, fault.probes.nonconforming));
}

Json json_of(const StationTally& station) {
  Json json = Json::object();
  return json.set("room_degC", station.room_degC).set("tally", json_of(station.probes));
}

template <class Item>
Json list_of(const std::vector<Item>& items) {
  Json json = Json::array();
  for (const Item& item : items) json.add(json_of(item));
  return json;
}

Json list_of(const std::vector<std::string>& items) {
  Json json = Json::array();
  for (const std::string& item : items) json.add(item);
  return json;
}

std::string_view slug(FaultMix::Kind kind) {
  return kind == FaultMix::Kind::none ? "none" : kind == FaultMix::Kind::lot ? "lot" : "rate";
}

Json json_of(const SimulationOptions& options) {
  Json faults = Json::object();
  faults.set("mix", slug(options.faults.kind));
  faults.set("rate", options.faults.kind == FaultMix::Kind::rate ? Json{options.faults.rate} : Json{});
  Json json = Json::object();
  return json.set("probes", options.probes)
      .set("stations", options.stations)
      .set("seed", static_cast<std::int64_t>(options.seed))
      .set("retest", options.retest)
      .set("faults", std::move(faults))
      .set("rooms_degC", json_of(Interval{options.coolest_degC, options.warmest_degC}));
}

}  // namespace

Json json_of(const SimulatedDocuments& documents, const Simulation& simulation) {
  Json shares = Json::object();
  for (const SimulatedShare& share : simulated_shares(simulation.options))
    shares.set(share.slug, json_of_share(simulation, share));
  Json json = Json::object();
  json.set("format", 1).set("estimate", true);
  json.set("model", documents.model.name).set("model_revision", documents.model.revision);
  json.set("sheet", documents.sheet.name).set("sheet_revision", documents.sheet.revision);
  json.set("asked", json_of(simulation.options)).set("stopped_early", simulation.stopped_early);
  json.set("confidence", simulation_confidence).set("all", json_of(simulation.all)).set("shares", std::move(shares));
  json.set("checks", list_of(simulation.checks)).set("checks_without_truth", list_of(simulation.untold));
  json.set("faults", list_of(simulation.faults)).set("stations", list_of(simulation.stations));
  json.set("first_void", simulation.first_void ? Json{simulation.first_void->text()} : Json{});
  return json.set("assumptions", list_of(simulation_assumptions(documents, simulation)));
}

}  // namespace probewright::text
