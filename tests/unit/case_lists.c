/* Several ducts, cores, fans and exits: lists in the place of one. Expected numbers are exact conversions.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "case_text.h"

static int begin(void **state)
{
    (void)state;
    units = sp_units_open();
    return units ? 0 : 1;
}

static int end(void **state)
{
    (void)state;
    sp_units_close(units);
    return 0;
}

#define CORE "{\"width\": \"480 mm\", \"height\": \"340 mm\", \"depth\": \"42 mm\", " COEFFICIENT "}"
#define THIN                                                                                                 \
    "{\"width\": \"300 mm\", \"height\": \"200 mm\", \"depth\": \"21 mm\", \"pressure_drop\": "              \
    "{\"linear\": \"60 Pa.s/m\", \"quadratic\": \"12 Pa.s2/m2\"}}"
#define FAN       "{\"curve\": {\"shutoff\": \"100 Pa\", \"free_flow\": \"1 m3/s\"}, " WIDE("300")
#define WIDE(mm)  "\"diameter\": \"" mm " mm\"}"
#define BIG_FAN   "{\"curve\": [[\"0 m3/s\", \"160 Pa\"], [\"0.63 m3/s\", \"0 Pa\"]], " WIDE("400")
#define EXIT_OF   "{\"area\": \"600 cm2\"}"
#define CASE(car) "{" AIR ", \"car\": {" car "}}"
/* A duct with these in it. */
#define PARTS(cores, fans, exits) "{" INLET ", " cores ", " fans ", " exits "}"
#define MANY                                                                                                 \
    PARTS("\"cores\": [" CORE ", " THIN "]", "\"fans\": [" FAN ", " BIG_FAN "]",                             \
          "\"exits\": [" EXIT_OF ", {\"area\": \"100 cm2\", \"loss\": 0.6}, {\"area\": \"50 cm2\"}]")
#define ONE  PARTS("\"core\": " CORE, "\"fan\": " FAN, "\"exit\": " EXIT_OF)
#define LIST PARTS("\"cores\": [" CORE "]", "\"fans\": [" FAN "]", "\"exits\": [" EXIT_OF "]")

#define SET(text) ((char *const[]){(char *)(size_t)(text)})

static void one_complaint(const char *text, char *const *set, size_t sets, const char *path,
                          const char *found, const char *expected, int source)
{
    struct result r = parse_set(text, SP_FOR_DUCT, set, sets);
    if (r.complaints.count != 1 || !has(&r.complaints, NULL, 0, path, found, expected)) {
        print_error("at line %d: want one complaint, %s: %s; %s\n", source, path, found ? found : "",
                    expected ? expected : "");
        sp_complaints_print(&r.complaints, false, stderr);
        fail();
    }
    drop(&r);
}
#define refused(text, path, found, expected) one_complaint(text, NULL, 0, path, found, expected, __LINE__)
#define set_refused(text, set, path, found, expected)                                                        \
    one_complaint(text, SET(set), 1, path, found, expected, __LINE__)

/* ---- what is read ---------------------------------------------------------------------------------- */

/* One alone, lists of one, and both kinds of mixture fill the same bytes. */
static void one_is_a_list_of_one(void **state)
{
    (void)state;
    static const char *const forms[] = {CASE("\"duct\": " LIST), CASE("\"ducts\": [" ONE "]"),
                                        CASE("\"ducts\": [" LIST "]")};
    struct result one = must(CASE("\"duct\": " ONE), SP_FOR_DUCT);
    assert_int_equal(one.design->ducts, 0);
    assert_int_equal(one.design->duct[0].cores, 0);
    assert_int_equal(one.design->duct[0].exits, 0);
    for (size_t i = 0; i < 3; ++i) {
        struct result r = must(forms[i], SP_FOR_DUCT);
        struct sp_duct_design duct = r.design->duct[0];
        assert_int_equal(r.design->ducts, i > 0);
        assert_int_equal(duct.cores, i != 1);
        assert_int_equal(duct.exits, i != 1);
        duct.cores = duct.exits = 0;
        assert_memory_equal(&duct, &one.design->duct[0], sizeof duct);
        assert_memory_equal(&r.design->tank, &one.design->tank, sizeof r.design->tank);
        drop(&r);
    }
    drop(&one);
}

