/* A libmodbus server with the values that every peer of these tests starts with: unit 17, 100 items of each kind. */
#include <errno.h>
#include <modbus.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

enum { SIZE = 100, UNIT = 17 };

static int fail(const char *what)
{
    fprintf(stderr, "%s: %s\n", what, modbus_strerror(errno));
    return 1;
}

static void serve(modbus_t *context, modbus_mapping_t *map)
{
    uint8_t request[MODBUS_MAX_ADU_LENGTH];
    int length;

    while ((length = modbus_receive(context, request)) != -1) {
        if (length > 0 && modbus_reply(context, request, length, map) == -1) {
            return;
        }
    }
}

int main(int argc, char **argv)
{
    int tcp = argc == 3 && strcmp(argv[1], "tcp") == 0;
    modbus_mapping_t *map = modbus_mapping_new(SIZE, SIZE, SIZE, SIZE);
    modbus_t *context;
    int listening;

    if (argc != 3 || map == NULL) {
        return fail("usage: modbus_server tcp PORT | rtu DEVICE");
    }
    for (int i = 0; i < SIZE; i++) {
        map->tab_bits[i] = i % 2 == 1;
        map->tab_input_bits[i] = i % 3 == 0;
        map->tab_registers[i] = 1000 + i;
        map->tab_input_registers[i] = 2000 + i;
    }
    context = tcp ? modbus_new_tcp("127.0.0.1", atoi(argv[2])) : modbus_new_rtu(argv[2], 115200, 'N', 8, 1);
    if (context == NULL || modbus_set_slave(context, UNIT) == -1) {
        return fail("context");
    }
    if (!tcp) {
        if (modbus_connect(context) == -1) {
            return fail("connect");
        }
        puts("ready");
        fflush(stdout);
        for (;;) {
            serve(context, map);
        }
    }
    listening = modbus_tcp_listen(context, 1);
    if (listening == -1) {
        return fail("listen");
    }
    puts("ready");
    fflush(stdout);
    while (modbus_tcp_accept(context, &listening) != -1) {
        serve(context, map);
        modbus_close(context);
    }
    return fail("accept");
}
