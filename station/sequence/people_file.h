#pragma once
#include <string>
#include <string_view>
#include <vector>

#include "station/base/result.h"

namespace probewright::sequence {

/// What somebody may do; who may do what stands in the floor's rules.
enum class Role { operating, engineering, quality, auditing, steward };
std::string_view slug(Role role);  ///< "operator", "engineer", "quality", "auditor", "steward"
std::string known_roles();         ///< the same words in a row, for messages

struct Person {
  std::string name;
  Role role = Role::operating;
  std::string badge;  ///< what a scanner reads from the badge; it identifies and proves nothing
  bool operator==(const Person&) const = default;
};

/// Who works at a station. Names and badges are there once each. Plain values; any thread.
struct PeopleFile {
  std::string name;
  int revision = 0;
  std::vector<Person> people;

  /// The person with this badge, or nullptr.
  const Person* by_badge(std::string_view badge) const;
};

/// Reads a people document strictly; all faults at once. Beyond the YAML: people_name_twice, people_badge_twice,
/// people_badge (4 to 40 capitals, digits and hyphens, not like a lot card), people_role, people_none.
ResultOrFaults<PeopleFile> read_people_file(std::string_view text, std::string_view file);

}  // namespace probewright::sequence
