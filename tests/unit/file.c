/* Files: errors become complaints, and nothing half-written is left behind.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "base/file.h"
#include "check.h"

#include <dirent.h>
#include <stdlib.h>
#include <string.h>
#include <sys/resource.h>
#include <sys/stat.h>
#include <signal.h>
#include <unistd.h>

static char folder[] = "/tmp/sp_file_XXXXXX";

static int entries(void)
{
    DIR *d = opendir(folder);
    assert_non_null(d);
    int n = 0;
    for (struct dirent *e; (e = readdir(d));)
        n += e->d_name[0] != '.';
    closedir(d);
    return n;
}

static const char *inside(const char *name)
{
    static char path[128];
    snprintf(path, sizeof path, "%s/%s", folder, name);
    return path;
}

static void check_content(const char *path, const char *want)
{
    struct sp_complaints c = {0};
    struct sp_place at = {.file = path};
    char *text;
    size_t size;
    assert_true(sp_file_read(&at, 1000, &text, &size, &c));
    assert_int_equal(size, strlen(want));
    assert_string_equal(text, want);
    assert_int_equal(c.count, 0);
    free(text);
}

static void written_and_read_back(void **state)
{
    (void)state;
    struct sp_complaints c = {0};
    const char *path = inside("a.txt");
    assert_true(sp_file_write(path, "one", 3, &c));
    check_content(path, "one");
    assert_true(sp_file_write(path, "", 0, &c)); /* over the old one */
    check_content(path, "");
    assert_int_equal(entries(), 1);
    unlink(path);
    assert_int_equal(c.count, 0);
}

static void abandoned_leaves_the_old(void **state)
{
    (void)state;
    struct sp_complaints c = {0};
    struct sp_file_out out;
    const char *path = inside("b.txt");
    assert_true(sp_file_write(path, "old", 3, &c));
    assert_true(sp_file_begin(&out, path, &c));
    fputs("new but not finished", out.stream);
    fflush(out.stream);
    check_content(path, "old");
    sp_file_abandon(&out);
    check_content(path, "old");
    assert_int_equal(entries(), 1);
    unlink(path);
}

/* A disk that is full, played by a limit on the size of files. */
static void full_disk(void **state)
{
    (void)state;
    struct sp_complaints c = {0};
    struct rlimit keep, small = {1000, 0};
    const char *path = inside("c.txt");
    char *much = calloc(1, 100000);
    assert_non_null(much);
    assert_true(sp_file_write(path, "old", 3, &c));
    signal(SIGXFSZ, SIG_IGN);
    assert_int_equal(getrlimit(RLIMIT_FSIZE, &keep), 0);
    small.rlim_max = keep.rlim_max;
    assert_int_equal(setrlimit(RLIMIT_FSIZE, &small), 0);
    bool wrote = sp_file_write(path, much, 100000, &c);
    setrlimit(RLIMIT_FSIZE, &keep);
    assert_false(wrote);
    assert_int_equal(c.count, 1);
    assert_string_equal(c.list[0].file, path);
    check_content(path, "old");
    assert_int_equal(entries(), 1);
    free(much);
    unlink(path);
    sp_complaints_free(&c);
}

static void what_cannot_be(void **state)
{
    (void)state;
    struct sp_complaints c = {0};
    char *text;
    size_t size;
    struct sp_place none = {.file = inside("none.txt"), .named_by = "case.json"};
    assert_false(sp_file_read(&none, 10, &text, &size, &c));
    assert_null(text);
    assert_int_equal(c.count, 1);
    assert_string_equal(c.list[0].named_by, "case.json");
    assert_non_null(strstr(c.list[0].found, "No such file"));
    struct sp_place directory = {.file = folder}, device = {.file = "/dev/zero"};
    assert_false(sp_file_read(&directory, 10, &text, &size, &c));
    assert_non_null(strstr(c.list[1].found, "a directory"));
    assert_false(sp_file_read(&device, 10, &text, &size, &c));
    assert_int_equal(c.count, 3);
    assert_false(sp_file_write(folder, "x", 1, &c));
    assert_false(sp_file_write("/nowhere/at/all", "x", 1, &c));
    assert_int_equal(c.count, 5);
    sp_complaints_free(&c);
    const char *path = inside("d.txt");
    struct sp_place large = {.file = path};
    assert_true(sp_file_write(path, "0123456789", 10, &c));
    assert_true(sp_file_read(&large, 10, &text, &size, &c));
    free(text);
    assert_false(sp_file_read(&large, 9, &text, &size, &c));
    assert_non_null(strstr(c.list[0].expected, "at most 9"));
    unlink(path);
    sp_complaints_free(&c);
}

/* Larger than any buffer, with NUL bytes. */
static void large_and_binary(void **state)
{
    (void)state;
    struct sp_complaints c = {0};
    size_t n = 1000003, size;
    char *bytes = malloc(n), *text;
    assert_non_null(bytes);
    for (size_t i = 0; i < n; i++)
        bytes[i] = (char)(i * i >> 3);
    const char *path = inside("e.bin");
    struct sp_place at = {.file = path};
    assert_true(sp_file_write(path, bytes, n, &c));
    assert_true(sp_file_read(&at, n, &text, &size, &c));
    assert_int_equal(size, n);
    assert_memory_equal(text, bytes, n);
    assert_int_equal(text[n], '\0');
    free(text);
    free(bytes);
    unlink(path);
}

static int make_folder(void **state)
{
    (void)state;
    return mkdtemp(folder) ? 0 : -1;
}

static int drop_folder(void **state)
{
    (void)state;
    return rmdir(folder);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(written_and_read_back),
        cmocka_unit_test(abandoned_leaves_the_old),
        cmocka_unit_test(full_disk),
        cmocka_unit_test(what_cannot_be),
        cmocka_unit_test(large_and_binary),
    };
    return cmocka_run_group_tests(tests, make_folder, drop_folder);
}
