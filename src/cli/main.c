/* SPDX-License-Identifier: GPL-3.0-or-later
 * The program: finds the command, runs it, and makes sure that what was printed arrived. */
#define _POSIX_C_SOURCE 200809L
#include <errno.h>
#include <fcntl.h>
#include <signal.h>
#include <stdio.h>
#include <string.h>
#include <unistd.h>

#include "cli/common.h"
#include "cli/options.h"
#include "meltwright/text.h"
#include "meltwright/version.h"

static const command_entry *find_command(const char *name)
{
    for (size_t i = 0; i < command_count; i++)
        if (strcmp(command_list[i].name, name) == 0)
            return &command_list[i];
    return NULL;
}

static int unknown_command(const char *name)
{
    const char *names[16];
    for (size_t i = 0; i < command_count; i++)
        names[i] = command_list[i].name;
    const char *near = mw_nearest_name(name, names, command_count);
    mw_error err;
    (void)mw_fail(&err, MW_BAD_USAGE, NULL, 0, near != NULL ? "unknown command '%.40s'; did you mean '%s'?" : "unknown command '%.40s'", name, near);
    return complain(NULL, &err);
}

static int run(int argc, char **argv)
{
    if (argc < 2) {
        print_usage();
        return EXIT_MISUSE;
    }
    if (strcmp(argv[1], "--help") == 0 || strcmp(argv[1], "-h") == 0) {
        print_help();
        return EXIT_DONE;
    }
    if (strcmp(argv[1], "--version") == 0) {
        (void)printf("meltwright %s\n", mw_version());
        return EXIT_DONE;
    }
    const command_entry *of = find_command(argv[1]);
    if (of == NULL)
        return unknown_command(argv[1]);
    arguments args;
    mw_error err;
    if (parse_arguments(of, argc - 2, argv + 2, &args, &err) != MW_OK)
        return complain(of->name, &err);
    if (args.value[OPT_HELP] != NULL) {
        print_command_help(of);
        return EXIT_DONE;
    }
    return of->run(&args);
}

/* A closed standard stream would be given to the next file that is opened, and tables would land in it. The stand-in has the wrong
 * direction, so that using it fails as a closed one does. */
static void hold_standard_streams(void)
{
    for (int fd = 0; fd < 3; fd++)
        if (fcntl(fd, F_GETFD) < 0)
            (void)open("/dev/null", fd == 0 ? O_WRONLY : O_RDONLY);
}

/* Ctrl-C and its like: nothing half-written stays behind, and the shell sees what ended the program. */
static void end_by_signal(int number)
{
    mw_file_remove_unfinished();
    (void)signal(number, SIG_DFL);
    (void)raise(number);
}

int main(int argc, char **argv)
{
    (void)signal(SIGINT, end_by_signal);
    (void)signal(SIGTERM, end_by_signal);
    if (signal(SIGHUP, end_by_signal) == SIG_IGN) /* nohup meant it */
        (void)signal(SIGHUP, SIG_IGN);
    hold_standard_streams();
    /* A closed pipe is an answer to be given by exit code, not a death by signal. */
    (void)signal(SIGPIPE, SIG_IGN);
    const int code = run(argc, argv);
    errno = 0;
    const int lost = ferror(stdout) | fflush(stdout);
    if (lost != 0 || fclose(stdout) != 0) {
        if (code != EXIT_NOT_WRITTEN) /* else it has been said */
            (void)fprintf(stderr, "meltwright: standard output could not be written: %s\n", errno != 0 ? strerror(errno) : "closed or full");
        return EXIT_NOT_WRITTEN;
    }
    return code;
}
