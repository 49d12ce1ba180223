/* Fuzzing the JSON reader against a second judge.
 *
 * The judge below shares no code with the reader: a validator by recursive descent that asks one question
 * only, whether the text is to be taken. Both must agree on every input. Run:
 *     fuzz_json tests/fuzz/corpus/json
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "base/json.h"

#include <math.h>
#include <stdint.h>
#include <stdlib.h>
#include <string.h>

int LLVMFuzzerTestOneInput(const uint8_t *data, size_t size);

/* ---- the judge: one byte of look-ahead, keys kept decoded ---------------------------------- */

struct judge {
    const uint8_t *text;
    size_t at, size;
    int deep;
    size_t values;
    bool bad;
};

struct key {
    uint8_t *text;
    size_t size;
};

static int peek(const struct judge *j) { return j->at < j->size ? j->text[j->at] : -1; }

static int take(struct judge *j)
{
    int c = peek(j);
    if (c >= 0) j->at++;
    return c;
}

static void must_take(struct judge *j, const char *word)
{
    for (; *word; word++)
        if (take(j) != *word) j->bad = true;
}

static void spaces(struct judge *j)
{
    while (peek(j) == 0x20 || peek(j) == 0x09 || peek(j) == 0x0a || peek(j) == 0x0d) j->at++;
}

static void push(struct key *k, unsigned byte)
{
    k->text = realloc(k->text, k->size + 1);
    if (!k->text) abort();
    k->text[k->size++] = (uint8_t)byte;
}

static void push_code(struct key *k, uint32_t code)
{
    if (code < 0x80) {
        push(k, code);
    } else if (code < 0x800) {
        push(k, 0xc0 | code >> 6);
        push(k, 0x80 | (code & 63));
    } else if (code < 0x10000) {
        push(k, 0xe0 | code >> 12);
        push(k, 0x80 | (code >> 6 & 63));
        push(k, 0x80 | (code & 63));
    } else {
        push(k, 0xf0 | code >> 18);
        push(k, 0x80 | (code >> 12 & 63));
        push(k, 0x80 | (code >> 6 & 63));
        push(k, 0x80 | (code & 63));
    }
}

static uint32_t four(struct judge *j)
{
    uint32_t code = 0;
    for (int i = 0; i < 4; i++) {
        static const char all[] = "0123456789abcdef0123456789ABCDEF";
        int c = take(j);
        const char *found = c > 0 ? strchr(all, c) : NULL;
        if (!found) {
            j->bad = true;
            return 1;
        }
        code = code << 4 | (uint32_t)((found - all) & 15);
    }
    return code;
}

static void escaped(struct judge *j, struct key *k)
{
    static const char from[] = "\"\\/bfnrt", to[] = "\"\\/\b\f\n\r\t";
    int c = take(j);
    uint32_t code;
    if (c != 'u') {
        const char *found = c > 0 ? strchr(from, c) : NULL;
        if (found)
            push(k, (unsigned)to[found - from]);
        else
            j->bad = true;
        return;
    }
    code = four(j);
    if (code >= 0xd800 && code < 0xdc00 && !j->bad) {
        uint32_t low;
        must_take(j, "\\u");
        low = four(j);
        if (low < 0xdc00 || low > 0xdfff) j->bad = true;
        code = 0x10000 + ((code - 0xd800) << 10) + (low - 0xdc00);
    } else if (code == 0 || (code >= 0xdc00 && code < 0xe000)) {
        j->bad = true;
    }
    if (!j->bad) push_code(k, code);
}

/* One character of more than a byte, by the table of RFC 3629 section 4. */
static void wide(struct judge *j, int first, struct key *k)
{
    int low = 0x80, high = 0xbf, more;
    if (first >= 0xc2 && first <= 0xdf)
        more = 1;
    else if (first >= 0xe0 && first <= 0xef)
        more = 2;
    else if (first >= 0xf0 && first <= 0xf4)
        more = 3;
    else {
        j->bad = true;
        return;
    }
    if (first == 0xe0) low = 0xa0;
    if (first == 0xed) high = 0x9f;
    if (first == 0xf0) low = 0x90;
    if (first == 0xf4) high = 0x8f;
    push(k, (unsigned)first);
    for (; more > 0; more--) {
        int c = take(j);
        if (c < low || c > high) {
            j->bad = true;
            return;
        }
        push(k, (unsigned)c);
        low = 0x80;
        high = 0xbf;
    }
}

static struct key string(struct judge *j)
{
    struct key k = {NULL, 0};
    if (take(j) != '"') j->bad = true;
    while (!j->bad) {
        int c = take(j);
        if (c == '"') break;
        if (c < 0x20)
            j->bad = true; /* also the end */
        else if (c == '\\')
            escaped(j, &k);
        else if (c < 0x80)
            push(&k, (unsigned)c);
        else
            wide(j, c, &k);
    }
    return k;
}

static size_t figures(struct judge *j)
{
    size_t n = 0;
    for (; peek(j) >= '0' && peek(j) <= '9'; n++) j->at++;
    return n;
}

static void number(struct judge *j)
{
    size_t start = j->at;
    char *copy;
    if (peek(j) == '-') j->at++;
    if (peek(j) == '0')
        j->at++;
    else if (figures(j) == 0)
        j->bad = true;
    if (peek(j) == '.') {
        j->at++;
        if (figures(j) == 0) j->bad = true;
    }
    if (peek(j) == 'e' || peek(j) == 'E') {
        j->at++;
        if (peek(j) == '+' || peek(j) == '-') j->at++;
        if (figures(j) == 0) j->bad = true;
    }
    if (j->bad) return;
    copy = calloc(1, j->at - start + 1);
    if (!copy) abort();
    memcpy(copy, j->text + start, j->at - start);
    if (isinf(strtod(copy, NULL))) j->bad = true;
    free(copy);
}

