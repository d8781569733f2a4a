/* SPDX-License-Identifier: GPL-3.0-or-later
 * Parsing by the option table. */
#include "cli/options.h"

#include <string.h>

#include "meltwright/text.h"

static const struct {
    const char *name;
    char letter;
    bool takes_value;
    unsigned on;
} table[OPTION_COUNT] = {
#define X(id, name, letter, value, on, metavar, standard, help) {name, letter, value, on},
    OPTION_LIST(X)
#undef X
};

const char *option_name(option_id id)
{
    return table[id].name;
}

#define BEAM_LIST "--d4sigma, --fwhm, --radius-1e2 or --diameter-1e2"

/* Words that leave open which beam size is meant: a factor 2 there is a factor 2.8 in energy per volume. */
static bool is_bare_beam(const char *name)
{
    static const char *const loose[] = {"spot", "spot-size", "spotsize", "beam", "beam-diameter", "diameter", "radius", "spot-diameter", "beam-size", "waist"};
    for (size_t i = 0; i < sizeof loose / sizeof *loose; i++)
        if (mw_same_word(name, loose[i]))
            return true;
    return false;
}

static mw_status unknown_option(const command_entry *of, const char *name, mw_error *err)
{
    if ((of->on & ON_MODELS) != 0 && is_bare_beam(name))
        return mw_fail(err, MW_BAD_USAGE, NULL, 0, "--%s does not say which size is meant; use one of " BEAM_LIST, name);
    for (size_t i = 0; i < OPTION_COUNT; i++)
        if (strcmp(table[i].name, name) == 0)
            return mw_fail(err, MW_BAD_USAGE, NULL, 0, "--%s is no option of '%s'", name, of->name);
    /* Names that other versions of the commands take: a near miss would only mislead. */
    static const char *const elsewhere[] = {"machine", "lot", "fit"};
    for (size_t i = 0; i < sizeof elsewhere / sizeof *elsewhere; i++)
        if (strcmp(elsewhere[i], name) == 0)
            return mw_fail(err, MW_BAD_USAGE, NULL, 0, "--%s is not in this version", name);
    const char *names[OPTION_COUNT];
    for (size_t i = 0; i < OPTION_COUNT; i++)
        names[i] = (table[i].on & of->on) != 0 ? table[i].name : NULL;
    const char *near = mw_nearest_name(name, names, OPTION_COUNT);
    return near != NULL ? mw_fail(err, MW_BAD_USAGE, NULL, 0, "unknown option --%.40s; did you mean --%s?", name, near)
                        : mw_fail(err, MW_BAD_USAGE, NULL, 0, "unknown option --%.40s", name);
}

static bool find_long(const command_entry *of, const char *name, option_id *id)
{
    for (size_t i = 0; i < OPTION_COUNT; i++)
        if ((table[i].on & of->on) != 0 && strcmp(table[i].name, name) == 0) {
            *id = (option_id)i;
            return true;
        }
    return false;
}

static bool find_letter(const command_entry *of, char letter, option_id *id)
{
    for (size_t i = 0; i < OPTION_COUNT; i++)
        if ((table[i].on & of->on) != 0 && table[i].letter != 0 && table[i].letter == letter) {
            *id = (option_id)i;
            return true;
        }
    return false;
}

static mw_status record(arguments *out, option_id id, const char *value, mw_error *err)
{
    if (out->value[id] != NULL)
        return mw_fail(err, MW_BAD_USAGE, NULL, 0, "--%s is given twice", table[id].name);
    out->value[id] = value;
    out->order[out->n_order++] = id;
    return MW_OK;
}

/* A value that looks like the next option is most likely a forgotten value; "-" and negative numbers are values. */
static bool is_value(const char *text)
{
    return text != NULL && (text[0] != '-' || text[1] == '\0' || (text[1] >= '0' && text[1] <= '9') || text[1] == '.');
}

static mw_status take_option(const command_entry *of, char **argv, int argc, int *i, arguments *out, mw_error *err)
{
    char name[64];
    const char *given = argv[*i], *value = NULL;
    option_id id;
    if (given[1] == '-') {
        const char *equals = strchr(given, '=');
        const size_t n = equals != NULL ? (size_t)(equals - given - 2) : strlen(given) - 2;
        if (n == 0 || n >= sizeof name)
            return mw_fail(err, MW_BAD_USAGE, NULL, 0, "unknown option %.40s", given);
        memcpy(name, given + 2, n);
        name[n] = '\0';
        value = equals != NULL ? equals + 1 : NULL;
        if (!find_long(of, name, &id))
            return unknown_option(of, name, err);
    } else if (!find_letter(of, given[1], &id)) {
        return mw_fail(err, MW_BAD_USAGE, NULL, 0, "unknown option %.40s", given);
    } else if (given[2] != '\0') {
        value = given + 2;
    }
    if (!table[id].takes_value)
        return value != NULL ? mw_fail(err, MW_BAD_USAGE, NULL, 0, "--%s takes no value", table[id].name) : record(out, id, "", err);
    if (value == NULL) {
        const char *next = *i + 1 < argc ? argv[*i + 1] : NULL;
        if (!is_value(next))
            return mw_fail(err, MW_BAD_USAGE, NULL, 0, "--%s needs a value", table[id].name);
        value = next;
        ++*i;
    }
    return record(out, id, value, err);
}

mw_status parse_arguments(const command_entry *of, int argc, char **argv, arguments *out, mw_error *err)
{
    memset(out, 0, sizeof *out);
    out->command = of->name;
    out->on = of->on;
    for (int i = 0; i < argc; i++) {
        if (argv[i][0] == '-' && argv[i][1] != '\0') {
            const mw_status status = take_option(of, argv, argc, &i, out, err);
            if (status != MW_OK)
                return status;
        } else if (out->n_word == MOST_WORDS) {
            return mw_fail(err, MW_BAD_USAGE, NULL, 0, "more than %d words", MOST_WORDS);
        } else {
            out->word[out->n_word++] = argv[i];
        }
    }
    return MW_OK;
}
