// The same in C++20: the header needs no wrapping and a deleter may be one of its functions.
#include <folkmote.h>

#include <cstring>
#include <iostream>
#include <memory>

int main() {
  folkmote_table* made = nullptr;
  if (folkmote_table_create(0, &made, nullptr) != FOLKMOTE_OK) return 1;
  std::unique_ptr<folkmote_table, decltype(&folkmote_table_destroy)> table(made, folkmote_table_destroy);
  if (folkmote_live_handles() != 1) return 1;
  table.reset();
  if (folkmote_live_handles() != 0 || std::strcmp(folkmote_version(), FOLKMOTE_VERSION) != 0) return 1;
  std::cout << "folkmote " << folkmote_version() << '\n';
}