static void value(struct judge *j);

static void list(struct judge *j)
{
    j->at++;
    spaces(j);
    if (peek(j) == ']') {
        j->at++;
        return;
    }
    while (!j->bad) {
        int c;
        value(j);
        spaces(j);
        c = take(j);
        if (c == ']') return;
        if (c != ',') j->bad = true;
    }
}

static void object(struct judge *j)
{
    struct key *keys = NULL;
    size_t count = 0;
    j->at++;
    spaces(j);
    if (peek(j) == '}') {
        j->at++;
        return;
    }
    while (!j->bad) {
        int c;
        spaces(j);
        keys = realloc(keys, (count + 1) * sizeof *keys);
        if (!keys) abort();
        keys[count] = string(j);
        for (size_t i = 0; i < count; i++)
            if (keys[i].size == keys[count].size &&
                (keys[i].size == 0 || memcmp(keys[i].text, keys[count].text, keys[i].size) == 0))
                j->bad = true;
        if (++count > 1000) j->bad = true;
        spaces(j);
        must_take(j, ":");
        if (j->bad) break;
        value(j);
        spaces(j);
        c = take(j);
        if (c == '}') break;
        if (c != ',') j->bad = true;
    }
    for (size_t i = 0; i < count; i++) free(keys[i].text);
    free(keys);
}

static void value(struct judge *j)
{
    spaces(j);
    if (++j->values > 1000000) j->bad = true;
    if (j->bad) return;
    switch (peek(j)) {
    case '"':
        free(string(j).text);
        return;
    case 't':
        must_take(j, "true");
        return;
    case 'f':
        must_take(j, "false");
        return;
    case 'n':
        must_take(j, "null");
        return;
    case '[':
    case '{':
        if (++j->deep > 64)
            j->bad = true;
        else if (peek(j) == '[')
            list(j);
        else
            object(j);
        j->deep--;
        return;
    default:
        number(j);
    }
}

static bool judged(const uint8_t *data, size_t size)
{
    struct judge j = {data, 0, size, 0, 0, false};
    value(&j);
    spaces(&j);
    return !j.bad && j.at == size;
}

/* ---- the harness --------------------------------------------------------------------------- */

static size_t walk(const struct sp_json *n, long least, long most)
{
    char out[80];
    size_t count = 0;
    for (; n; n = n->next) {
        if (n->line < least || n->line > most) abort();
        if (n->type == SP_JSON_NUMBER && !(n->text && n->number == strtod(n->text, NULL))) abort();
        if ((n->type == SP_JSON_STRING) && !n->text) abort();
        for (size_t room = 0; room < sizeof out; room += 13) {
            sp_json_describe(n, out, room);
            if (room && strlen(out) >= room) abort();
        }
        count += 1 + walk(n->child, n->line, most);
        least = n->line;
    }
    return count;
}

static struct sp_json *parse(const uint8_t *data, size_t size, struct sp_complaints *c)
{
    struct sp_json *tree = sp_json_parse("a", "b", (const char *)data, size, c);
    if (c->count == 0) return tree;
    sp_json_free(tree); /* keys that stand twice leave one that is not to be used */
    return NULL;
}

static void print(const struct sp_complaints *c, long lines)
{
    char *text = NULL;
    size_t size = 0, breaks = 0;
    FILE *to = open_memstream(&text, &size);
    if (!to) abort();
    sp_complaints_print(c, false, to);
    fclose(to);
    for (size_t i = 0; i < size; i++) breaks += text[i] == '\n';
    if (breaks != c->count + (c->dropped != 0)) abort();
    for (size_t i = 0; i < c->count; i++)
        if (c->list[i].line < 1 || c->list[i].line > lines) abort();
    free(text);
}

/* Merging a tree over itself changes nothing but where it came from. */
static void exercise(struct sp_json *tree, const uint8_t *data, size_t size, long lines)
{
    struct sp_complaints none = {0};
    struct sp_json *again = parse(data, size, &none);
    size_t count = walk(tree, 1, lines);
    if (!again || none.count) abort();
    tree = sp_json_merge(tree, again);
    if (walk(tree, 1, lines) != count) abort();
    if (tree->type == SP_JSON_OBJECT) {
        const char *key = tree->child ? tree->child->key : "new";
        struct sp_json *v = sp_json_value("c", "{\"a\":[1]}");
        char *own = strdup(key);
        if (!own || !sp_json_put(tree, own, v) || sp_json_member(tree, own) != v) abort();
        if (!sp_json_drop(tree, own) || sp_json_member(tree, own)) abort();
        free(own);
    }
    sp_json_free(tree);
}

int LLVMFuzzerTestOneInput(const uint8_t *data, size_t size)
{
    struct sp_complaints c = {0};
    struct sp_json *tree = parse(data, size, &c);
    long lines = 1;
    char *text;
    for (size_t i = 0; i < size; i++) lines += data[i] == '\n';
    if ((tree != NULL) != judged(data, size)) abort();
    if ((tree != NULL) != (c.count == 0)) abort();
    print(&c, lines);
    if (tree) exercise(tree, data, size, lines);
    sp_complaints_free(&c);
    text = calloc(1, size + 1); /* any text at all is a value of --set */
    if (!text) abort();
    if (size) memcpy(text, data, size);
    tree = sp_json_value("v", text);
    if (!tree) abort();
    sp_json_free(tree);
    free(text);
    return 0;
}