static void elements_in_si(void **state)
{
    (void)state;
    struct result r = must(CASE("\"ducts\": [" MANY ", " ONE ", " MANY "]"), SP_FOR_DUCT);
    const struct sp_duct_design *d = r.design->duct;
    assert_int_equal(r.design->ducts, 3);
    for (size_t i = 0; i < 3; ++i) {
        bool many = i != 1;
        assert_int_equal(d[i].cores, many ? 2 : 0);
        assert_int_equal(d[i].exits, many ? 3 : 0);
        assert_true(d[i].fan[0].fitted && d[i].fan[1].fitted == many && !d[i].fan[2].fitted);
        check_close(d[i].inlet.area, 0.045, 1e-14, 0.0);
        check_close(d[i].inlet.recovery, 1.0, 0.0, 0.0); /* default */
        check_close(d[i].core[0].coefficient, 8.0, 0.0, 0.0);
        assert_int_equal(d[i].core[0].drop_law, SP_DROP_COEFFICIENT);
        check_close(d[i].core[0].coolant_volume, 1e-3 * (0.13 * 6.8544 + 1.3 * 0.85), 1e-12, 0.0);
        check_close(d[i].fan[0].hub, 0.105, 1e-12, 0.0);
        check_close(d[i].exit[0].area, 0.06, 1e-14, 0.0);
        if (!many) continue;
        check_close(d[i].core[1].linear, 60.0, 0.0, 0.0);
        assert_int_equal(d[i].core[1].drop_law, SP_DROP_LINEAR);
        check_close(d[i].core[1].coolant_volume, 1e-3 * (0.13 * 1.26 + 1.3 * 0.5), 1e-12, 0.0);
        assert_int_equal(d[i].fan[1].curve.pairs.rows, 2);
        check_close(d[i].fan[1].curve.pairs.cell[1], 160.0, 0.0, 0.0);
        check_close(d[i].fan[1].hub, 0.14, 1e-12, 0.0);
        check_close(d[i].exit[1].loss, 0.6, 0.0, 0.0);
        check_close(d[i].exit[2].area, 0.005, 1e-14, 0.0);
        check_close(d[i].exit[2].loss, 0.0, 0.0, 0.0);
    }
    drop(&r);
}

/* Coolant of all cores stands in the tank's default: 0.11/0.89 of the circuit, and twice that. */
static void tank_holds_for_all_cores(void **state)
{
    (void)state;
#define ENGINE "\"engine\": {\"displacement\": \"2 l\"}, "
    struct result one = must(CASE(ENGINE "\"duct\": " ONE), SP_FOR_DUCT),
                  two = must(CASE(ENGINE "\"ducts\": [" ONE ", " ONE "]"), SP_FOR_DUCT);
    double core = one.design->duct[0].core[0].coolant_volume;
    check_close(two.design->tank.air_space - one.design->tank.air_space, 0.11 / 0.89 * core, 1e-12, 0.0);
    drop(&one);
    drop(&two);
}

/* ---- --set ----------------------------------------------------------------------------------------- */

#define TWO CASE("\"ducts\": [" MANY ", " ONE "]")

static double set_area(const char *text, const char *set)
{
    struct result r = must_set(text, SP_FOR_DUCT, SET(set), 1);
    double area = NAN;
    for (size_t i = 0; i < 2; ++i)
        for (size_t k = 0; k < 3; ++k)
            if (r.design->duct[i].exit[k].area > 0.9) area = 10.0 * (double)i + (double)k;
    drop(&r);
    return area;
}

