#pragma once
#include <functional>
#include <memory>
#include <optional>
#include <string>
#include <string_view>
#include <vector>

#include "station/base/result.h"
#include "station/base/units.h"

namespace probewright::yaml {

/// Where something stands in a file, 1-based.
struct Place {
  int line = 0, column = 0;
};

/// Gathers every fault of one document, so that its writer hears of all of them at once.
class Faults {
 public:
  explicit Faults(std::string file) : file_(std::move(file)) {}
  void add(Place place, std::string_view id, std::initializer_list<std::pair<std::string, std::string>> arguments = {});
  /// The same for a problem that was found without knowing its place, such as one of a unit.
  void add(Place place, Problem problem);
  bool empty() const { return problems_.empty(); }
  /// Sorted by line and column.
  Problems take();
  /// "file:line:column"
  std::string at(Place place) const;

 private:
  std::string file_;
  std::vector<std::pair<Place, Problem>> problems_;
};

class Map;
class List;

/// One value of a document: scalar, map or list. A cheap handle; the document must outlive it.
/// Every reader tells `faults` what is wrong and returns nothing; reading then goes on with the next value.
class Value {
 public:
  Place place() const;
  bool is_map() const;
  bool is_list() const;
  bool is_scalar() const;
  /// The scalar as written.
  std::optional<std::string> text(Faults& faults) const;
  std::optional<double> number(Faults& faults) const;
  std::optional<long long> integer(Faults& faults) const;
  std::optional<bool> yes_no(Faults& faults) const;                             ///< yes, no, true, false
  std::optional<double> quantity(std::string_view unit, Faults& faults) const;  ///< "655.0 nm" in `unit`
  std::optional<Map> map(Faults& faults) const;
  std::optional<List> list(Faults& faults) const;

 private:
  friend class Document;
  friend class Map;
  friend class List;
  struct Node;
  explicit Value(const Node* node) : node_(node) {}
  std::string_view kind_in_words() const;
  void tell_wrong_kind(std::string_view wanted, Faults& faults) const;
  const Node* node_;
};

/// A map whose keys are read by name; `finish` reports every key that nobody asked for, with the nearest valid word.
/// Duplicate keys were already reported when the document was read.
class Map {
 public:
  Place place() const;
  /// The value of a key that must be there; a missing one is a fault (yaml_missing_key).
  std::optional<Value> need(std::string_view key, Faults& faults);
  /// The value of a key that may be left out.
  std::optional<Value> maybe(std::string_view key);
  /// All (key, value, place of the key) in file order, for maps whose keys are data; marks all as read.
  struct Item {
    std::string key;
    Place place;
    Value value;
  };
  std::vector<Item> items();
  /// Reports keys that were never asked for (yaml_unknown_key; yaml_unknown_key_near where a valid word is near).
  void finish(Faults& faults);

 private:
  friend class Value;
  explicit Map(const Value::Node* node) : node_(node) {}
  const Value::Node* node_;
  std::vector<std::string> asked_;
};

class List {
 public:
  std::vector<Value> items() const;

 private:
  friend class Value;
  explicit List(const Value::Node* node) : node_(node) {}
  const Value::Node* node_;
};

/// A whole YAML document, read strictly: one document a file, UTF-8, no aliases, anchors, tags or directives, no
/// duplicate keys, at most `max_bytes`, at most 64 levels deep.
class Document {
 public:
  static constexpr std::size_t max_bytes = 1u << 20;
  /// `file` names the text in faults. Syntax errors, duplicates, aliases, tags: all in `faults`; nothing if unusable.
  static std::optional<Document> read(std::string_view text, Faults& faults);
  Value root() const;

  Document(Document&&) noexcept;
  Document& operator=(Document&&) noexcept;
  ~Document();

 private:
  class Builder;
  explicit Document(std::unique_ptr<Value::Node> root);
  std::unique_ptr<Value::Node> root_;
};

/// The word of `words` nearest to `word` (edit distance at most a third of its length), or empty.
std::string nearest_word(std::string_view word, const std::vector<std::string>& words);

}  // namespace probewright::yaml
