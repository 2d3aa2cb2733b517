/*
 * Both ends of libmodbus for the benchmarks of the wires.
 *
 *   libmodbus-peer serve-tcp              listens on a free port of the loopback; prints "ready PORT"
 *   libmodbus-peer serve-rtu PATH BAUD    answers as unit 1, 8N1; prints "ready"
 *   libmodbus-peer read-tcp PORT COUNT    reads eight holding registers COUNT times; prints the seconds it took
 */
#include <errno.h>
#include <modbus/modbus.h>
#include <poll.h>
#include <sched.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <time.h>
#include <unistd.h>

#include <arpa/inet.h>
#include <netinet/in.h>
#include <sys/socket.h>

static void fail(const char *what)
{
    fprintf(stderr, "%s: %s\n", what, modbus_strerror(errno));
    exit(1);
}

static double now_s(void)
{
    struct timespec now;
    clock_gettime(CLOCK_MONOTONIC, &now);
    return (double) now.tv_sec + (double) now.tv_nsec / 1e9;
}

static modbus_mapping_t *new_map(void)
{
    modbus_mapping_t *map = modbus_mapping_new(16, 16, 1000, 1000);
    for (int at = 0; at < 1000; at += 1) map->tab_registers[at] = (uint16_t) at;
    return map;
}

/* Answers one request. Returns 0 where the peer is gone. */
static int answer(modbus_t *context, modbus_mapping_t *map)
{
    uint8_t query[MODBUS_MAX_ADU_LENGTH];
    int length = modbus_receive(context, query);
    if (length > 0) modbus_reply(context, query, length, map);
    return length >= 0 || (errno != ECONNRESET && errno != EIO && errno != EBADF);
}

/* One process for all clients: which core it is given must not differ between those that are compared. */
static void serve_tcp(void)
{
    struct sockaddr_in address = {.sin_family = AF_INET, .sin_addr.s_addr = htonl(INADDR_LOOPBACK)};
    socklen_t length = sizeof address;
    struct pollfd waits[16];
    nfds_t count = 1;
    modbus_t *context = modbus_new_tcp("127.0.0.1", 0);
    modbus_mapping_t *map = new_map();
    int listener = socket(AF_INET, SOCK_STREAM, 0);
    if (listener < 0 || bind(listener, (struct sockaddr *) &address, length) < 0) fail("bind");
    if (listen(listener, 8) < 0 || getsockname(listener, (struct sockaddr *) &address, &length) < 0) fail("listen");
    printf("ready %d\n", ntohs(address.sin_port));
    waits[0] = (struct pollfd) {.fd = listener, .events = POLLIN};
    for (;;) {
        if (poll(waits, count, -1) < 0) fail("poll");
        if (waits[0].revents && count < 16) {
            int client = modbus_tcp_accept(context, &listener);
            waits[count] = (struct pollfd) {.fd = client, .events = POLLIN};
            count += 1;
            continue;
        }
        for (nfds_t at = 1; at < count; at += 1) {
            if (!waits[at].revents) continue;
            modbus_set_socket(context, waits[at].fd);
            if (answer(context, map)) continue;
            close(waits[at].fd);
            count -= 1;
            waits[at] = waits[count];
        }
    }
}

static void serve_rtu(const char *path, int baud)
{
    modbus_t *context = modbus_new_rtu(path, baud, 'N', 8, 1);
    /* A device answers at once, however busy this machine is, where that may be asked for. */
    struct sched_param first = {.sched_priority = 9};
    sched_setscheduler(0, SCHED_FIFO, &first);
    modbus_set_slave(context, 1);
    if (modbus_connect(context) < 0) fail(path);
    printf("ready\n");
    modbus_mapping_t *map = new_map();
    while (answer(context, map)) continue;
}

static void read_tcp(int port, int count)
{
    uint16_t registers[8];
    modbus_t *context = modbus_new_tcp("127.0.0.1", port);
    modbus_set_slave(context, 1);
    if (modbus_connect(context) < 0) fail("connect");
    double start_s = now_s();
    for (int turn = 0; turn < count; turn += 1) {
        if (modbus_read_registers(context, 0, 8, registers) != 8) fail("read");
    }
    printf("%.9f\n", now_s() - start_s);
}

int main(int count, char **arguments)
{
    setvbuf(stdout, NULL, _IOLBF, 0);
    if (count == 2 && strcmp(arguments[1], "serve-tcp") == 0) serve_tcp();
    if (count == 4 && strcmp(arguments[1], "serve-rtu") == 0) serve_rtu(arguments[2], atoi(arguments[3]));
    if (count == 4 && strcmp(arguments[1], "read-tcp") == 0) {
        read_tcp(atoi(arguments[2]), atoi(arguments[3]));
        return 0;
    }
    return 2;
}
