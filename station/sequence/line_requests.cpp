#include <algorithm>
#include <boost/asio/co_spawn.hpp>

#include "station/sequence/device_settings.h"
#include "station/sequence/line.h"

// What people ask of the line, one request after the other.
namespace probewright::sequence {

void Line::request(LineRequest request) {
  asked_.push_back(std::move(request));
  if (!serving_) begin_serving();
}

void Line::begin_serving() {
  serving_ = true;
  asio::co_spawn(executor_, serve(), [this](const std::exception_ptr& error) {
    if (!error) return;
    serving_ = false;
    failed_(error);
  });
}

asio::awaitable<void> Line::take_up_the_floor() {
  if (recovered_) co_return;
  co_await floor_.recover();
  recovered_ = true;
}

asio::awaitable<void> Line::serve() {
  try {
    co_await take_up_the_floor();
  } catch (const ProblemError&) {
    // The ledger's trouble shows in every view; each request tries again and says so.
  }
  while (!asked_.empty()) {
    LineRequest request = std::move(asked_.front());
    asked_.pop_front();
    co_await answer(std::move(request));
  }
  serving_ = false;  // here, not when asio tells the end: a request in between would wait for ever
}

/// Does what was asked, and says in one sentence what came of it.
asio::awaitable<void> Line::answer(LineRequest request) {
  Answered answered;
  armed_nest_ = 0;
  try {
    co_await take_up_the_floor();
    Said said{std::string{}};
    if (auto* arm = std::get_if<ArmNest>(&request))
      said = co_await handle(*arm);
    else if (auto* stop = std::get_if<StopNest>(&request))
      said = co_await handle(*stop);
    else if (auto* scan = std::get_if<Scan>(&request))
      said = co_await handle(*scan);
    else if (std::holds_alternative<SignOut>(request))
      said = co_await handle(SignOut{});
    else
      said = co_await handle(CloseLot{});
    if (said)
      answered.words = *said;
    else
      answered.problem = said.error();
  } catch (const ProblemError& error) {
    answered.problem = error.problem();
  }
  answered.taken = !answered.problem;
  if (answered.problem) answered.words = answered.problem->what() + "; " + answered.problem->remedy();
  answered.nest = armed_nest_;
  scan_ = {scan_.number + 1, answered.taken, answered.words};
  hear(answered);
}

asio::awaitable<Line::Said> Line::handle(ArmNest request) {
  if (auto armed = arm(request); !armed) co_return armed.error();
  armed_nest_ = request.nest;
  co_return find(request.nest)->view().words;
}

asio::awaitable<Line::Said> Line::handle(StopNest request) {
  if (request.who.empty() && floor_.person()) request.who = floor_.person()->name;
  if (auto stopped = stop(request); !stopped) co_return stopped.error();
  co_return nest_name(request.nest) + " is stopped";
}

asio::awaitable<Line::Said> Line::handle(SignOut) {
  if (!floor_.person()) co_return Problem{"nobody_signed_in", "line"};
  const std::string name = floor_.person()->name;
  stop_all(name);
  if (auto gone = co_await floor_.sign_out(); !gone) co_return gone.error();
  co_return name + " is signed out";
}

asio::awaitable<Line::Said> Line::handle(CloseLot) {
  const std::string lot = floor_.lot();
  for (const Place& place : places_)
    if (!place.nest->serial().empty())
      co_return Problem{"nest_busy", nest_name(place.nest->view().nest), {{"serial", place.nest->serial()}}};
  if (auto closed = co_await floor_.close_lot(); !closed) co_return closed.error();
  co_return "lot " + lot + " is closed";
}

asio::awaitable<Line::Said> Line::handle(Scan scan) {
  auto meaning = meaning_of_scan(scan.text, configuration_);
  if (!meaning) co_return meaning.error();
  if (auto* person = std::get_if<Person>(&*meaning)) co_return co_await scanned(std::move(*person));
  if (auto* card = std::get_if<LotCard>(&*meaning)) co_return co_await scanned(std::move(*card));
  if (auto* choice = std::get_if<NestChoice>(&*meaning)) co_return co_await scanned(*choice);
  co_return co_await scanned(std::get<SerialScan>(std::move(*meaning)));
}

asio::awaitable<Line::Said> Line::scanned(Person person) {
  const std::string words = person.name + ", " + std::string{slug(person.role)} + ", is signed in";
  // Runs go on under the name of whoever began them; a new person takes over an idle line only.
  if (floor_.person() && floor_.person()->name != person.name)
    for (const Place& place : places_)
      if (!place.nest->serial().empty())
        co_return Problem{"sign_in_while_testing", "line", {{"person", floor_.person()->name}}};
  co_await floor_.sign_in(std::move(person));
  co_return words;
}

asio::awaitable<Line::Said> Line::scanned(LotCard card) {
  const std::string words = "lot " + card.lot + " is open: " + std::to_string(card.quantity) + " of " + card.model;
  if (auto opened = co_await floor_.open_lot(std::move(card)); !opened) co_return opened.error();
  co_return words;
}

asio::awaitable<Line::Said> Line::scanned(NestChoice choice) {
  chosen_nest_ = choice.nest;
  co_return "scan the probe for " + nest_name(choice.nest);
}

/// The chosen nest, or the first that is empty.
Result<Nest*> Line::nest_for(const std::string& serial) {
  for (const Place& place : places_) {
    if (place.nest->serial() == serial)
      return Problem{"serial_in_nest", nest_name(place.nest->view().nest), {{"serial", serial}}};
    if (place.nest->view().state == NestState::armed)
      return Problem{"other_probe_awaited", nest_name(place.nest->view().nest), {{"serial", place.nest->serial()}}};
  }
  if (chosen_nest_) return find(*chosen_nest_);
  for (const Place& place : places_)
    if (place.nest->view().state == NestState::empty) return place.nest.get();
  for (const Place& place : places_)
    if (place.nest->view().state == NestState::occupied) return Problem{"no_nest_empty", "line"};
  return Problem{"no_nest_free", "line"};
}

asio::awaitable<Line::Said> Line::scanned(SerialScan scan) {
  if (auto admitted = co_await floor_.admit(scan.serial); !admitted) co_return admitted.error();
  auto nest = nest_for(scan.serial);
  chosen_nest_.reset();  // a choice is for one scan
  if (!nest) co_return nest.error();
  ArmNest request;
  request.nest = (*nest)->view().nest;
  request.serial = scan.serial;
  request.purpose = Purpose::production;
  request.operator_name = floor_.person()->name;
  request.lot = floor_.lot();
  if (auto armed = (*nest)->arm(request); !armed) co_return armed.error();
  armed_nest_ = request.nest;
  co_return "put probe " + scan.serial + " into " + nest_name(request.nest);
}

}  // namespace probewright::sequence
