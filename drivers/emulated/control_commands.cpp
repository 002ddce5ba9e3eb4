#include "drivers/emulated/control_commands.h"

#include <array>
#include <vector>

#include "station/base/numbers.h"

namespace probewright::emulated {
namespace {

using Words = std::vector<std::string_view>;

Words words_of(std::string_view line) {
  Words words;
  while (true) {
    const auto first = line.find_first_not_of(" \t\r");
    if (first == std::string_view::npos) return words;
    const auto end = std::min(line.find_first_of(" \t\r", first), line.size());
    words.push_back(line.substr(first, end - first));
    line.remove_prefix(end);
  }
}

Problem malformed(std::string_view reason, std::string_view form) {
  return {"bench_command_malformed", "", {{"reason", std::string(reason)}, {"form", std::string(form)}}};
}

/// What is wrong in a command, thrown to obey() alone.
struct Refusal {
  Problem problem;
};

struct Command {
  std::string_view name;
  std::size_t least, most;  ///< words after the name
  std::string_view form;
  Result<void> (*run)(Hands&, const Words&, std::string_view form);
};

int nest_in(std::string_view word, std::string_view form) {
  const auto nest = parse_integer(word);
  if (!nest || *nest < 0 || *nest > 9999) throw Refusal{malformed("the nest is a number", form)};
  return static_cast<int>(*nest);
}

DeviceId device_in(std::string_view word) {
  const auto device = parse_device(word);
  if (!device) throw Refusal{Problem{"bench_no_such_device", "", {{"device", std::string(word)}}}};
  return *device;
}

std::uint64_t count_in(std::string_view word, std::string_view what, std::string_view form) {
  const auto count = parse_integer(word);
  if (!count || *count < 0) throw Refusal{malformed(std::string(what) + " is a whole number", form)};
  return static_cast<std::uint64_t>(*count);
}

Way way_in(std::string_view word, std::string_view form) {
  if (word == "to") return Way::to_device;
  if (word == "from") return Way::from_device;
  throw Refusal{malformed("the way of the bytes is \"to\" or \"from\" the device", form)};
}

std::vector<wire::FaultKind> kinds_in(std::string_view word, std::string_view form) {
  if (word == "lose") return {wire::FaultKind::lose};
  if (word == "change") return {wire::FaultKind::change};
  if (word == "double") return {wire::FaultKind::twice};
  if (word == "any") return {wire::FaultKind::lose, wire::FaultKind::change, wire::FaultKind::twice};
  throw Refusal{malformed("what happens to a byte is lose, change, double or any", form)};
}

PlantedFault probe_fault_in(std::string_view slug, std::string_view severity_word, std::string_view form) {
  const auto fault = parse_fault(slug);
  if (!fault) {
    const std::string word(slug.substr(0, 40));
    throw Refusal{Problem{"bench_unknown_fault", "", {{"fault", word}, {"faults", known_faults()}}}};
  }
  const auto severity = parse_double(severity_word);
  if (!severity || !(*severity > 0.0 && *severity <= 1.0)) {
    throw Refusal{malformed("a severity is a number above 0, at most 1", form)};
  }
  return {*fault, *severity};
}

Result<void> seat(Hands& hands, const Words& words, std::string_view form) {
  const int nest = nest_in(words[1], form);
  const bool names_model = words.size() > 3 && words[3] != "fault";
  const auto model = names_model ? std::optional{words[3]} : model_of_serial(words[2]);
  if (!model) return malformed("the serial does not tell the model", form);
  const std::size_t rest = names_model ? 4 : 3;
  if (words.size() == rest) return hands.seat(nest, words[2], *model);
  if (words[rest] != "fault" || words.size() != rest + 3) {
    return malformed("after the probe only \"fault\", its name and its severity may follow", form);
  }
  return hands.seat(nest, words[2], *model, probe_fault_in(words[rest + 1], words[rest + 2], form));
}

Result<void> remove(Hands& hands, const Words& words, std::string_view form) {
  return hands.remove(nest_in(words[1], form));
}

Result<void> lid(Hands& hands, const Words& words, std::string_view form) {
  const int nest = nest_in(words[1], form);
  if (words[2] != "open" && words[2] != "closed") return malformed("a lid is open or closed", form);
  return hands.lid(nest, words[2] == "open");
}

Result<void> room(Hands& hands, const Words& words, std::string_view form) {
  const auto degC = parse_double(words[1]);
  if (!degC || *degC < -20.0 || *degC > 80.0) return malformed("a room has -20 to 80 degC", form);
  hands.room(*degC);
  return {};
}

Result<void> pull(Hands& hands, const Words& words, std::string_view) { return hands.pull(device_in(words[1])); }
Result<void> plug(Hands& hands, const Words& words, std::string_view) { return hands.plug(device_in(words[1])); }
Result<void> restart(Hands& hands, const Words& words, std::string_view) { return hands.restart(device_in(words[1])); }
Result<void> heal(Hands& hands, const Words& words, std::string_view) { return hands.heal(device_in(words[1])); }

Result<void> fault(Hands& hands, const Words& words, std::string_view form) {
  const DeviceId device = device_in(words[1]);
  const Way way = way_in(words[2], form);
  const auto kinds = kinds_in(words[3], form);
  if (words[4] == "at") {
    if (kinds.size() != 1 || words.size() != 6) return malformed("one byte is lost, changed or doubled", form);
    return hands.spoil(device, SpoiltByte{way, count_in(words[5], "the byte", form), kinds.front()});
  }
  if (words[4] != "rate") return malformed("a fault comes \"at\" a byte or at a \"rate\"", form);
  const auto per_byte = parse_double(words[5]);
  if (!per_byte || *per_byte < 0.0 || *per_byte > 1.0) return malformed("a rate per byte is 0 to 1", form);
  SpoiltShare share{way, *per_byte, kinds, 1};
  if (words.size() == 7) return malformed("the seed is missing", form);
  if (words.size() == 8) {
    if (words[6] != "seed") return malformed("after the rate only a seed may follow", form);
    share.seed = count_in(words[7], "the seed", form);
  }
  return hands.spoil(device, share);
}

/// What follows is one entry of a scenario's list, word for word.
Result<void> cause(Hands& hands, std::string_view line) {
  const auto fault = read_scenario_fault(line.substr(line.find("cause") + 5));
  if (!fault) return fault.error().front();
  return hands.cause(*fault);
}

Result<void> mend(Hands& hands, const Words&, std::string_view) {
  hands.mend();
  return {};
}

constexpr std::array commands{
    Command{"seat", 2, 6, "seat 1 AQ20-048-00001 AQ-20 fault secondary_emission 0.5", seat},
    Command{"remove", 1, 1, "remove 1", remove},
    Command{"lid", 2, 2, "lid 1 open", lid},
    Command{"room", 1, 1, "room 25.0", room},
    Command{"pull", 1, 1, "pull nest1-adapter", pull},
    Command{"plug", 1, 1, "plug nest1-adapter", plug},
    Command{"restart", 1, 1, "restart nest1-phantom", restart},
    Command{"fault", 5, 7, "fault nest1-adapter from lose at 1000", fault},
    Command{"heal", 1, 1, "heal nest1-adapter", heal},
    Command{"mend", 0, 0, "mend", mend},
};

Result<void> carry_out(Hands& hands, const Words& words) {
  if (words.empty()) return malformed("the line is empty", "seat 1 AQ20-048-00001");
  for (const Command& command : commands) {
    if (command.name != words[0]) continue;
    const std::size_t given = words.size() - 1;
    if (given < command.least || given > command.most) {
      return malformed(given < command.least ? "a word is missing" : "there is a word too many", command.form);
    }
    return command.run(hands, words, command.form);
  }
  return malformed("\"" + std::string(words[0].substr(0, 40)) + "\" is none", "seat 1 AQ20-048-00001");
}

std::string sentence(const Problem& problem) {
  std::string text = problem.text();
  for (char& c : text) {
    if (static_cast<unsigned char>(c) < 0x20 || c == 0x7f) c = ' ';
  }
  return text;
}

}  // namespace

std::string obey(Hands& hands, std::string_view line) {
  try {
    const Words words = words_of(line);
    const bool causes = !words.empty() && words[0] == "cause";
    const auto done = causes ? cause(hands, line) : carry_out(hands, words);
    return done ? "ok" : sentence(done.error());
  } catch (const Refusal& refusal) {
    return sentence(refusal.problem);
  }
}

}  // namespace probewright::emulated
