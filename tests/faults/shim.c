/* A disk that fails: stands between a program and the C library, counts what the program does to the files of one folder,
 * writes it down, and lets it fail at one point. Used by tests/record_faults.rs through LD_PRELOAD.
 *
 * FAULT_FOLDER  the folder (an absolute path)
 * FAULT_AT      the number of the operation at which to fail, from 1; 0 or unset: never
 * FAULT_DO      kill   the process is killed in place of the operation
 *               tear   half of a write is done, then the process is killed
 *               full   this and every later write ends with ENOSPC
 *               error  this and every later operation ends with EIO
 *               locked nothing can be opened for writing or unlinked from here on (EROFS)
 * FAULT_LOG     where operations are written down: kind, path, offset, length, bytes
 *
 * Kinds: C created, W written, T cut to a length, S synced, U unlinked, L linked (the bytes are the new path), A answer to
 * the user (a write to standard output). */
#define _GNU_SOURCE
#include <dlfcn.h>
#include <errno.h>
#include <fcntl.h>
#include <signal.h>
#include <stdarg.h>
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <sys/stat.h>
#include <sys/types.h>
#include <sys/uio.h>
#include <unistd.h>

#define MOST 1024
static char *paths[MOST];
static long count = 0;

static const char *folder(void) { return getenv("FAULT_FOLDER"); }

static int is_ours(const char *path) {
    const char *f = folder();
    return f && path && strncmp(path, f, strlen(f)) == 0;
}

static void log_op(char kind, const char *path, uint64_t offset, uint64_t length, const void *bytes) {
    const char *to = getenv("FAULT_LOG");
    if (!to) return;
    static int (*real_open)(const char *, int, ...);
    static ssize_t (*real_write)(int, const void *, size_t);
    if (!real_open) real_open = dlsym(RTLD_NEXT, "open");
    if (!real_write) real_write = dlsym(RTLD_NEXT, "write");
    int fd = real_open(to, O_WRONLY | O_CREAT | O_APPEND | O_CLOEXEC, 0644);
    if (fd < 0) return;
    uint64_t size = strlen(path);
    real_write(fd, &kind, 1);
    real_write(fd, &size, 8);
    real_write(fd, path, size);
    real_write(fd, &offset, 8);
    real_write(fd, &length, 8);
    if (bytes && length) real_write(fd, bytes, length);
    close(fd);
}

static int is_mode(const char *mode) {
    const char *what = getenv("FAULT_DO");
    return what && strcmp(what, mode) == 0;
}

/* Counts an operation; 1 if it is to fail with errno set, 2 if it is to be torn. */
static int fails(char kind) {
    const char *text = getenv("FAULT_AT");
    long at = text ? atol(text) : 0;
    count++;
    if (at == 0 || count < at) return 0;
    int is_the_one = count == at;
    if (is_mode("kill") && is_the_one) kill(getpid(), SIGKILL);
    if (is_mode("tear") && is_the_one) {
        if (kind == 'W') return 2;
        kill(getpid(), SIGKILL);
    }
    if (is_mode("full") && (kind == 'W' || kind == 'C')) { errno = ENOSPC; return 1; }
    if (is_mode("error")) { errno = EIO; return 1; }
    if (is_mode("locked") && (kind == 'C' || kind == 'U' || kind == 'L')) { errno = EROFS; return 1; }
    return 0;
}

static int opened(int fd, const char *path) {
    if (fd >= 0 && fd < MOST && is_ours(path)) { free(paths[fd]); paths[fd] = strdup(path); }
    return fd;
}

static int refuse_open(const char *path, int flags) {
    if (!is_ours(path)) return 0;
    struct stat known;
    int is_new = (flags & O_CREAT) && stat(path, &known) != 0;
    if (is_mode("locked") && (flags & (O_WRONLY | O_RDWR))) {
        const char *text = getenv("FAULT_AT");
        if (text && atol(text) > 0 && count + 1 >= atol(text)) { errno = EROFS; return 1; }
    }
    if (is_new) {
        if (fails('C')) return 1;
        log_op('C', path, 0, 0, NULL);
    }
    return 0;
}

