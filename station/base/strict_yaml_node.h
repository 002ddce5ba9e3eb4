#pragma once
#include <map>
#include <memory>
#include <string>
#include <vector>

#include "station/base/strict_yaml.h"

namespace probewright::yaml {

/// One node of a document's tree. Only the files of the strict YAML reader include this.
struct Value::Node {
  enum class Kind {
    null,  ///< nothing was written
    scalar,
    list,
    map,
    refused  ///< an alias: its fault is told already, so its readers keep silent
  };
  struct Key {
    std::string text;
    Place place;
  };

  Kind kind = Kind::null;
  Place place;
  std::string text;                                       ///< of a scalar
  std::vector<std::unique_ptr<Node>> children;            ///< elements of a list; values of a map, in file order
  std::vector<Key> keys;                                  ///< of a map, beside children
  std::map<std::string, std::size_t, std::less<>> index;  ///< key to its place in children
};

}  // namespace probewright::yaml
