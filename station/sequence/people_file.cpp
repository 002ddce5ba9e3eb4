#include "station/sequence/people_file.h"

#include <algorithm>
#include <array>
#include <utility>

#include "station/base/strict_yaml.h"

namespace probewright::sequence {
namespace {

constexpr std::array role_words = std::to_array<std::pair<Role, std::string_view>>({
    {Role::operating, "operator"},
    {Role::engineering, "engineer"},
    {Role::quality, "quality"},
    {Role::auditing, "auditor"},
    {Role::steward, "steward"},
});

bool plain_badge(std::string_view badge) {
  return badge.size() >= 4 && badge.size() <= 40 && std::all_of(badge.begin(), badge.end(), [](char c) {
           return (c >= 'A' && c <= 'Z') || (c >= '0' && c <= '9') || c == '-';
         });
}

void read_role(const yaml::Value& value, Person& person, yaml::Faults& faults) {
  const auto word = value.text(faults);
  if (!word) return;
  for (const auto& [role, known] : role_words) {
    if (known != *word) continue;
    person.role = role;
    return;
  }
  faults.add(value.place(), "people_role", {{"role", *word}, {"roles", known_roles()}});
}

template <class Same>
bool any_person(const PeopleFile& file, Same same) {
  return std::any_of(file.people.begin(), file.people.end(), same);
}

void read_person(const yaml::Value& value, PeopleFile& file, yaml::Faults& faults) {
  auto map = value.map(faults);
  if (!map) return;
  Person person;
  if (auto name = map->need("name", faults)) {
    person.name = name->text(faults).value_or("");
    if (any_person(file, [&](const Person& other) { return other.name == person.name; }))
      faults.add(name->place(), "people_name_twice", {{"name", person.name}});
  }
  if (auto role = map->need("role", faults)) read_role(*role, person, faults);
  if (auto badge = map->need("badge", faults)) {
    person.badge = badge->text(faults).value_or("");
    if (!plain_badge(person.badge))
      faults.add(badge->place(), "people_badge");  // what was written is not told: a badge is never echoed
    else if (any_person(file, [&](const Person& other) { return other.badge == person.badge; }))
      faults.add(badge->place(), "people_badge_twice", {{"name", person.name}});
  }
  map->finish(faults);
  file.people.push_back(std::move(person));
}

}  // namespace

std::string_view slug(Role wanted) {
  for (const auto& [role, word] : role_words)
    if (role == wanted) return word;
  return "operator";
}

std::string known_roles() {
  std::string all;
  for (const auto& [role, word] : role_words) all += (all.empty() ? "" : ", ") + std::string{word};
  return all;
}

const Person* PeopleFile::by_badge(std::string_view badge) const {
  const auto person = std::find_if(people.begin(), people.end(), [&](const Person& p) { return p.badge == badge; });
  return person == people.end() ? nullptr : &*person;
}

ResultOrFaults<PeopleFile> read_people_file(std::string_view text, std::string_view file) {
  yaml::Faults faults{std::string{file}};
  PeopleFile people;
  auto document = yaml::Document::read(text, faults);
  if (!document) return faults.take();
  if (auto map = document->root().map(faults)) {
    if (auto name = map->need("people", faults)) people.name = name->text(faults).value_or("");
    if (auto revision = map->need("revision", faults))
      people.revision = static_cast<int>(revision->integer(faults).value_or(0));
    if (auto reason = map->maybe("reason")) static_cast<void>(reason->text(faults));
    if (auto persons = map->need("persons", faults)) {
      if (auto list = persons->list(faults))
        for (const yaml::Value& person : list->items()) read_person(person, people, faults);
      if (people.people.empty()) faults.add(persons->place(), "people_none");
    }
    map->finish(faults);
  }
  if (!faults.empty()) return faults.take();
  return people;
}

}  // namespace probewright::sequence
