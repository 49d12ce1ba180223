/* The reference page of all keys, docs/case-file.md.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "keys.h"

#include <string.h>

/* A table's cell; a bar would end it. */
static void cell(FILE *to, const char *text)
{
    fputs("| ", to);
    for (; text && *text; ++text) {
        if (*text == '|') fputc('\\', to);
        fputc(*text, to);
    }
    fputc(' ', to);
}

static void sentence(FILE *to, const char *text)
{
    fprintf(to, "%c%s.\n\n", *text >= 'a' && *text <= 'z' ? *text - 'a' + 'A' : *text, text + 1);
}

static void key_line(FILE *to, const struct sp_key *row)
{
    struct sp_key_info k = {.path = row->path, .type = sp_key_type(row), .need = sp_key_need(row)};
    bool number = row->shape == SP_SHAPE_QUANTITY || row->shape == SP_SHAPE_LIST ||
                  row->shape == SP_SHAPE_MATRIX || row->shape == SP_SHAPE_THREE;
    char type[120], fallback[200];
    snprintf(type, sizeof type, "%s%s", k.type, row->or_none ? " or `none`" : "");
    snprintf(fallback, sizeof fallback, "%s%s%s", row->fallback ? row->fallback : "*",
             row->fallback ? "" : k.need, row->fallback ? "" : "*");
    fprintf(to, "| `%s` ", sp_key_name(row));
    cell(to, type);
    cell(to, number ? sp_kind_si(row->kind) : "");
    cell(to, fallback);
    cell(to, row->range);
    cell(to, row->meaning);
    cell(to, row->basis);
    fputs("|\n", to);
}

/* `list`: the group's row. */
static void group_section(FILE *to, const char *group, const char *meaning, const struct sp_key *list)
{
    const struct sp_key *row;
    bool headed = false;
    fprintf(to, "## %s%s%s\n\n", *group ? "`" : "The case", *group ? group : "", *group ? "`" : "");
    sentence(to, meaning);
    if (list && list->plural)
        fprintf(to, "Instead of `%s` a list may stand: `%s`, of 1 to %zu such objects, %s.\n\n",
                sp_key_name(list), list->plural, list->most, list->listed);
    for (size_t i = 0; (row = sp_key_row(i)) != NULL; ++i) {
        if (!sp_key_child(row, group)) continue;
        if (!headed)
            fputs("| key | kind | SI unit | default | range | meaning | basis "
                  "|\n|---|---|---|---|---|---|---|\n",
                  to);
        headed = true;
        key_line(to, row);
    }
    fputc('\n', to);
}

static void columns(FILE *to)
{
    fputs("## Columns of a trace\n\nA trace's heading line holds these names with their units, as "
          "`speed [km/h]`; `drive[].columns` maps other headings to them.\n\n"
          "| column | kind | SI unit | meaning |\n|---|---|---|---|\n",
          to);
    for (int c = 0; c < SP_COLUMNS; ++c) {
        bool mark = c == SP_COL_MARK;
        enum sp_kind kind = mark ? SP_K_NUMBER : sp_column_kind((enum sp_column)c);
        fprintf(to, "| `%s` ", sp_column_name((enum sp_column)c));
        cell(to, mark ? "text" : sp_kind_name(kind));
        cell(to, mark ? "" : sp_kind_si(kind));
        cell(to, sp_column_meaning((enum sp_column)c));
        fputs("|\n", to);
    }
    fputc('\n', to);
}

static const char *const opening[] = {
    "# The case file",
    "",
    "A case is one JSON object. Every value with a dimension is a text with its unit, such as `\"450 cm2\"`,",
    "`\"92 degC\"`, `\"110 l/min\"`; a bare number is accepted only where the SI unit below is 1, and `\"45 "
    "%\"` is",
    "0.45 there. A difference of temperatures is given in K or degR, never in degC. Paths are relative to "
    "the file",
    "that names them. Unknown keys, `null` and doubled keys are complaints. A list or table has at most 4096 "
    "rows,",
    "an object at most 1000 keys.",
    "",
    "`car` may be an object or the path of a file that holds that object; with `\"from\": \"other.json\"` "
    "the object",
    "overrides the car in that file key by key. On the command line `--set PATH=VALUE` overrides any key:",
    "`--set air.ambient=\"38 degC\"`, `--set drive[1].repeat=3`, `--set duct.exit.area=\"600 cm2\"` (keys of "
    "the car",
    "may go without `car.`). Setting `air.pressure` drops `air.altitude`, and the reverse.",
    "",
    "Of ducts, and of cores, fans and exits in a duct, there may be several: then a list stands under the",
    "plural, `\"cores\": [ {...}, {...} ]` in place of `\"core\": {...}`, never both. The first is `cores[0]`:",
    "`--set duct.cores[1].blocked=\"30 %\"`, `--set ducts[0].inlet.area=\"400 cm2\"`; complaints tell elements",
    "apart in the same way. A path may say `cores[0]` where the case has one `core`, or `core` where it has a",
    "list of one; of a longer list the index must be said. `--set duct.cores=[...]` drops `core`, and a list in",
    "a car `from` another replaces all that stood there.",
    "",
    "`changes` tells what becomes different during the drive, such as a blocked inlet or a dead fan:",
    "",
    "    \"changes\": [ { \"at\": \"12 min\",",
    "                   \"set\": { \"duct.inlet.blocked\": \"40 %\", \"duct.fan.health\": \"dead\" } },",
    "                 { \"at\": \"100 s\", \"every\": \"100 s\", \"times\": 9,",
    "                   \"add\": { \"duct.core.blocked\": \"1 %\" } } ]",
    "",
    "Times count from the start of the drive; changes add up, those of one time in the order of the file.",
    "`add` adds to the value that held until then; what it adds to a temperature is a difference, in K. Keys of",
    "the car and of `limits` may change, one by one, except `engine`, `body`, `gauge`, the coolant's kind and",
    "mix, the battery's size, and whatever would change how many ducts, cores and fans there are, what a core",
    "carries, its cells or its law of heat: these are laid out before the drive begins. Defaults by rule follow",
    "the changed values. Complaints name the value as `changes[0].set.\"duct.inlet.blocked\"`; on the command line",
    "`--set changes[0].set.duct.inlet.blocked=\"50 %\"` changes it, and `--set changes[0].at=\"8 min\"` its time.",
    "",
    "The default column holds what is taken when the key is absent; in italics, when the key is needed. The "
    "basis",
    "says what that default rests on: *common practice* and *from memory* are working numbers of the trade, "
    "to be",
    "replaced by what you know of the car; *own input* has none.",
    "",
    "This page is written by the program from the tables it reads cases with.",
    "",
};

void sp_keys_document(FILE *to)
{
    const struct sp_key *row;
    for (size_t i = 0; i < sizeof opening / sizeof *opening; ++i)
        fprintf(to, "%s\n", opening[i]);
    group_section(to, "", "what stands at the top", NULL);
    for (size_t i = 0; (row = sp_key_row(i)) != NULL; ++i)
        if (row->shape == SP_SHAPE_GROUP || row->or_object) group_section(to, row->path, row->meaning, row);
    columns(to);
}
