/* The parts of the pulse box that know no hardware, as a program: one command a line on standard input, one answer a line. */
#include <inttypes.h>
#include <stdio.h>

#include "box-input.h"
#include "box-sentence.h"

int main(void) {
  char kind;
  uint32_t a, b, c;
  volatile box_edges edges = {0, 0, 0};
  box_contact contact = {0, 0, 0, 0, 0};
  while (scanf(" %c %" SCNu32 " %" SCNu32 " %" SCNu32, &kind, &a, &b, &c) == 4) {
    char text[BOX_SENTENCE_MAX];
    uint8_t length = 0;
    switch (kind) {
      case 'W': length = box_wheel(text, (uint8_t)a, b, c); break;
      case 'B': length = box_button(text, (uint8_t)a, b, c); break;
      case 'T': length = box_pps(text, a); break;
      case 'E': /* an edge at a */
        box_take_edge(&edges, a);
        printf("%" PRIu32 " %" PRIu32 "\n", edges.count, edges.us);
        continue;
      case 'C': /* a look at the contact: closed a, at b */
        box_look(&contact, (uint8_t)a, b);
        printf("%" PRIu32 " %" PRIu32 "\n", contact.presses, contact.us);
        continue;
      case 'U': /* overflows a, ticks b, pending c */
        printf("%" PRIu32 "\n", box_micros(a, (uint16_t)b, (uint8_t)c));
        continue;
      default: return 1;
    }
    if (length > BOX_SENTENCE_MAX) return 2;
    fwrite(text, 1, length, stdout);
  }
  return 0;
}
