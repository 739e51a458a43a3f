/*
 * Sentences of the pulse box. Nothing here knows the hardware: it compiles for the microcontroller and for any computer.
 *
 *   $PEVLW,<channel>,<count>,<us>*hh    a wheel: its cumulative count stood at this value at that instant
 *   $PEVLB,<button>,<presses>,<us>*hh   a wired button: the instant of its newest press
 *   $PEVLT,<us>*hh                      the edge of the receiver's pulse per second
 *
 * Counts and microseconds are unsigned 32-bit and wrap. hh is the exclusive or of the characters between $ and *, two hex
 * digits. Every sentence ends with CR LF.
 */
#ifndef BOX_SENTENCE_H
#define BOX_SENTENCE_H

#include <stdint.h>

/* "$PEVLW,255,4294967295,4294967295*hh" CR LF is 37 characters. */
#define BOX_SENTENCE_MAX 37

/* Writes a number in decimal; returns where the next character goes. */
static inline char *box_put_number(char *out, uint32_t value) {
  char digits[10];
  uint8_t n = 0;
  do {
    digits[n++] = (char)('0' + value % 10);
    value /= 10;
  } while (value != 0);
  while (n > 0) *out++ = digits[--n];
  return out;
}

static inline char box_hex(uint8_t nibble) {
  return (char)(nibble < 10 ? '0' + nibble : 'A' + nibble - 10);
}

/* Closes the sentence that begins at `begin` with its checksum and line end; returns its length. */
static inline uint8_t box_close(char *begin, char *out) {
  uint8_t sum = 0;
  const char *c;
  for (c = begin + 1; c < out; c++) sum ^= (uint8_t)*c;
  *out++ = '*';
  *out++ = box_hex(sum >> 4);
  *out++ = box_hex(sum & 15);
  *out++ = '\r';
  *out++ = '\n';
  return (uint8_t)(out - begin);
}

static inline char *box_open(char *out, char kind) {
  *out++ = '$';
  *out++ = 'P';
  *out++ = 'E';
  *out++ = 'V';
  *out++ = 'L';
  *out++ = kind;
  *out++ = ',';
  return out;
}

/* All three need room for BOX_SENTENCE_MAX characters, write no closing zero, and return the length. */

static inline uint8_t box_counter(char *out, char kind, uint8_t which, uint32_t count, uint32_t us) {
  char *end = box_put_number(box_open(out, kind), which);
  *end++ = ',';
  end = box_put_number(end, count);
  *end++ = ',';
  return box_close(out, box_put_number(end, us));
}

static inline uint8_t box_wheel(char *out, uint8_t channel, uint32_t count, uint32_t us) {
  return box_counter(out, 'W', channel, count, us);
}

static inline uint8_t box_button(char *out, uint8_t button, uint32_t presses, uint32_t us) {
  return box_counter(out, 'B', button, presses, us);
}

static inline uint8_t box_pps(char *out, uint32_t us) {
  return box_close(out, box_put_number(box_open(out, 'T'), us));
}

#endif
