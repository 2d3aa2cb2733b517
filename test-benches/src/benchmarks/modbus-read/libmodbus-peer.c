/*
 * Both ends of libmodbus for the benchmarks of the wires.
 *
 *   libmodbus-peer serve-tcp              listens on a free port of the loopback; prints "ready PORT"
 *   libmodbus-peer serve-rtu PATH BAUD    answers as unit 1, 8N1; prints "ready"
 *   libmodbus-peer read-tcp PORT COUNT    reads eight holding registers COUNT times; prints the seconds it took
 */
#include <errno.h>
#include <modbus/modbus.h>
#include <sched.h>
#include <signal.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <sys/prctl.h>
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

static void serve(modbus_t *context)
{
    uint8_t query[MODBUS_MAX_ADU_LENGTH];
    modbus_mapping_t *map = modbus_mapping_new(16, 16, 1000, 1000);
    for (int at = 0; at < 1000; at += 1) map->tab_registers[at] = (uint16_t) at;
    for (;;) {
        int length = modbus_receive(context, query);
        if (length > 0) modbus_reply(context, query, length, map);
        else if (length < 0 && (errno == ECONNRESET || errno == EIO || errno == EBADF)) return;
    }
}

static void serve_tcp(void)
{
    struct sockaddr_in address = {.sin_family = AF_INET, .sin_addr.s_addr = htonl(INADDR_LOOPBACK)};
    socklen_t length = sizeof address;
    int listener = socket(AF_INET, SOCK_STREAM, 0);
    if (listener < 0 || bind(listener, (struct sockaddr *) &address, length) < 0) fail("bind");
    if (listen(listener, 8) < 0 || getsockname(listener, (struct sockaddr *) &address, &length) < 0) fail("listen");
    printf("ready %d\n", ntohs(address.sin_port));
    signal(SIGCHLD, SIG_IGN);
    for (;;) {
        modbus_t *context = modbus_new_tcp("127.0.0.1", 0);
        if (modbus_tcp_accept(context, &listener) < 0) fail("accept");
        /* A process for each client, so that all of them may stay connected. */
        if (fork() == 0) {
            prctl(PR_SET_PDEATHSIG, SIGKILL);
            serve(context);
            exit(0);
        }
        /* Not modbus_close, which shuts the connection down for the child as well. */
        close(modbus_get_socket(context));
        modbus_free(context);
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
    serve(context);
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
