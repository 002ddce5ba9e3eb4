// How text becomes a tree: yaml-cpp's events, because its own node tree drops duplicate keys in silence.
#include <yaml-cpp/eventhandler.h>
#include <yaml-cpp/exceptions.h>
#include <yaml-cpp/parser.h>

#include <algorithm>
#include <istream>
#include <streambuf>

#include "station/base/strict_yaml.h"
#include "station/base/strict_yaml_node.h"
#include "station/base/utf8.h"

namespace probewright::yaml {
namespace {

constexpr std::size_t max_depth = 64;

/// Finds places in a text: yaml-cpp counts bytes from 0, people count characters from 1. Characters are counted once,
/// at the start: a file of one long line would otherwise be counted anew for each of its values.
class Places {
 public:
  explicit Places(std::string_view text) : text_(text), line_starts_{0}, characters_before_{0} {
    for (std::size_t at = 0; at < text.size(); ++at) {
      characters_before_.push_back(characters_before_.back() + static_cast<int>(count_characters(text.substr(at, 1))));
      if (text[at] == '\n') line_starts_.push_back(at + 1);
    }
  }

  /// The text from a mark on.
  std::string_view from(const YAML::Mark& mark) const { return text_.substr(offset_of(mark)); }

  Place of(const YAML::Mark& mark) const { return of_offset(offset_of(mark)); }

  Place of_offset(std::size_t offset) const {
    const auto after = std::upper_bound(line_starts_.begin(), line_starts_.end(), offset);
    const int column = 1 + characters_before_[offset] - characters_before_[*std::prev(after)];
    return {static_cast<int>(after - line_starts_.begin()), column};
  }

 private:
  std::size_t offset_of(const YAML::Mark& mark) const {
    const std::size_t line = std::min(static_cast<std::size_t>(std::max(mark.line, 0)), line_starts_.size() - 1);
    return std::min(line_starts_[line] + static_cast<std::size_t>(std::max(mark.column, 0)), text_.size());
  }

  std::string_view text_;
  std::vector<std::size_t> line_starts_;  ///< offsets
  std::vector<int> characters_before_;    ///< of each offset
};

/// Reads a text in place; std::istringstream would copy it.
class ViewBuffer : public std::streambuf {
 public:
  explicit ViewBuffer(std::string_view text) {
    char* const start = const_cast<char*>(text.data());  // a get area is never written
    setg(start, start, start + text.size());
  }
};

/// Offset of a directive (%) at the head of a document, or npos. yaml-cpp reads the number of %YAML by the locale of
/// the program, so "1.2" means twelve in German; a document of ours needs none.
std::size_t directive_at(std::string_view text) {
  for (std::size_t at = 0; at < text.size(); at = text.find('\n', at) + 1) {
    const std::string_view line = text.substr(at, text.find('\n', at) - at);
    const auto first = line.find_first_not_of(" \t\r");
    if (line.starts_with('%')) return at;
    if (first != std::string_view::npos && line[first] != '#') break;
    if (at + line.size() == text.size()) break;
  }
  return std::string_view::npos;
}

/// Whether the quotation mark at the front of `text` has its partner. yaml-cpp takes the end of the file for one,
/// so a file that was cut short inside a quoted value would pass for whole.
bool quote_is_closed(std::string_view text) {
  const char quote = text.front();
  for (std::size_t at = 1; at < text.size(); ++at) {
    if (quote == '"' && text[at] == '\\') {
      ++at;
    } else if (text[at] == quote) {
      const bool doubled = quote == '\'' && at + 1 < text.size() && text[at + 1] == quote;
      if (!doubled) return true;
      ++at;
    }
  }
  return false;
}

/// Thrown out of the events to end the reading of a text that is not worth going on with; the fault is told.
struct GivenUp {};

}  // namespace

/// Takes the events of one document and builds its tree; the faults that a reader cannot see later are told here.
class Document::Builder final : public YAML::EventHandler {
 public:
  using Node = Value::Node;
  Builder(const Places& places, Faults& faults) : places_(places), faults_(faults) {}

  std::unique_ptr<Node> take() { return std::move(root_); }

  void OnDocumentStart(const YAML::Mark& mark) override {
    if (documents_++ == 0) return;
    faults_.add(places_.of(mark), "yaml_several_documents");
    throw GivenUp{};
  }
  void OnDocumentEnd() override {}

  void OnNull(const YAML::Mark& mark, YAML::anchor_t anchor) override {
    refuse_extras(mark, {}, anchor);
    deliver(make(Node::Kind::null, mark));
  }
  void OnAlias(const YAML::Mark& mark, YAML::anchor_t) override {
    faults_.add(places_.of(mark), "yaml_alias");
    deliver(make(Node::Kind::refused, mark));
  }
  void OnScalar(const YAML::Mark& mark, const std::string& tag, YAML::anchor_t anchor,
                const std::string& value) override {
    refuse_extras(mark, tag, anchor);
    refuse_open_quote(mark);
    auto node = make(Node::Kind::scalar, mark);
    node->text = value;
    deliver(std::move(node));
  }
  void OnSequenceStart(const YAML::Mark& mark, const std::string& tag, YAML::anchor_t anchor,
                       YAML::EmitterStyle::value) override {
    open(Node::Kind::list, mark, tag, anchor);
  }
  void OnSequenceEnd() override { close(); }
  void OnMapStart(const YAML::Mark& mark, const std::string& tag, YAML::anchor_t anchor,
                  YAML::EmitterStyle::value) override {
    open(Node::Kind::map, mark, tag, anchor);
  }
  void OnMapEnd() override { close(); }

