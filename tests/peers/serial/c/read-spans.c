/*
 * Reads stretches of holding registers of a Modbus RTU device through libmodbus, as often as asked, and prints each pass's time in ms.
 *
 * libmodbus leaves the silence before each request to its caller: 3.5 characters, 1.75 ms above 19 200 baud
 * (MODBUS over Serial Line V1.02, 2.5.1.1). A request without it is no request to a device that keeps to the rule.
 *
 * Usage: read-spans DEVICE BAUD UNIT PASSES FIRST COUNT [FIRST COUNT]...
 * After the times: a line of the registers of the last pass, in hexadecimal, in order.
 */
#include <errno.h>
#include <modbus/modbus.h>
#include <stdio.h>
#include <stdlib.h>
#include <time.h>

enum { MOST_SPANS = 64, SILENCE_NS = 1750000 };

static void keep_silence(void)
{
  struct timespec silence = { 0, SILENCE_NS };
  nanosleep(&silence, NULL);
}

static double now_ms(void)
{
  struct timespec now;
  clock_gettime(CLOCK_MONOTONIC, &now);
  return now.tv_sec * 1e3 + now.tv_nsec / 1e6;
}

int main(int count, char **args)
{
  int spans = (count - 5) / 2;
  if (count < 7 || spans > MOST_SPANS) return 2;
  static uint16_t found[MOST_SPANS][MODBUS_MAX_READ_REGISTERS];
  modbus_t *client = modbus_new_rtu(args[1], atoi(args[2]), 'E', 8, 1);
  if (!client) return 1;
  modbus_set_slave(client, atoi(args[3]));
  modbus_set_response_timeout(client, 2, 0);
  if (modbus_connect(client) == -1) return 1;
  for (int pass = 0; pass < atoi(args[4]); pass++) {
    double start = now_ms();
    for (int i = 0; i < spans; i++) {
      int first = atoi(args[5 + 2 * i]), words = atoi(args[6 + 2 * i]);
      if (i > 0) keep_silence();
      if (modbus_read_registers(client, first, words, found[i]) != words) {
        fprintf(stderr, "%d registers from %d: %s\n", words, first, modbus_strerror(errno));
        return 1;
      }
    }
    printf("%.3f\n", now_ms() - start);
  }
  for (int i = 0; i < spans; i++)
    for (int word = 0; word < atoi(args[6 + 2 * i]); word++) printf("%04x ", found[i][word]);
  printf("\n");
  modbus_close(client);
  return 0;
}
