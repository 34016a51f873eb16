/* The smallest program in C99 that shows that header and library belong together. */
#include <folkmote.h>
#include <stdio.h>
#include <string.h>

int main(void) {
  folkmote_table* table = NULL;
  char message[FOLKMOTE_MESSAGE_BYTES];
  if (strcmp(folkmote_version(), FOLKMOTE_VERSION) != 0) return 1;
  if (folkmote_table_create(0, &table, message) != FOLKMOTE_OK) return 1;
  folkmote_table_destroy(table);
  if (folkmote_live_handles() != 0) return 1;
  printf("folkmote %s\n", folkmote_version());
  return 0;
}