/* Which exit became 1 m2, as 10 times the duct's index and the exit's. */
static void settings_find_elements(void **state)
{
    (void)state;
    check_close(set_area(TWO, "ducts[0].exits[2].area=1 m2"), 2.0, 0.0, 0.0);
    check_close(set_area(TWO, "car.ducts[0].exits[1].area=1 m2"), 1.0, 0.0, 0.0);
    check_close(set_area(TWO, "ducts[1].exit.area=1 m2"), 10.0, 0.0, 0.0);
    check_close(set_area(TWO, "ducts[1].exits[0].area=1 m2"), 10.0, 0.0, 0.0); /* the file says `exit` */
    check_close(set_area(TWO, "ducts[1].exits=[{\"area\": \"1 cm2\"}, {\"area\": \"1 m2\"}]"), 11.0, 0.0,
                0.0);
    check_close(set_area(TWO, "ducts[1].exits[0]={\"area\": \"1 m2\"}"), 10.0, 0.0, 0.0);
    check_close(set_area(CASE("\"duct\": " ONE), "duct.exits[0].area=1 m2"), 0.0, 0.0, 0.0);
    check_close(set_area(CASE("\"duct\": " LIST), "duct.exit.area=1 m2"), 0.0, 0.0, 0.0);
    check_close(set_area(CASE("\"duct\": " LIST), "duct.exit={\"area\": \"1 m2\"}"), 0.0, 0.0, 0.0);
    check_close(set_area(CASE("\"ducts\": [" LIST "]"), "duct.exit.area=1 m2"), 0.0, 0.0, 0.0);
    check_close(set_area(CASE("\"duct\": " MANY), "ducts[0].exits[1].area=1 m2"), 1.0, 0.0, 0.0);
}

static void settings_that_find_none(void **state)
{
    (void)state;
    set_refused(TWO, "ducts[2].exit.area=1 m2", "ducts[2].exit.area", "index 2", "0 to 1, for there are 2");
    set_refused(TWO, "ducts[0].exits[3].area=1 m2", "ducts[0].exits[3].area", "index 3", "there are 3");
    set_refused(TWO, "ducts[1].cores[1].width=1 m", "ducts[1].cores[1].width", "index 1", "there is 1");
    set_refused(TWO, "duct.exit.area=1 m2", "duct.exit.area", "\"duct\" alone", "ducts is a list of 2");
    set_refused(TWO, "ducts[0].core.width=1 m", "ducts[0].core.width", "\"core\" alone", "list of 2");
    set_refused(TWO, "ducts.exit.area=1 m2", "ducts.exit.area", "without an index", "ducts[0]");
    set_refused(TWO, "duct[0].exit.area=1 m2", "duct[0].exit.area", "an index", NULL);
    set_refused(TWO, "ducts[0].cores[0].aera=1", "ducts[0].cores[0].aera", "an unknown key", NULL);
    set_refused(TWO, "ducts[99999999].inlet.area=1 m2", NULL, "index 99999999", "0 to 1");
    set_refused(DUCT_CASE, "duct.fans[0].count=2", "duct.fans[0].count", "index 0", "no fans");
    set_refused(DUCT_CASE, "duct.cores[1].width=1 m", "duct.cores[1].width", "index 1",
                "there is 1, as \"core\"");
    set_refused(TWO, "ducts[0].cores[1].width=1 kg", "ducts[0].cores[1].width", "1 kg", "a length");
    struct result r = parse_set(TWO, SP_FOR_DUCT, SET("duct[0].exit.area=1 m2"), 1);
    assert_string_equal(r.complaints.list[0].hint, "the list is \"ducts\"");
    drop(&r);
    r = parse_set(TWO, SP_FOR_DUCT, SET("duct.exit.area=1 m2"), 1);
    assert_string_equal(r.complaints.list[0].hint, "the first is \"ducts[0]\"");
    drop(&r);
}

/* ---- complaints ------------------------------------------------------------------------------------ */

static void lists_that_will_not_do(void **state)
{
    (void)state;
#define DUCT(cores) CASE("\"duct\": " PARTS(cores, "\"fan\": " FAN, "\"exit\": " EXIT_OF))
    refused(DUCT("\"cores\": []"), "car.duct.cores", "an empty list", "a list of 1 to 5 objects");
    refused(DUCT("\"cores\": {}"), "car.duct.cores", "an object", "a list of 1 to 5 objects");
    refused(DUCT("\"cores\": [" CORE "," CORE "," CORE "," CORE "," CORE "," CORE "]"), "car.duct.cores",
            "more than 5", "a list of 1 to 5 objects");
    refused(DUCT("\"cores\": [" CORE ", 3]"), "car.duct.cores[1]", "3", "an object");
    refused(DUCT("\"cores\": [" CORE "], \"core\": " CORE), "car.duct.core", "both core and cores",
            "one of them");
    refused(DUCT("\"core\": [" CORE "]"), "car.duct.core", "an array", "an object");
    refused(CASE("\"ducts\": []"), "car.ducts", "an empty list", "a list of 1 to 4 objects");
    refused("{" AIR ", \"ducts\": [], \"car\": {" DUCT_OF(COEFFICIENT) "}}", "ducts", "an unknown key", NULL);
    refused("{" AIR ", \"ducts\": []}", "ducts", "a key of a car", NULL);
}