#define OPEN(name)                                                                                       \
    int name(const char *path, int flags, ...) {                                                         \
        static int (*real)(const char *, int, ...);                                                      \
        if (!real) real = dlsym(RTLD_NEXT, #name);                                                       \
        mode_t mode = 0;                                                                                 \
        if (flags & (O_CREAT | O_TMPFILE)) { va_list a; va_start(a, flags); mode = va_arg(a, mode_t); va_end(a); } \
        if (refuse_open(path, flags)) return -1;                                                         \
        return opened(real(path, flags, mode), path);                                                    \
    }
OPEN(open)
OPEN(open64)

int close(int fd) {
    static int (*real)(int);
    if (!real) real = dlsym(RTLD_NEXT, "close");
    if (fd >= 0 && fd < MOST && paths[fd]) { free(paths[fd]); paths[fd] = NULL; }
    return real(fd);
}

static const char *path_of(int fd) { return fd >= 0 && fd < MOST ? paths[fd] : NULL; }

static ssize_t put(int fd, const void *bytes, size_t size, off64_t at, int is_at) {
    static ssize_t (*real_at)(int, const void *, size_t, off64_t);
    static ssize_t (*real)(int, const void *, size_t);
    if (!real_at) real_at = dlsym(RTLD_NEXT, "pwrite64");
    if (!real) real = dlsym(RTLD_NEXT, "write");
    const char *path = path_of(fd);
    if (!path) {
        ssize_t done = is_at ? real_at(fd, bytes, size, at) : real(fd, bytes, size);
        if (fd == 1 && folder()) log_op('A', "", 0, size, bytes);
        return done;
    }
    off64_t offset = is_at ? at : lseek64(fd, 0, SEEK_CUR);
    int how = fails('W');
    if (how == 1) return -1;
    if (how == 2) {
        if (is_at) real_at(fd, bytes, size / 2, at); else real(fd, bytes, size / 2);
        kill(getpid(), SIGKILL);
    }
    log_op('W', path, offset, size, bytes);
    return is_at ? real_at(fd, bytes, size, at) : real(fd, bytes, size);
}

ssize_t write(int fd, const void *bytes, size_t size) { return put(fd, bytes, size, 0, 0); }
ssize_t pwrite(int fd, const void *bytes, size_t size, off_t at) { return put(fd, bytes, size, at, 1); }
ssize_t pwrite64(int fd, const void *bytes, size_t size, off64_t at) { return put(fd, bytes, size, at, 1); }

static int cut(int fd, off64_t size) {
    static int (*real)(int, off64_t);
    if (!real) real = dlsym(RTLD_NEXT, "ftruncate64");
    if (path_of(fd)) {
        if (fails('T')) return -1;
        log_op('T', path_of(fd), size, 0, NULL);
    }
    return real(fd, size);
}
int ftruncate(int fd, off_t size) { return cut(fd, size); }
int ftruncate64(int fd, off64_t size) { return cut(fd, size); }

#define SYNC(name)                                                 \
    int name(int fd) {                                             \
        static int (*real)(int);                                   \
        if (!real) real = dlsym(RTLD_NEXT, #name);                 \
        if (path_of(fd)) {                                         \
            if (fails('S')) return -1;                             \
            int done = real(fd);                                   \
            if (done == 0) log_op('S', path_of(fd), 0, 0, NULL);   \
            return done;                                           \
        }                                                          \
        return real(fd);                                           \
    }
SYNC(fsync)
SYNC(fdatasync)

int unlink(const char *path) {
    static int (*real)(const char *);
    if (!real) real = dlsym(RTLD_NEXT, "unlink");
    if (is_ours(path)) {
        if (fails('U')) return -1;
        log_op('U', path, 0, 0, NULL);
    }
    return real(path);
}

/* The standard library of Rust links through linkat. */
int linkat(int from_folder, const char *from, int to_folder, const char *to, int flags) {
    static int (*real)(int, const char *, int, const char *, int);
    if (!real) real = dlsym(RTLD_NEXT, "linkat");
    if (is_ours(to)) {
        if (fails('L')) return -1;
        log_op('L', from, 0, strlen(to), to);
    }
    return real(from_folder, from, to_folder, to, flags);
}
