/*
 * A Modbus RTU server on libmodbus that knows nothing of the project: 200 holding registers, and who it is in input registers.
 *
 * Usage: register-server DEVICE BAUD UNIT. Holding register i holds (i * 40503 + 7) mod 65536 until it is written.
 * Input registers, two letters each: 0 "Testbench" in 8 registers, 8 "R200" in 4, 12 "1.0" in 2.
 */
#include <errno.h>
#include <modbus/modbus.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

enum { HOLDING = 200, INPUTS = 14, MAKER_AT = 0, MODEL_AT = 8, FIRMWARE_AT = 12 };

static void put_text(uint16_t *registers, int words, const char *text)
{
  size_t length = strlen(text);
  for (int i = 0; i < words; i++) {
    unsigned char high = 2 * (size_t)i < length ? (unsigned char)text[2 * i] : 0;
    unsigned char low = 2 * (size_t)i + 1 < length ? (unsigned char)text[2 * i + 1] : 0;
    registers[i] = (uint16_t)(high << 8 | low);
  }
}

int main(int count, char **args)
{
  if (count != 4) return 2;
  modbus_t *server = modbus_new_rtu(args[1], atoi(args[2]), 'E', 8, 1);
  modbus_mapping_t *memory = modbus_mapping_new(0, 0, HOLDING, INPUTS);
  if (!server || !memory) return 1;
  for (int i = 0; i < HOLDING; i++) memory->tab_registers[i] = (uint16_t)(i * 40503u + 7u);
  put_text(memory->tab_input_registers + MAKER_AT, 8, "Testbench");
  put_text(memory->tab_input_registers + MODEL_AT, 4, "R200");
  put_text(memory->tab_input_registers + FIRMWARE_AT, 2, "1.0");
  modbus_set_slave(server, atoi(args[3]));
  if (modbus_connect(server) == -1) {
    fprintf(stderr, "%s: %s\n", args[1], modbus_strerror(errno));
    return 1;
  }
  puts("listens");
  fflush(stdout);
  for (;;) {
    uint8_t request[MODBUS_RTU_MAX_ADU_LENGTH];
    int length = modbus_receive(server, request);
    if (length > 0) modbus_reply(server, request, length, memory);
    else if (length == -1 && errno == EIO) return 0;
  }
}
