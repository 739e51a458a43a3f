/*
 * What the pulse box believes of its inputs: which edges are pulses, which contacts are presses, when to say so. Nothing here
 * knows the hardware. Instants are microseconds, unsigned 32-bit, and wrap: only their differences are used.
 */
#ifndef BOX_INPUT_H
#define BOX_INPUT_H

#include <stdint.h>

/*
 * Edges nearer than this to the last pulse are bounce or ignition noise. 250 us lets 4000 pulses a second pass: a ring of 48
 * teeth on a 2 m tyre gives 2160 at 90 m/s. Make it 20000 for a reed switch and one magnet.
 */
#ifndef BOX_MIN_PERIOD_US
#define BOX_MIN_PERIOD_US 250UL
#endif
/* A contact must hold this long to be a press, and stay open this long before the next. */
#define BOX_PRESS_US 5000UL
#define BOX_RELEASE_US 30000UL
/* 50 sentences a second while the count moves; one a second as a sign of life. */
#define BOX_MOVING_US 20000UL
#define BOX_ALIVE_US 1000000UL
/* A press is said three times, so that one lost line costs no touch. */
#define BOX_REPEATS 3
#define BOX_REPEAT_US 100000UL

typedef struct {
  uint32_t count;
  uint32_t us; /* of the newest counted pulse */
  uint8_t seen;
} box_edges;

/* Counts an edge at `us`, unless it follows the last one too soon. */
static inline void box_take_edge(volatile box_edges *e, uint32_t us) {
  if (e->seen && (uint32_t)(us - e->us) < BOX_MIN_PERIOD_US) return;
  e->seen = 1;
  e->us = us;
  e->count++;
}

typedef struct {
  uint32_t presses;
  uint32_t us;    /* of the newest press: when its contact first closed */
  uint32_t since; /* when the contact left the state that counts */
  uint8_t closed; /* the state that counts */
  uint8_t turning;
} box_contact;

/* Takes a look at the contact, about once a millisecond. Returns 1 when a press has been counted. */
static inline uint8_t box_look(box_contact *b, uint8_t closed, uint32_t us) {
  if (closed == b->closed) {
    b->turning = 0;
    return 0;
  }
  if (!b->turning) {
    b->turning = 1;
    b->since = us;
  }
  if ((uint32_t)(us - b->since) < (closed ? BOX_PRESS_US : BOX_RELEASE_US)) return 0;
  b->turning = 0;
  b->closed = closed;
  if (!closed) return 0;
  b->presses++;
  b->us = b->since;
  return 1;
}

/*
 * Microseconds from a 16-bit timer of half microseconds that has run over `overflows` times. `pending`: it ran over and the
 * interrupt that counts this has not had its turn.
 */
static inline uint32_t box_micros(uint32_t overflows, uint16_t ticks, uint8_t pending) {
  if (pending && ticks < 0x8000) overflows++;
  return (overflows << 15) | (ticks >> 1);
}

#endif
