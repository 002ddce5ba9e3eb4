#pragma once
#include <string>

#include "station/text/choices.h"
#include "station/text/console.h"
#include "station/text/page_maker.h"

namespace probewright::text {

struct LabelOptions {
  StationChoice choice;
  Build build;
  std::string serial;
  std::string folder = ".";
  std::string ledger;  ///< file; empty: the station's
  std::string kind;    ///< "pass", "fail": refuse where the verdict is another; empty: what fits the verdict
  std::string reason;  ///< of a reprint
  std::string who;     ///< the person who asks; empty: "station"
  LabelForm form;
};

/// `label`: the label of a serial's last production run, as PDF and PNG. The entry in the ledger comes first; without
/// it there are no files. `pages`: nullptr in a program that was built without pages. Exit status: 0 made, 2 refused, 3
/// could not do it.
int label(const LabelOptions& options, PageMaker* pages, Console& console);

}  // namespace probewright::text
