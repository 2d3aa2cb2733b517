/*
 * A Modbus server on libmodbus, for tests: what it holds is loaded word by word, as a register map would print it.
 *
 *   libmodbus-server tcp UNIT             listens on a free port of the loopback
 *   libmodbus-server rtu UNIT PATH BAUD PARITY
 *
 * Prints one line, "ready PORT" or "ready", and answers until it is killed or its standard input ends.
 */
#include <errno.h>
#include <modbus/modbus.h>
#include <poll.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <unistd.h>

#include <arpa/inet.h>
#include <netinet/in.h>
#include <sys/socket.h>

#define BITS 2100
#define REGISTERS 2100

static modbus_mapping_t *map;

static void fill_map(void)
{
    int at;
    /* The worked examples of the application protocol: coils 20 to 56, discrete inputs 197 to 218. */
    static const unsigned char coils[] = {0xCD, 0x6B, 0xB2, 0x0E, 0x1B};
    static const unsigned char inputs[] = {0xAC, 0xDB, 0x35};
    modbus_set_bits_from_bytes(map->tab_bits, 0x13, 37, coils);
    modbus_set_bits_from_bytes(map->tab_input_bits, 0xC4, 22, inputs);
    /* A known pattern for long reads: register n holds n. */
    for (at = 1000; at < REGISTERS; at += 1) map->tab_registers[at] = (uint16_t) at;
    map->tab_registers[0x6B] = 0x022B;
    map->tab_registers[0x6C] = 0x0000;
    map->tab_registers[0x6D] = 0x0064;
    map->tab_input_registers[8] = 10;
    /* 123456.0 = 47F12000 in its four orders. */
    static const uint16_t orders[] = {0x47F1, 0x2000, 0x2000, 0x47F1, 0xF147, 0x0020, 0x0020, 0xF147};
    memcpy(map->tab_registers + 200, orders, sizeof orders);
    /* The register of the mask write example, 6.16. */
    map->tab_registers[4] = 0x0012;
}

static int listen_on_free_port(void)
{
    struct sockaddr_in address = {.sin_family = AF_INET, .sin_addr.s_addr = htonl(INADDR_LOOPBACK)};
    socklen_t length = sizeof address;
    int listener = socket(AF_INET, SOCK_STREAM, 0);
    if (listener < 0 || bind(listener, (struct sockaddr *) &address, length) < 0) return -1;
    if (listen(listener, 4) < 0 || getsockname(listener, (struct sockaddr *) &address, &length) < 0) return -1;
    printf("ready %d\n", ntohs(address.sin_port));
    return listener;
}

/* Answers until the peer goes away; ends the program when whoever started it is gone. */
static void serve(modbus_t *context)
{
    uint8_t query[MODBUS_MAX_ADU_LENGTH];
    for (;;) {
        struct pollfd waits[] = {{.fd = modbus_get_socket(context), .events = POLLIN}, {.fd = 0, .events = POLLIN}};
        if (poll(waits, 2, -1) < 0) exit(1);
        if (waits[1].revents) exit(0);
        int length = modbus_receive(context, query);
        if (length > 0) modbus_reply(context, query, length, map);
        else if (length < 0 && (errno == ECONNRESET || errno == EIO)) return;
    }
}

static void serve_tcp(int unit)
{
    modbus_t *context = modbus_new_tcp("127.0.0.1", 0);
    int listener = listen_on_free_port();
    if (listener < 0) exit(1);
    modbus_set_slave(context, unit);
    for (;;) {
        struct pollfd waits[] = {{.fd = listener, .events = POLLIN}, {.fd = 0, .events = POLLIN}};
        if (poll(waits, 2, -1) < 0) exit(1);
        if (waits[1].revents) exit(0);
        if (modbus_tcp_accept(context, &listener) < 0) exit(1);
        serve(context);
        modbus_close(context);
    }
}

static void serve_rtu(int unit, const char *path, int baud, char parity)
{
    modbus_t *context = modbus_new_rtu(path, baud, parity, 8, 1);
    modbus_set_slave(context, unit);
    if (modbus_connect(context) < 0) {
        fprintf(stderr, "%s: %s\n", path, modbus_strerror(errno));
        exit(1);
    }
    printf("ready\n");
    serve(context);
}

int main(int count, char **arguments)
{
    setvbuf(stdout, NULL, _IOLBF, 0);
    map = modbus_mapping_new(BITS, BITS, REGISTERS, REGISTERS);
    fill_map();
    if (count == 3 && strcmp(arguments[1], "tcp") == 0) serve_tcp(atoi(arguments[2]));
    if (count == 6 && strcmp(arguments[1], "rtu") == 0)
        serve_rtu(atoi(arguments[2]), arguments[3], atoi(arguments[4]), arguments[5][0]);
    return 2;
}
