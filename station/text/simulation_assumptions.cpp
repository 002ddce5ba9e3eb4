#include "station/base/numbers.h"
#include "station/text/simulation_words.h"

namespace probewright::text {
namespace {

using namespace sequence::production;

std::string faults_words(const FaultMix& mix) {
  switch (mix.kind) {
    case FaultMix::Kind::none:
      return "no probe has a planted fault: only parts spread";
    case FaultMix::Kind::lot:
      return "among every 48 probes each cause of fault stands once, in full severity, as in the demonstration's lot";
    case FaultMix::Kind::rate:
      return "each probe has a planted fault with probability " + shortest(mix.rate) +
             ": any of all alike, its severity even between 0 and 1 (a hard fault is there or not)";
  }
  return {};
}

std::string stations_words(const SimulationOptions& options) {
  return std::to_string(options.stations) +
         " stations of one nest, whose devices differ from their certificates by errors drawn for each station as the "
         "emulated bench draws them; each stands in a room of its own from " +
         shortest(options.coolest_degC) + " to " + shortest(options.warmest_degC) + " degC";
}

std::string retest_words(const SimulationOptions& options, const limits::Retest& retest) {
  if (!options.retest) return "each probe is tested once";
  return "a probe that fails is put in and tested again up to " + std::to_string(retest.tries) + " time(s), after " +
         shortest(retest.after_s) + " s, as the sheet allows; one pass counts";
}

std::string joined(const std::vector<std::string>& words) {
  std::string text;
  for (const std::string& word : words) text += (text.empty() ? "" : ", ") + word;
  return text;
}

}  // namespace

std::vector<std::string> simulation_assumptions(const SimulatedDocuments& documents, const Simulation& simulation) {
  std::vector<std::string> all{
      "probes are drawn from the spreads that the emulated bench assumes for the model; they are engineering "
      "assumptions, not data of a product",
      faults_words(simulation.options.faults),
      stations_words(simulation.options),
      "the devices' physics and noise are the emulated bench's; no byte is lost and nobody makes a mistake",
      retest_words(simulation.options, documents.sheet.retest),
      "a probe is nonconforming when a true value lies outside the sheet's limits (not the acceptance limits) for a "
      "judged check, or is none any more; true values are for a probe at 25 degC in its standard drive",
      "intervals are exact (Clopper and Pearson), 95 %, as if all probes were independent; probes of one station share "
      "its errors, which the intervals over stations take into account"};
  if (const auto& with = documents.model.saturation)
    all.push_back("the saturation error is modelled with the table " + with->table + " and the model's curve");
  if (!simulation.untold.empty())
    all.push_back("the bench knows no true value for " + joined(simulation.untold) +
                  ": these checks are judged, but make no probe nonconforming");
  return all;
}

}  // namespace probewright::text
