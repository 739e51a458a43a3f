/*
 * Runs the real firmware in simavr for some seconds of the chip's own time, with pulses, bounce, a press, a receiver's pulse
 * per second and its sentences on the pins. What the box sends goes to standard output.
 *
 * Standard input: one event a line, `<microsecond> <port or U> <pin> <level>` in order of time; U is a byte into the serial
 * line. The last line's instant ends the run.
 */
#include <simavr/avr_ioport.h>
#include <simavr/avr_timer.h>
#include <simavr/avr_uart.h>
#include <simavr/sim_avr.h>
#include <simavr/sim_elf.h>
#include <stdio.h>
#include <stdlib.h>

#define HZ 16000000UL

static void sent(struct avr_irq_t *irq, uint32_t value, void *param) {
  (void)irq;
  (void)param;
  putchar((int)(value & 0xff));
}

int main(int argc, char **argv) {
  elf_firmware_t firmware = {0};
  avr_t *avr;
  avr_irq_t *uart_in, *capture;
  uint32_t flags = 0;
  unsigned long long us;
  char port;
  int pin, level;

  if (argc != 2 || elf_read_firmware(argv[1], &firmware) != 0) return 1;
  avr = avr_make_mcu_by_name("atmega328p");
  if (avr == NULL) return 2;
  avr_init(avr);
  avr->frequency = HZ;
  avr_load_firmware(avr, &firmware);

  avr_ioctl(avr, AVR_IOCTL_UART_GET_FLAGS('0'), &flags);
  flags &= (uint32_t)~AVR_UART_FLAG_STDIO;
  avr_ioctl(avr, AVR_IOCTL_UART_SET_FLAGS('0'), &flags);
  avr_irq_register_notify(avr_io_getirq(avr, AVR_IOCTL_UART_GETIRQ('0'), UART_IRQ_OUTPUT), sent, NULL);
  uart_in = avr_io_getirq(avr, AVR_IOCTL_UART_GETIRQ('0'), UART_IRQ_INPUT);
  capture = avr_io_getirq(avr, AVR_IOCTL_TIMER_GETIRQ('1'), TIMER_IRQ_IN_ICP);

  while (scanf(" %llu %c %d %d", &us, &port, &pin, &level) == 4) {
    while (avr->cycle < us * (HZ / 1000000)) {
      int state = avr_run(avr);
      if (state == cpu_Done || state == cpu_Crashed) return 3;
    }
    if (port == 'U') avr_raise_irq(uart_in, (uint32_t)level);
    else if (port == 'B' && pin == 0) avr_raise_irq(capture, (uint32_t)level);
    else avr_raise_irq(avr_io_getirq(avr, AVR_IOCTL_IOPORT_GETIRQ(port), pin), (uint32_t)level);
  }
  fflush(stdout);
  return 0;
}
