#include "station/pages/barcode.h"

#include <zint.h>

#include <memory>

namespace probewright::pages {
namespace {

struct Delete {
  void operator()(zint_symbol* symbol) const { ZBarcode_Delete(symbol); }
};
using Symbol = std::unique_ptr<zint_symbol, Delete>;

Modules modules_of(const zint_symbol& symbol) {
  Modules modules{symbol.width, symbol.rows, {}};
  modules.black.reserve(static_cast<std::size_t>(symbol.width * symbol.rows));
  for (int row = 0; row < symbol.rows; ++row)
    for (int column = 0; column < symbol.width; ++column)
      modules.black.push_back(((symbol.encoded_data[row][column / 8] >> (column % 8)) & 1) != 0);
  return modules;
}

Result<Modules> encoded(Symbol symbol, const std::string& text) {
  if (symbol == nullptr) return Problem{"code_not_made", "", {{"text", text}, {"reason", "no memory"}}};
  symbol->warn_level = WARN_FAIL_ALL;  // a code that is not quite right is not right
  const auto* bytes = reinterpret_cast<const unsigned char*>(text.data());
  if (ZBarcode_Encode(symbol.get(), bytes, static_cast<int>(text.size())) != 0)
    return Problem{"code_not_made", "", {{"text", text}, {"reason", symbol->errtxt}}};
  return modules_of(*symbol);
}

}  // namespace

Result<Modules> gs1_data_matrix(const std::string& elements_in_brackets) {
  Symbol symbol{ZBarcode_Create()};
  if (symbol != nullptr) {
    symbol->symbology = BARCODE_DATAMATRIX;
    symbol->input_mode = GS1_MODE;
    symbol->option_3 = DM_SQUARE;
  }
  return encoded(std::move(symbol), elements_in_brackets);
}

Result<Modules> code_128(const std::string& text) {
  Symbol symbol{ZBarcode_Create()};
  if (symbol != nullptr) {
    symbol->symbology = BARCODE_CODE128;
    symbol->input_mode = DATA_MODE;
  }
  return encoded(std::move(symbol), text);
}

}  // namespace probewright::pages
