/*
 * Pulse box for Evenline: ATmega328P at 16 MHz (the usual small 5 V board), plain C for avr-gcc and avr-libc.
 *
 *   D2 (PD2)  wheel, channel 0      falling edge      A0 (PC0)  wired button 0, to ground
 *   D3 (PD3)  wheel, channel 1      falling edge      A1 (PC1)  wired button 1, to ground
 *   D8 (PB0)  receiver's pulse per second, rising     D0 (PD0)  receiver's NMEA in, 115200 baud, may be left open
 *   D1 (PD1)  sentences out, 115200 baud 8N1          D13       lit while wheel 0 pulls its input low
 *
 *   avr-gcc -std=gnu11 -Os -Wall -Wextra -mmcu=atmega328p pulse-box.c -o pulse-box.elf
 *   avr-objcopy -O ihex pulse-box.elf pulse-box.hex
 *   avrdude -p m328p -c arduino -P /dev/ttyUSB0 -b 115200 -U flash:w:pulse-box.hex
 *
 * Wiring and cautions: wiring.md.
 */
#define F_CPU 16000000UL

#include <avr/interrupt.h>
#include <avr/io.h>
#include <avr/wdt.h>
#include <util/atomic.h>

#include "box-input.h"
#include "box-sentence.h"

#define WHEELS 2
#define BUTTONS 2

/* --- time: timer 1 counts half microseconds ------------------------------------------------------------------- */

static volatile uint32_t overflows;

ISR(TIMER1_OVF_vect) { overflows++; }

/* Only with interrupts off. */
static uint32_t micros_of(uint16_t ticks) { return box_micros(overflows, ticks, (TIFR1 >> TOV1) & 1); }

static uint32_t now(void) {
  uint32_t us;
  ATOMIC_BLOCK(ATOMIC_RESTORESTATE) {
    uint16_t ticks = TCNT1;
    us = micros_of(ticks);
  }
  return us;
}

/* --- inputs --------------------------------------------------------------------------------------------------- */

static volatile box_edges wheels[WHEELS];
static volatile uint32_t pps_us;
static volatile uint8_t pps_seen;

/* The timer is read before anything else: the compiler cannot move one volatile access before another. */
ISR(INT0_vect) {
  uint16_t ticks = TCNT1;
  box_take_edge(&wheels[0], micros_of(ticks));
}

ISR(INT1_vect) {
  uint16_t ticks = TCNT1;
  box_take_edge(&wheels[1], micros_of(ticks));
}

/* The timer itself notes the instant of this edge, to half a microsecond. */
ISR(TIMER1_CAPT_vect) {
  uint16_t ticks = ICR1;
  pps_us = micros_of(ticks);
  pps_seen = 1;
}

/* --- serial line: rings of 256, whose indexes wrap by themselves ----------------------------------------------- */

static volatile char tx[256];
static volatile uint8_t tx_head, tx_tail;
static volatile char rx[256];
static volatile uint8_t rx_head, rx_tail;

ISR(USART_UDRE_vect) {
  UDR0 = (uint8_t)tx[tx_tail++];
  if (tx_tail == tx_head) UCSR0B &= (uint8_t)~_BV(UDRIE0);
}

/* A full ring drops what comes: the line it belonged to then fails its checksum, as it should. */
ISR(USART_RX_vect) {
  char c = (char)UDR0;
  if ((uint8_t)(rx_head + 1) != rx_tail) rx[rx_head++] = c;
}

/* Puts in a whole sentence or, where there is no room, nothing. Never waits. Returns 1 when it went in. */
static uint8_t send(const char *text, uint8_t length) {
  uint8_t head = tx_head;
  uint8_t i;
  if ((uint8_t)(tx_tail - head - 1) < length) return 0;
  for (i = 0; i < length; i++) tx[head++] = text[i];
  ATOMIC_BLOCK(ATOMIC_RESTORESTATE) {
    tx_head = head;
    UCSR0B |= _BV(UDRIE0);
  }
  return 1;
}

/* --- what is said, and when: a sentence that found no room is tried again, with what is true by then ------------- */

static uint32_t wheel_said[WHEELS], wheel_said_us[WHEELS];
static box_contact contacts[BUTTONS];
static uint32_t button_said_us[BUTTONS];
static uint8_t button_repeats[BUTTONS];

