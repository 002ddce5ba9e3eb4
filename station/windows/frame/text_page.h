#pragma once
#include <QWidget>
#include <vector>

namespace probewright::windows {

class Look;

/// One part of a page to read.
struct Passage {
  QString heading;                                 ///< may be empty
  QString paragraph;                               ///< may be empty
  std::vector<std::pair<QString, QString>> pairs;  ///< what stands at the left, and what it means
};

/// A page of such parts, in a width that reads well.
QWidget* make_text_page(const Look& look, const std::vector<Passage>& passages);

}  // namespace probewright::windows
