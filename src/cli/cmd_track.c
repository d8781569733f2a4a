/* SPDX-License-Identifier: GPL-3.0-or-later
 * track: one setting. */
#include "cli/common.h"
#include "meltwright/track_text.h"

static mw_status print_result(FILE *to, output_format format, const mw_plan *plan, const mw_result *r, const mw_provenance *provenance)
{
    if (format == FORMAT_CSV) {
        mw_csv_header(to, NULL);
        (void)fputc('\n', to);
        mw_csv_row(to, r, NULL);
        (void)fputc('\n', to);
        return MW_OK;
    }
    if (format == FORMAT_JSON) {
        (void)fputs("{\"made_by\": ", to);
        mw_json_provenance(to, provenance);
        (void)fputs(",\n\"results\": [\n", to);
        mw_json_result(to, r);
        (void)fputs("\n]}\n", to);
        return MW_OK;
    }
    mw_outlook outlook;
    mw_status status = MW_OK;
    if (r->judged)
        status = mw_outlook_at(plan, r, &outlook);
    if (status == MW_OK)
        mw_track_text(to, plan, r, r->judged ? &outlook : NULL);
    return status;
}

int run_track(const arguments *args)
{
    if (given(args, OPT_FROM))
        return run_track_table(args);
    mw_error err = {MW_OK, ""};
    mw_alloy *alloy = NULL;
    mw_plan plan;
    mw_setting setting;
    output_format format;
    mw_result result;
    mw_status status = refuse_words(args, &err);
    if (status == MW_OK && given(args, OPT_SHARD))
        status = mw_fail(&err, MW_BAD_USAGE, NULL, 0, "--shard goes with --from");
    int threads;
    if (status == MW_OK)
        status = read_threads(args, &threads, &err); /* one setting needs one; a wrong number is wrong all the same */
    if (status == MW_OK)
        status = need(args, OPT_POWER, &err);
    if (status == MW_OK)
        status = need(args, OPT_SPEED, &err);
    if (status == MW_OK)
        status = read_setting(args, true, &setting, &err);
    if (status == MW_OK)
        status = read_format(args, FORMAT_TEXT, &format, &err);
    if (status == MW_OK)
        status = make_plan(args, &alloy, &plan, &err);
    if (status != MW_OK)
        return complain(args->command, &err);
    status = mw_evaluate(&plan, &setting, true, &result, &err);
    output out = {0};
    if (status >= 0)
        status = open_output(args, &out, &err);
    if (status == MW_OK) {
        provenance_store store;
        mw_provenance provenance;
        fill_provenance(args, &plan, &store, &provenance);
        status = print_result(out.to, format, &plan, &result, &provenance);
        if (status == MW_OK)
            status = close_output(&out, &provenance, &err);
        else
            (void)mw_fail(&err, status, NULL, 0, "%s", mw_status_sentence(status));
    }
    drop_output(&out);
    mw_alloy_free(alloy);
    if (status < 0)
        return complain(args->command, &err);
    return result.status == MW_NO_MELT ? EXIT_NO : EXIT_DONE;
}