 private:
  /// A list or map whose end has not come. `key` waits for its value; `dropped` values go nowhere.
  struct Frame {
    std::unique_ptr<Node> node;
    std::optional<Node::Key> key;
    bool dropped = false;
  };

  std::unique_ptr<Node> make(Node::Kind kind, const YAML::Mark& mark) const {
    auto node = std::make_unique<Node>();
    node->kind = kind;
    node->place = places_.of(mark);
    return node;
  }

  void refuse_extras(const YAML::Mark& mark, const std::string& tag, YAML::anchor_t anchor) {
    // "?" stands for a plain value, "!" for a quoted one: neither was written.
    if (!tag.empty() && tag != "?" && tag != "!") faults_.add(places_.of(mark), "yaml_tag", {{"tag", tag}});
    if (anchor != YAML::NullAnchor) faults_.add(places_.of(mark), "yaml_anchor");
  }

  void refuse_open_quote(const YAML::Mark& mark) {
    const std::string_view text = places_.from(mark);
    if (!(text.starts_with('"') || text.starts_with('\'')) || quote_is_closed(text)) return;
    faults_.add(places_.of(mark), "yaml_syntax", {{"reason", "the quotation mark is never closed"}});
    throw GivenUp{};
  }

  void open(Node::Kind kind, const YAML::Mark& mark, const std::string& tag, YAML::anchor_t anchor) {
    refuse_extras(mark, tag, anchor);
    if (open_.size() >= max_depth) {
      faults_.add(places_.of(mark), "yaml_too_deep", {{"bound", std::to_string(max_depth)}});
      throw GivenUp{};
    }
    open_.push_back({make(kind, mark), {}, false});
  }
  void close() {
    auto node = std::move(open_.back().node);
    open_.pop_back();
    deliver(std::move(node));
  }

  /// Puts a finished node where it belongs: the root, an element, a key or the value of the key before it.
  void deliver(std::unique_ptr<Node> node) {
    if (open_.empty()) {
      root_ = std::move(node);
    } else if (Frame& frame = open_.back(); frame.node->kind == Node::Kind::list) {
      frame.node->children.push_back(std::move(node));
    } else if (!frame.key) {
      take_key(frame, *node);
    } else {
      take_value(frame, std::move(node));
    }
  }

  void take_key(Frame& frame, const Node& node) {
    frame.key = Node::Key{node.text, node.place};
    const auto first = frame.node->index.find(node.text);
    if (node.kind != Node::Kind::scalar) {
      if (node.kind != Node::Kind::refused) faults_.add(node.place, "yaml_key_not_text");
      frame.dropped = true;
    } else if (first != frame.node->index.end()) {
      const Place before = frame.node->keys[first->second].place;
      faults_.add(node.place, "yaml_duplicate_key", {{"key", node.text}, {"line", std::to_string(before.line)}});
      frame.dropped = true;
    }
  }

  void take_value(Frame& frame, std::unique_ptr<Node> node) {
    if (node->kind == Node::Kind::null) node->place = frame.key->place;  // what is not there has no place of its own
    if (!frame.dropped) {
      frame.node->index.emplace(frame.key->text, frame.node->children.size());
      frame.node->keys.push_back(*std::move(frame.key));
      frame.node->children.push_back(std::move(node));
    }
    frame.key.reset();
    frame.dropped = false;
  }

  const Places& places_;
  Faults& faults_;
  std::vector<Frame> open_;
  std::unique_ptr<Node> root_;
  int documents_ = 0;
};

std::optional<Document> Document::read(std::string_view text, Faults& faults) {
  if (text.size() > max_bytes) {
    faults.add({1, 1}, "file_too_large", {{"size", std::to_string(text.size())}, {"bound", std::to_string(max_bytes)}});
    return std::nullopt;
  }
  if (text.starts_with("\xEF\xBB\xBF")) text.remove_prefix(3);
  const Places places{text};
  const auto bad_utf8 = first_bad_utf8(text), control = first_control_character(text);
  if (bad_utf8 != std::string_view::npos) faults.add(places.of_offset(bad_utf8), "text_not_utf8");
  if (control != std::string_view::npos) faults.add(places.of_offset(control), "text_control_character");
  if (bad_utf8 != std::string_view::npos || control != std::string_view::npos) return std::nullopt;

  if (const auto directive = directive_at(text); directive != std::string_view::npos) {
    faults.add(places.of_offset(directive), "yaml_directive");
    return std::nullopt;
  }

  Builder builder{places, faults};
  try {
    ViewBuffer buffer{text};
    std::istream stream{&buffer};
    YAML::Parser parser{stream};
    while (parser.HandleNextDocument(builder)) {
    }
  } catch (const GivenUp&) {
    return std::nullopt;
  } catch (const YAML::Exception& error) {
    faults.add(places.of(error.mark), "yaml_syntax", {{"reason", error.msg}});
    return std::nullopt;
  }
  auto root = builder.take();
  if (root == nullptr || root->kind == Value::Node::Kind::null) {
    faults.add({1, 1}, "yaml_empty");
    return std::nullopt;
  }
  return Document{std::move(root)};
}

Value Document::root() const { return Value{root_.get()}; }

Document::Document(std::unique_ptr<Value::Node> root) : root_(std::move(root)) {}
Document::Document(Document&&) noexcept = default;
Document& Document::operator=(Document&&) noexcept = default;
Document::~Document() = default;

}  // namespace probewright::yaml
