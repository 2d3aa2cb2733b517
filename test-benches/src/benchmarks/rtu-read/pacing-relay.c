/*
 * A serial line between two pseudo-terminals that takes the time a real one would: a pseudo-terminal itself passes
 * bytes on at once.
 *
 *   pacing-relay NANOSECONDS_PER_CHARACTER NANOSECONDS_OF_SILENCE
 *
 * Prints "ready MASTER_PATH DEVICE_PATH". A request reaches the device when its last character would have; the
 * answer sets out once the line was silent for its interval, and arrives character by character.
 */
#define _GNU_SOURCE
#include <errno.h>
#include <fcntl.h>
#include <sched.h>
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <sys/prctl.h>
#include <termios.h>
#include <time.h>
#include <unistd.h>

static int64_t now_ns(void)
{
    struct timespec now;
    clock_gettime(CLOCK_MONOTONIC, &now);
    return (int64_t) now.tv_sec * 1000000000 + now.tv_nsec;
}

static void wait_until(int64_t moment_ns)
{
    struct timespec moment = {.tv_sec = moment_ns / 1000000000, .tv_nsec = moment_ns % 1000000000};
    while (clock_nanosleep(CLOCK_MONOTONIC, TIMER_ABSTIME, &moment, NULL) == EINTR) continue;
}

/* The near end of a pseudo-terminal; its far end is kept open too, so that peers may come and go. */
static int open_pair(char *path, size_t size)
{
    struct termios settings;
    int near = posix_openpt(O_RDWR | O_NOCTTY);
    if (near < 0 || grantpt(near) < 0 || unlockpt(near) < 0 || ptsname_r(near, path, size) != 0) exit(1);
    int far = open(path, O_RDWR | O_NOCTTY);
    if (far < 0 || tcgetattr(far, &settings) < 0) exit(1);
    cfmakeraw(&settings);
    if (tcsetattr(far, TCSANOW, &settings) < 0) exit(1);
    return near;
}

static void pass(int to, int64_t start_ns, int64_t character_ns, const uint8_t *bytes, ssize_t count)
{
    for (ssize_t at = 0; at < count; at += 1) {
        wait_until(start_ns + (at + 1) * character_ns);
        if (write(to, bytes + at, 1) != 1) exit(1);
    }
}

int main(int count, char **arguments)
{
    char master_path[64], device_path[64];
    uint8_t bytes[512];
    if (count != 3) return 2;
    int64_t character_ns = atoll(arguments[1]), silence_ns = atoll(arguments[2]);
    /* Without this every wait would be 50 microseconds late. */
    prctl(PR_SET_TIMERSLACK, 1);
    /* A wire does not wait for its turn. Where this is not allowed, a busy machine makes the line slower. */
    struct sched_param first = {.sched_priority = 10};
    sched_setscheduler(0, SCHED_FIFO, &first);
    int master = open_pair(master_path, sizeof master_path);
    int device = open_pair(device_path, sizeof device_path);
    printf("ready %s %s\n", master_path, device_path);
    fflush(stdout);
    for (;;) {
        ssize_t length = read(master, bytes, sizeof bytes);
        if (length <= 0) return 1;
        int64_t end_ns = now_ns() + length * character_ns;
        wait_until(end_ns);
        if (write(device, bytes, (size_t) length) != length) return 1;
        length = read(device, bytes, sizeof bytes);
        if (length <= 0) return 1;
        int64_t start_ns = now_ns();
        if (start_ns < end_ns + silence_ns) start_ns = end_ns + silence_ns;
        pass(master, start_ns, character_ns, bytes, length);
    }
}