static void faults_of_elements(void **state)
{
    (void)state;
    static const char text[] =
        "{" AIR ",\n \"car\": {\"ducts\": [" ONE ",\n{" INLET ", \"exits\": [" EXIT_OF ",\n{\"aera\": 3}],\n"
        "\"fans\": [" FAN ",\n{\"curve\": [[\"0 m3/s\", \"9 Pa\"], [\"1 m3/s\", \"9 Pa\"]]},\n"
        "{\"curve\": {\"shutoff\": \"1 kg\", \"free_flow\": \"1 m3/s\"}, \"basis\": \"static\",\n"
        "\"switch\": {\"on\": \"60 degC\"}}],\n"
        "\"cores\": [" CORE ",\n{\"width\": \"1 m\", \"height\": \"1 m\"},\n"
        "{\"width\": \"1 m\", \"height\": \"7 m\", \"depth\": \"40 mm\", \"pressure_drop\": {}}]}]}}";
    struct result r = parse_set(text, SP_FOR_DUCT, NULL, 0);
    assert_true(has(&r.complaints, NULL, 4, "car.ducts[1].exits[1].aera", "an unknown key", NULL));
    assert_true(has(&r.complaints, NULL, 4, "car.ducts[1].exits[1].area", "nothing", "an area"));
    assert_true(has(&r.complaints, NULL, 6, "car.ducts[1].fans[1].curve", NULL, "falling"));
    assert_true(has(&r.complaints, NULL, 7, "car.ducts[1].fans[2].curve.shutoff", "1 kg", "a pressure"));
    assert_true(has(&r.complaints, NULL, 7, "car.ducts[1].fans[2].diameter", "nothing", "static"));
    assert_true(has(&r.complaints, NULL, 8, "car.ducts[1].fans[2].switch.on", "60 degC", "off"));
    assert_true(
        has(&r.complaints, NULL, 10, "car.ducts[1].cores[1].pressure_drop", "nothing", "coefficient"));
    assert_true(has(&r.complaints, NULL, 11, "car.ducts[1].cores[2].height", "7 m", "at most 5 m"));
    assert_true(has(&r.complaints, NULL, 11, "car.ducts[1].cores[2].pressure_drop", "no law", NULL));
    bool depth = has(&r.complaints, NULL, 10, "car.ducts[1].cores[1].depth", NULL, NULL);
    if (r.complaints.count != 9u + depth) sp_complaints_print(&r.complaints, false, stderr);
    assert_int_equal(r.complaints.count, 9u + depth);
    drop(&r);
}

static void doubts_of_elements(void **state)
{
    (void)state;
    struct result r = must_set(
        TWO, SP_FOR_DUCT,
        (char *const[]){(char[]){"ducts[1].inlet.area=10 cm2"}, (char[]){"ducts[0].fans[1].diameter=2 m"}},
        2);
    assert_int_equal(r.cautions.count, 3); /* and the cores of the first duct, of unlike sections */
    assert_true(has(&r.cautions, NULL, 0, "ducts[1].inlet.area", "10 cm2", NULL));
    bool said = false; /* found and expected both speak of a section */
    for (size_t i = 0; i < r.cautions.count; ++i)
        said = said || (r.cautions.list[i].found && strstr(r.cautions.list[i].found, "section"));
    assert_true(said);
    assert_true(has(&r.cautions, NULL, 0, "ducts[0].fans[1].diameter", "2 m", "fits"));
    drop(&r);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(one_is_a_list_of_one),     cmocka_unit_test(elements_in_si),
        cmocka_unit_test(tank_holds_for_all_cores), cmocka_unit_test(settings_find_elements),
        cmocka_unit_test(settings_that_find_none),  cmocka_unit_test(lists_that_will_not_do),
        cmocka_unit_test(faults_of_elements),       cmocka_unit_test(doubts_of_elements),
    };
    return cmocka_run_group_tests(tests, begin, end);
}
