#pragma once
#include <memory>
#include <string>
#include <string_view>
#include <vector>

namespace probewright::text {

/// What a person or a keyboard-wedge scanner types, one line after the other, where the terminal does not edit itself.
class TypedLine {
 public:
  /// Takes bytes as the terminal sends them; gives the lines that are complete. Backspace takes back one character,
  /// Ctrl-U all of them; what keys like the arrows send is dropped.
  std::vector<std::string> feed(std::string_view bytes);
  /// What stands there unfinished.
  const std::string& text() const { return text_; }
  /// Ctrl-D on an empty line: no more will come.
  bool ended() const { return ended_; }

 private:
  bool in_sequence(char c);
  void back();
  std::string text_;
  enum class Escape { none, begun, inside } escape_ = Escape::none;
  bool ended_ = false;
};

/// The text as it may be shown: one that can still become the badge of somebody shows dots instead, since a badge that
/// is read off a screen can be copied.
std::string shown_typed(std::string_view text, const std::vector<std::string>& badges);

/// Takes the terminal's own editing and echo away as long as it lives; does nothing where standard input is none.
class OwnEcho {
 public:
  OwnEcho();
  ~OwnEcho();
  OwnEcho(const OwnEcho&) = delete;
  OwnEcho& operator=(const OwnEcho&) = delete;

 private:
  struct Before;
  std::unique_ptr<Before> before_;
};

}  // namespace probewright::text