static void tell_wheel(uint8_t i) {
  char text[BOX_SENTENCE_MAX];
  uint32_t count, us, present;
  ATOMIC_BLOCK(ATOMIC_RESTORESTATE) {
    uint16_t ticks = TCNT1;
    present = micros_of(ticks);
    count = wheels[i].count;
    us = wheels[i].us;
  }
  if (present - wheel_said_us[i] < (count != wheel_said[i] ? BOX_MOVING_US : BOX_ALIVE_US)) return;
  if (!send(text, box_wheel(text, i, count, count != wheel_said[i] ? us : present))) return;
  wheel_said[i] = count;
  wheel_said_us[i] = present;
}

static void tell_button(uint8_t i, uint32_t present) {
  char text[BOX_SENTENCE_MAX];
  box_contact *b = &contacts[i];
  uint8_t repeat = button_repeats[i];
  uint32_t wait = repeat == BOX_REPEATS ? 0 : repeat > 0 ? BOX_REPEAT_US : BOX_ALIVE_US;
  if (present - button_said_us[i] < wait) return;
  if (!send(text, box_button(text, i, b->presses, repeat > 0 ? b->us : present))) return;
  button_said_us[i] = present;
  if (repeat > 0) button_repeats[i]--;
}

static void tell_pps(void) {
  char text[BOX_SENTENCE_MAX];
  uint32_t us = 0;
  uint8_t seen;
  ATOMIC_BLOCK(ATOMIC_RESTORESTATE) {
    seen = pps_seen;
    us = pps_us;
  }
  if (!seen || !send(text, box_pps(text, us))) return;
  ATOMIC_BLOCK(ATOMIC_RESTORESTATE) {
    if (pps_us == us) pps_seen = 0;
  }
}

/* The receiver's own lines go through whole, between our sentences. */
static void pass_line_on(void) {
  static char line[128];
  static uint8_t length, whole;
  while (!whole && rx_tail != rx_head) {
    char c = rx[rx_tail];
    rx_tail++;
    if (c == '$') length = 0;
    if (length < sizeof line) line[length++] = c;
    if (c != '\n') continue;
    whole = line[0] == '$' && line[length - 1] == '\n';
    if (!whole) length = 0;
  }
  if (whole && send(line, length)) whole = length = 0;
}

/* --- beginning ------------------------------------------------------------------------------------------------ */

/* After a watchdog reset the watchdog still runs, with its shortest time: stop it before anything else. */
void stop_watchdog(void) __attribute__((naked, used, section(".init3")));
void stop_watchdog(void) {
  MCUSR = 0;
  wdt_disable();
}

static void begin(void) {
  PORTD = _BV(PD2) | _BV(PD3); /* pull-ups */
  PORTC = _BV(PC0) | _BV(PC1);
  DDRB = _BV(PB5);

  EICRA = _BV(ISC01) | _BV(ISC11); /* falling edges */
  EIFR = _BV(INTF0) | _BV(INTF1);
  EIMSK = _BV(INT0) | _BV(INT1);

  TCCR1A = 0;
  TCCR1B = _BV(ICNC1) | _BV(ICES1) | _BV(CS11); /* capture filtered, rising; clock / 8 */
  TIMSK1 = _BV(TOIE1) | _BV(ICIE1);

  UBRR0 = 16; /* 117647 baud with U2X: 2.1 % fast, as all such boards are at 115200 */
  UCSR0A = _BV(U2X0);
  UCSR0C = _BV(UCSZ01) | _BV(UCSZ00);
  UCSR0B = _BV(TXEN0) | _BV(RXEN0) | _BV(RXCIE0);

  wdt_enable(WDTO_250MS);
  sei();
}

int main(void) {
  uint32_t looked = 0;
  uint8_t i;
  begin();
  for (;;) {
    uint32_t present = now();
    wdt_reset();
    if (PIND & _BV(PD2)) PORTB &= (uint8_t)~_BV(PB5);
    else PORTB |= _BV(PB5);
    if (present - looked >= 1000) {
      looked = present;
      for (i = 0; i < BUTTONS; i++)
        if (box_look(&contacts[i], !(PINC & _BV(PC0 + i)), present)) button_repeats[i] = BOX_REPEATS;
    }
    tell_pps();
    for (i = 0; i < WHEELS; i++) tell_wheel(i);
    for (i = 0; i < BUTTONS; i++) tell_button(i, present);
    pass_line_on();
  }
}
