/* A value as its user wrote it.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "base/text.h"
#include "case.h"

#include <string.h>

void sp_written_text(FILE *to, const char *text, bool json)
{
    const char *end = text + strlen(text);
    while (text < end) {
        long code = 0;
        size_t n = sp_text_code(text, end, &code);
        bool odd = n == 0 || sp_text_unprintable(code);
        if (!odd && json && (*text == '"' || *text == '\\')) fputc('\\', to);
        if (!odd)
            fwrite(text, 1, n, to);
        else if (json && n)
            fprintf(to, "\\u%04lx", (unsigned long)code & 0xffffUL);
        else
            fputc('?', to);
        text += n ? n : 1;
    }
}

void sp_written_node(FILE *to, const struct sp_json *node, bool json, bool inner)
{
    const char *quote = !inner ? "" : json ? "\\\"" : "\"";
    if (node->type == SP_JSON_STRING) {
        fputs(quote, to);
        sp_written_text(to, node->text, json);
        fputs(quote, to);
    } else if (node->type == SP_JSON_NUMBER) {
        sp_written_text(to, node->text, json);
    } else if (node->type == SP_JSON_ARRAY) {
        fputc('[', to);
        for (const struct sp_json *c = node->child; c; c = c->next) {
            sp_written_node(to, c, json, true);
            if (c->next) fputs(", ", to);
        }
        fputc(']', to);
    } else if (node->type == SP_JSON_OBJECT) {
        fputc('{', to);
        for (const struct sp_json *c = node->child; c; c = c->next) {
            sp_written_text(to, c->key, json);
            fputs(": ", to);
            sp_written_node(to, c, json, true);
            if (c->next) fputs(", ", to);
        }
        fputc('}', to);
    } else {
        fputs(node->type == SP_JSON_TRUE ? "true" : node->type == SP_JSON_FALSE ? "false" : "null", to);
    }
}
