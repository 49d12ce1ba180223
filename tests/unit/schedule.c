/* Own behaviour of the schedule: joining, sources, merging, stops and run-on.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "schedule_drive.h"

static double random_unit(unsigned long *seed)
{
    *seed = (*seed * 6364136223846793005UL + 1442695040888963407UL) & 0xffffffffffffffffUL;
    return (double)(*seed >> 40) / (double)(1UL << 24);
}

/* ---- steps ------------------------------------------------------------------------------------ */

static void idle_hold_soak(void **state)
{
    (void)state;
    struct drive d;
    begin(&d);
    d.design.air.wind = 3.0;
    add(&d, SP_STEP_IDLE, 60.0);
    struct sp_step *hold = add(&d, SP_STEP_HOLD, 100.0);
    hold->speed = 20.0, hold->power = 12e3, hold->engine_speed = 40.0, hold->repeat = 2.0;
    add(&d, SP_STEP_SOAK, 30.0);
    build(&d);
    const struct sp_schedule *s = &d.s;
    check_close(s->time[s->rows - 1], 290.0, 0.0, 1e-12);
    check_close(s->distance[s->rows - 1], 4000.0, 1e-14, 0.0);
    check_close(at(s, SP_IN_ENGINE_SPEED, 30.0), 14.0, 0.0, 0.0);
    check_close(at(s, SP_IN_AIR_SPEED, 30.0), 3.0, 0.0, 0.0);
    check_close(at(s, SP_IN_AIR_SPEED, 61.0), 23.0, 0.0, 0.0);
    check_close(at(s, SP_IN_POWER, 61.0), 12e3, 0.0, 0.0);
    check_close(at(s, SP_IN_WAKE, 61.0), 1.0, 0.0, 0.0);
    assert_true(at(s, SP_IN_HEAT_GAS, 30.0) > 500.0 && at(s, SP_IN_HEAT_GAS, 61.0) > 8e3);
    for (int c = SP_IN_HEAT_GAS; c <= SP_IN_POWER; c++)
        check_close(at(s, (enum sp_channel_in)c, 270.0), 0.0, 0.0, 0.0);
    check_close(at(s, SP_IN_AIR_SPEED, 270.0), 3.0, 0.0, 0.0);
    assert_int_equal(flags(s, 30.0), SP_FLAG_ENGINE | SP_FLAG_PUMP | SP_FLAG_FAN);
    assert_int_equal(flags(s, 270.0), 0);
    assert_int_equal(s->step[segment(s, 59.0)], 0);
    assert_int_equal(s->step[segment(s, 60.0)], 1);
    assert_int_equal(s->step[segment(s, 261.0)], 2);
    assert_int_equal(s->rows, 7); /* 2 + 2, one more for the repeat, 2 */
    assert_false(s->power_from_road || s->measured);
    assert_int_equal(d.cautions.count, 0);
    end(&d);
}

static void lookup_is_exact(void **state)
{
    (void)state;
    struct drive d;
    begin(&d);
    add_text(&d, "time [s],speed [m/s],power [kW],engine_speed [rev/s]\n0,0,0,14\n4,20,40,60\n6,10,0,30");
    build(&d);
    struct sp_inputs in;
    sp_schedule_at(&d.s, 0, 1.0, &in);
    check_close(in.in[SP_IN_SPEED], 5.0, 1e-14, 0.0);
    check_close(in.in[SP_IN_POWER], 10e3, 1e-14, 0.0);
    check_close(in.distance, 2.5, 1e-14, 0.0);
    sp_schedule_at(&d.s, 1, 6.0, &in);
    check_close(in.distance, 70.0, 1e-14, 0.0);
    check_close(in.distance, d.s.distance[2], 1e-14, 0.0);
    assert_true(isnan(in.in[SP_IN_MEASURED]));
    end(&d);
}

/* Two traces that fit join in one row; where they do not there are two. */
static void joints(void **state)
{
    (void)state;
    struct drive d;
    const char *text = "time [s],speed [m/s],power [W],engine_speed [rev/s],coolant [K],mark\n"
                       "10,10,5000,30,350,a\n11,15,6000,35,351,\n12,10,5000,30,350,b";
    begin(&d);
    add_text(&d, text);
    d.step[0].repeat = 3.0;
    build(&d);
    assert_int_equal(d.s.rows, 7);
    assert_int_equal(d.s.marks, 6);
    assert_int_equal(d.s.mark[2].row, 2);
    assert_string_equal(d.s.mark[2].text, "a");
    assert_true(d.s.measured);
    end(&d);
    begin(&d);
    add_text(&d, text);
    add_text(&d, "time [s],speed [m/s],power [W],engine_speed [rev/s],coolant "
                 "[K]\n0,10,5000,30,352\n5,12,5000,30,352");
    add(&d, SP_STEP_SOAK, 5.0);
    build(&d);
    assert_int_equal(d.s.rows, 7);
    check_close(at(&d.s, SP_IN_MEASURED, 2.0), 352.0, 0.0, 0.0);
    check_close(d.s.channel[SP_IN_MEASURED][2], 350.0, 0.0, 0.0);
    assert_true(isnan(at(&d.s, SP_IN_MEASURED, 8.0)));
    end(&d);
}

/* ---- sources of power and engine speed -------------------------------------------------------- */

static void sources(void **state)
{
    (void)state;
    struct drive d;
    begin(&d);
    add_text(&d, "time [s],speed [m/s],torque [N m],engine_speed [rpm]\n0,10,100,3000\n1,10,-20,3000");
    build(&d);
    check_close(d.s.channel[SP_IN_POWER][0], 100.0 * 2.0 * acos(-1.0) * 50.0, 1e-12, 0.0);
    check_close(d.s.channel[SP_IN_POWER][1], -20.0 * 2.0 * acos(-1.0) * 50.0, 1e-12, 0.0);
    end(&d);
    begin(&d);
    add_text(
        &d,
        "time [s],speed [m/s],throttle [%],engine_speed [rpm]\n0,10,100,3000\n1,10,50,7200\n2,10,30,7200");
    build(&d);
    check_close(d.s.channel[SP_IN_POWER][0], 50e3, 1e-12, 0.0);
    check_close(d.s.channel[SP_IN_POWER][1], 50e3, 1e-12, 0.0);
    assert_true(cautioned(&d, "throttle"));
    end(&d);
    begin(&d);
    /* 2.0 l, 1.55 bar + 16.6 Pa s2 * 50^2 = 1.965 bar at 50 rev/s: 9.825 kW; 3 g/s: 0.4 * 127.8 kW */
    d.design.engine.friction_pressure[0] = 1.55e5;
    add_text(&d, "time [s],speed [m/s],fuel_flow [g/s],engine_speed [rpm]\n0,10,3,3000\n1,10,0,3000");
    build(&d);
    check_close(d.s.channel[SP_IN_POWER][0], 51.12e3 - 9.825e3, 1e-9, 0.0);
    assert_true(cautioned(&d, "fuel or air"));
    assert_true(d.s.channel[SP_IN_HEAT_FRICTION][1] > 0.0);
    end(&d);
    begin(&d);
    d.design.engine.heat_law = SP_HEAT_AIR;
    add_text(&d, "time [s],speed [m/s],air_flow [g/s],engine_speed [rpm]\n0,10,44.1,3000\n1,10,44.1,3000");
    build(&d);
    check_close(d.s.channel[SP_IN_POWER][0], 51.12e3 - 9.825e3, 1e-9, 0.0);
    check_close(d.s.channel[SP_IN_HEAT_GAS][0], 0.3 * 127.8e3, 1e-9, 0.0);
    assert_int_equal(d.cautions.count, 0);
    end(&d);
}

static void gears_and_assumptions(void **state)
{
    (void)state;
    double ratios[] = {12.0, 8.0, 5.0}, turn = 2.0 * acos(-1.0) * 0.3;
    struct drive d;
    for (int given = 0; given < 3; given++) {
        begin(&d);
        if (given < 2) d.design.body.gears = (struct sp_table){3, 1, ratios};
        d.design.body.wheel_radius = 0.3;
        FILE *f =
            add_trace(&d, given ? "time [s],speed [m/s],power [kW]" : "time [s],speed [m/s],power [kW],gear");
        fprintf(f, given ? "0,%.17g,20\n2,%.17g,20\n" : "0,%.17g,20,3\n2,%.17g,20,0\n", 6.0 * turn,
                6.0 * turn);
        fclose(f);
        build(&d);
        const double *n = d.s.channel[SP_IN_ENGINE_SPEED];
        check_close(n[0], given == 0 ? 30.0 : given == 1 ? 72.0 : 36.0, 1e-12, 0.0);
        check_close(n[1], given == 0 ? 14.0 : given == 1 ? 72.0 : 36.0, 1e-12, 0.0);
        assert_int_equal(cautioned(&d, "no engine speed"), given == 2);
        end(&d);
    }
}

/* 100 km/h at 1.2 kg/m3 with 1500 kg, rolling 0.011 and 0.65 m2: 12.85 kW (worked by hand). */
static void road_load(struct drive *d)
{
    begin(d);
    d->design.body.mass = 1500.0;
    d->design.body.drag_coefficient = 0.65;
    d->design.air.pressure = 1.2 * 287.05287 * 300.0;
    d->design.air.altitude = NAN;
}

static void hold_by_road_load(void **state)
{
    (void)state;
    struct drive d;
    road_load(&d);
    add(&d, SP_STEP_HOLD, 10.0)->speed = 100.0 / 3.6;
    build(&d);
    check_close(at(&d.s, SP_IN_POWER, 5.0), 12.85e3, 0.0, 5.0);
    assert_true(d.s.power_from_road);
    assert_true(cautioned(&d, "no engine speed"));
    check_close(d.s.work.wheel, 128.5e3, 0.0, 50.0);
    check_close(d.s.work.wheel, d.s.work.drag + d.s.work.rolling, 1e-12, 0.0);
    end(&d);
    road_load(&d);
    struct sp_step *h = add(&d, SP_STEP_HOLD, 10.0);
    h->speed = 10.0;
    h->engine_speed = 0.0; /* rolling with the engine off */
    add(&d, SP_STEP_HOLD, 10.0)->speed = 0.0;
    build(&d);
    assert_int_equal(flags(&d.s, 5.0), 0);
    check_close(at(&d.s, SP_IN_POWER, 15.0), 0.0, 0.0, 0.0);
    check_close(at(&d.s, SP_IN_ENGINE_SPEED, 15.0), 14.0, 0.0, 0.0);
    end(&d);
}

/* A bare cycle: kinetic energy, height, drag, rolling and brakes add up to what the engine did. */
static void work_adds_up(void **state)
{
    (void)state;
    struct drive d;
    for (int variant = 0; variant < 4; variant++) {
        road_load(&d);
        d.design.body.driveline = 0.9;
        FILE *f = add_trace(&d, variant & 1 ? "time [s],speed [m/s],altitude [m]" : "time [s],speed [m/s]");
        double travelled = 0.0, before = 0.0, t = 0.0;
        for (int i = 0; i <= 1200; i++) {
            double v = 15.0 - 15.0 * cos(t * 2.0 * acos(-1.0) / 60.0);
            travelled += 0.5 * (v + before) * (i ? (i % 3 ? 0.25 : 0.1) : 0.0);
            before = v;
            fprintf(f, variant & 1 ? "%.17g,%.17g,%.17g\n" : "%.17g,%.17g\n", t, v,
                    30.0 - 30.0 * cos(travelled / 900.0));
            t += (i + 1) % 3 ? 0.25 : 0.1;
        }
        fclose(f);
        d.step[0].smooth = variant & 2 ? 0.6 : 0.0;
        d.step[0].repeat = 2.0;
        build(&d);
        double spent =
            d.s.work.kinetic + d.s.work.potential + d.s.work.drag + d.s.work.rolling + d.s.work.brakes;
        assert_true(d.s.work.wheel > 1e5 && d.s.work.brakes > 1e4);
        check_close(d.s.work.wheel, spent, 1e-3, 0.0);
        assert_false(cautioned(&d, "road load"));
        double wheel = 0.0; /* what the power in the schedule gives at the wheels, or takes from them */
        for (size_t k = 0; k + 1 < d.s.rows; k++)
            for (size_t j = k; j < k + 2; j++) {
                double p = d.s.channel[SP_IN_POWER][j];
                wheel += 0.5 * (p < 0.0 ? p / 0.9 : p * 0.9) * (d.s.time[k + 1] - d.s.time[k]);
            }
        check_close(d.s.work.wheel, wheel, 1e-9, 0.0);
        /* the drag's share, by itself: 0.39 v^3 */
        double drag = 0.0;
        for (double x = 0.0; x < t; x += 0.001)
            drag += 0.39 * pow(15.0 - 15.0 * cos(x * 2.0 * acos(-1.0) / 60.0), 3) * 1e-3;
        if (!(variant & 1)) check_close(d.s.work.drag, 2.0 * drag, 2e-3, 0.0);
        end(&d);
    }
}

/* From rest to 30 m/s: 1.03 * 1500 kg * 450 m2/s2. */
static void kinetic_energy(void **state)
{
    (void)state;
    struct drive d;
    road_load(&d);
    FILE *f = add_trace(&d, "time [s],speed [m/s]");
    for (int i = 0; i <= 100; i++)
        fprintf(f, "%.17g,%.17g\n", 0.1 * i, 0.3 * i);
    fclose(f);
    build(&d);
    check_close(d.s.work.kinetic, 695250.0, 1e-12, 0.0);
    check_close(d.s.work.rolling, 161.809725 * 150.0, 1e-9, 0.0);
    check_close(d.s.work.drag, 0.39 * 27.0 / 4.0 * 1e4, 1e-9, 0.0);
    check_close(d.s.work.brakes, 0.0, 0.0, 1e-6);
    check_close(at(&d.s, SP_IN_POWER, 5.0), 15.0 * (4635.0 + 161.809725 + 0.39 * 225.0), 1e-9, 0.0);
    end(&d);
}

/* Rows so far apart that the sums cannot agree. */
static void work_does_not_add_up(void **state)
{
    (void)state;
    struct drive d;
    road_load(&d);
    d.design.body.mass = 100.0;
    add_text(&d, "time [s],speed [m/s]\n0,0\n20,60\n40,0\n60,60");
    build(&d);
    assert_true(cautioned(&d, "road load"));
    end(&d);
}

/* Uphill at 5 % by altitude or by a column of grade: the same power to a percent; downhill the engine brakes.
 */
static void slopes(void **state)
{
    (void)state;
    struct drive d;
    double power[2];
    for (int column = 0; column < 2; column++) {
        road_load(&d);
        FILE *f =
            add_trace(&d, column ? "time [s],speed [m/s],grade [%]" : "time [s],speed [m/s],altitude [m]");
        for (int i = 0; i <= 100; i++) {
            double rise = 1000.0 - 20.0 * fabs(i - 50.0) * 0.05 / sqrt(1.0025);
            fprintf(f, "%d,20,%.17g\n", i, column ? (i < 50 ? 5.0 : -5.0) : rise);
        }
        fclose(f);
        build(&d);
        power[column] = at(&d.s, SP_IN_POWER, 20.0);
        assert_true(at(&d.s, SP_IN_POWER, 80.0) < -3e3);
        end(&d);
    }
    check_close(power[0], power[1], 1e-2, 0.0);
    /* 1500 g (0.011 + 0.05)/sqrt(1.0025) + 0.39 * 400 = 1052.2 N at 20 m/s */
    check_close(power[1], 21.04e3, 1e-3, 0.0);
}

/* ---- air -------------------------------------------------------------------------------------- */

/* US Standard Atmosphere 1976: 101325 Pa at 0 m, 89876 Pa at 1000 m, 95461 Pa at 500 m. */
static void pressure_follows_altitude(void **state)
{
    (void)state;
    struct drive d;
    begin(&d);
    add(&d, SP_STEP_IDLE, 10.0);
    add_text(
        &d,
        "time [s],speed [m/s],power [W],engine_speed [rev/s],altitude [m]\n0,20,0,30,240\n10,20,0,30,1240");
    add(&d, SP_STEP_SOAK, 10.0);
    add_text(
        &d,
        "time [s],speed [m/s],power [W],engine_speed [rev/s],altitude [m]\n0,20,0,30,1240\n10,20,0,30,740");
    build(&d);
    check_close(at(&d.s, SP_IN_PRESSURE, 5.0), 101325.0, 0.0, 0.0);
    check_close(at(&d.s, SP_IN_PRESSURE, 10.0), 101325.0, 1e-12, 0.0);
    check_close(at(&d.s, SP_IN_PRESSURE, 25.0), 89876.0, 0.0, 2.0);
    check_close(at(&d.s, SP_IN_PRESSURE, 30.0), 89876.0, 0.0, 2.0);
    check_close(at(&d.s, SP_IN_PRESSURE, 40.0), 95461.0, 0.0, 2.0);
    end(&d);
}

static void ambient_and_wake(void **state)
{
    (void)state;
    struct drive d;
    begin(&d);
    d.design.air.wind = -4.0;
    add_text(&d, "time [s],speed [m/s],power [W],engine_speed [rev/s],ambient "
                 "[degC],wake\n0,2,0,30,20,0.5\n10,2,0,30,30,1");
    build(&d);
    check_close(at(&d.s, SP_IN_AMBIENT, 5.0), 298.15, 1e-14, 0.0);
    check_close(at(&d.s, SP_IN_WAKE, 5.0), 0.75, 1e-14, 0.0);
    check_close(at(&d.s, SP_IN_AIR_SPEED, 5.0), -2.0, 1e-14, 0.0);
    end(&d);
}

/* ---- stops ------------------------------------------------------------------------------------ */

/* Runs to 10 s, off from 10 to 40 s, runs to 60 s, off to 63 s, runs to 70 s, then a soak of 60 s. */
static void run_on(void **state)
{
    (void)state;
    struct drive d;
    begin(&d);
    d.design.pump.electric = true;
    d.design.pump.run_on = 5.0;
    d.design.duct[0].fan[0].fitted = true;
    d.design.duct[0].fan[0].run_on = 20.0;
    add_text(
        &d,
        "time [s],speed [m/s],power [kW],engine_speed [rpm],mark\n0,10,10,1500,\n10,10,10,1500,\n11,0,0,0,"
        "stop\n39,0,0,200,\n40,0,0,900,go\n60,0,0,900,\n61.5,0,0,0,\n63,0,0,900,\n70,0,0,900,end");
    add(&d, SP_STEP_SOAK, 60.0);
    build(&d);
    const struct sp_schedule *s = &d.s;
    const unsigned all = SP_FLAG_ENGINE | SP_FLAG_PUMP | SP_FLAG_FAN, off = SP_FLAG_PUMP | SP_FLAG_FAN;
    const struct {
        double t;
        unsigned flags;
    } want[] = {{9.9, all},  {10.1, off}, {14.9, off}, {15.1, SP_FLAG_FAN}, {29.9, SP_FLAG_FAN}, {30.1, 0},
                {39.9, 0},   {40.1, all}, {59.9, all}, {60.1, off},         {62.9, off},         {63.1, all},
                {69.9, all}, {70.1, off}, {74.9, off}, {75.1, SP_FLAG_FAN}, {89.9, SP_FLAG_FAN}, {90.1, 0},
                {129.0, 0}};
    for (size_t i = 0; i < sizeof want / sizeof *want; i++)
        assert_int_equal(flags(s, want[i].t), want[i].flags);
    const double jumps[] = {10, 15, 30, 40, 60, 63, 70, 75, 90};
    size_t found = 0;
    for (size_t k = 0; k + 1 < s->rows; k++) {
        if (s->time[k + 1] > s->time[k]) continue;
        assert_true(found < 9);
        check_close(s->time[k], jumps[found++], 0.0, 1e-9);
    }
    assert_int_equal(found, 9);
    check_close(at(s, SP_IN_HEAT_GAS, 10.5), 0.0, 0.0, 0.0);
    check_close(at(s, SP_IN_ENGINE_SPEED, 10.5), 0.0, 0.0, 0.0);
    check_close(at(s, SP_IN_SPEED, 10.5), 5.0, 1e-12, 0.0); /* the car rolls on */
    check_close(at(s, SP_IN_ENGINE_SPEED, 9.999), 25.0, 1e-3, 0.0);
    const double marks[] = {11.0, 40.0, 70.0};
    assert_int_equal(s->marks, 3);
    for (int i = 0; i < 3; i++)
        check_close(s->time[s->mark[i].row], marks[i], 0.0, 1e-9);
    end(&d);
}

/* A belt pump stops with its engine; no window before the engine has run; windows that end on a row. */
static void run_on_edges(void **state)
{
    (void)state;
    struct drive d;
    begin(&d);
    d.design.pump.run_on = 5.0; /* not electric */
    d.design.duct[0].fan[0].fitted = true;
    d.design.duct[0].fan[0].run_on = 20.0;
    add(&d, SP_STEP_SOAK, 30.0);
    add(&d, SP_STEP_IDLE, 10.0);
    add(&d, SP_STEP_SOAK, 20.0)->repeat = 3.0; /* one row at the window's very end */
    build(&d);
    assert_int_equal(flags(&d.s, 1.0), 0);
    assert_int_equal(flags(&d.s, 35.0), SP_FLAG_ENGINE | SP_FLAG_PUMP | SP_FLAG_FAN);
    assert_int_equal(flags(&d.s, 40.1), SP_FLAG_FAN);
    assert_int_equal(flags(&d.s, 59.9), SP_FLAG_FAN);
    assert_int_equal(flags(&d.s, 60.1), 0);
    check_close(d.s.time[d.s.rows - 1], 100.0, 1e-14, 0.0);
    end(&d);
}

/* ---- merging ---------------------------------------------------------------------------------- */

static void write_rough(struct drive *d, unsigned long seed, int rows, double fine, double coarse)
{
    FILE *f =
        add_trace(d, "time [s],speed [m/s],power [W],engine_speed [rev/s],coolant [K],altitude [m],mark");
    double t = 100.0;
    for (int i = 0; i < rows; i++) {
        bool dead = i % 97 > 90;
        double speed = 60.0 * random_unit(&seed), power = 120e3 * random_unit(&seed) - 20e3;
        fprintf(f, "%.9f,%.9g,%.9g,%.9g,%.9g,%.9g,%s\n", t, speed, dead ? 0.0 : power,
                dead ? 0.0 : 14.0 + 80.0 * random_unit(&seed), 300.0 + 80.0 * random_unit(&seed),
                50.0 * random_unit(&seed), i % 50 >= 25 ? "bend" : "");
        double u = random_unit(&seed);
        t += u < 0.1 ? coarse * (0.2 + random_unit(&seed)) : fine * (0.02 + random_unit(&seed));
    }
    fclose(f);
}

/* Integrals of all channels, the length, stops and marks stay; no value leaves the range it had nearby. */
static void merging_keeps_integrals(void **state)
{
    (void)state;
    const double fine[] = {0.05, 0.3, 0.02, 1.0}, coarse[] = {0.05, 1.5, 3.0, 0.2};
    for (int v = 0; v < 12; v++) {
        struct drive raw, merged;
        begin(&raw);
        write_rough(&raw, 77 + (unsigned long)v, 600, fine[v % 4], coarse[v % 4]);
        build(&raw);
        begin(&merged);
        write_rough(&merged, 77 + (unsigned long)v, 600, fine[v % 4], coarse[v % 4]);
        merged.design.solver.merge = 0.5;
        build(&merged);
        const struct sp_schedule *a = &raw.s, *b = &merged.s;
        assert_true(b->rows < a->rows && b->rows_merged > 0);
        check_close(b->time[b->rows - 1], a->time[a->rows - 1], 1e-14, 0.0);
        check_close(b->distance[b->rows - 1], a->distance[a->rows - 1], 1e-11, 0.0);
        for (int c = 0; c < SP_INPUTS; c++)
            check_close(integral(b, (enum sp_channel_in)c), integral(a, (enum sp_channel_in)c), 1e-10, 1e-9);
        for (size_t k = 0; k < b->rows; k++)
            for (int c = 0; c < SP_INPUTS; c++) {
                double least = INFINITY, most = -INFINITY, x = b->channel[c][k];
                for (size_t i = 0; i < a->rows; i++) {
                    bool close = fabs(a->time[i] - b->time[k]) < 4.5;
                    if (close) least = fmin(least, a->channel[c][i]), most = fmax(most, a->channel[c][i]);
                }
                assert_true(x >= least && x <= most);
            }
        assert_int_equal(a->marks, b->marks);
        for (size_t i = 0; i < a->marks; i++) {
            check_close(b->time[b->mark[i].row], a->time[a->mark[i].row], 0.0, 1e-12);
            assert_string_equal(a->mark[i].text, b->mark[i].text);
        }
        size_t changes[2] = {0, 0};
        for (size_t k = 1; k + 1 < a->rows; k++)
            changes[0] += a->flags[k] != a->flags[k - 1];
        for (size_t k = 1; k + 1 < b->rows; k++)
            changes[1] += b->flags[k] != b->flags[k - 1];
        assert_int_equal(changes[0], changes[1]);
        end(&raw);
        end(&merged);
    }
}

/* 50 Hz down to 2 Hz: no two rows are closer than asked for but at stops and marks. */
static void merging_merges(void **state)
{
    (void)state;
    struct drive d;
    begin(&d);
    d.design.solver.merge = 0.5;
    FILE *f = add_trace(&d, "time [s],speed [m/s],power [W],engine_speed [rev/s]");
    for (int i = 0; i <= 1010; i++)
        fprintf(f, "%.2f,%.9g,5000,30\n", i * 0.02, 20.0 + (i % 2 ? 4.0 : -4.0));
    fclose(f);
    build(&d);
    assert_true(d.s.rows <= 41);
    assert_int_equal(d.s.rows_merged, 1011 - 41);
    for (size_t k = 0; k + 1 < d.s.rows; k++)
        assert_true(d.s.time[k + 1] - d.s.time[k] > 0.499);
    for (size_t k = 1; k + 1 < d.s.rows; k++)
        check_close(d.s.channel[SP_IN_SPEED][k], 20.0, 0.01, 0.0);
    end(&d);
}

/* Rows that are coarse already are not touched, bit for bit. */
static void coarse_rows_stay(void **state)
{
    (void)state;
    struct drive a, b;
    for (int i = 0; i < 2; i++) {
        struct drive *d = i ? &b : &a;
        begin(d);
        d->design.solver.merge = i ? 0.5 : 0.0;
        FILE *f = add_trace(d, "time [s],speed [m/s],power [W],engine_speed [rev/s]");
        for (int k = 0; k < 200; k++)
            fprintf(f, "%.1f,%d,%d,%d\n", k * 0.5 + (k % 3 == 2 ? 0.2 : 0.0) + k / 3 * 0.4, k * 7919 % 50,
                    k * 7919 % 90000, 20 + k * 104729 % 60);
        fclose(f);
        build(d);
    }
    assert_int_equal(a.s.rows, b.s.rows);
    assert_int_equal(b.s.rows_merged, 0);
    assert_memory_equal(a.s.time, b.s.time, a.s.rows * sizeof(double));
    for (int c = 0; c < SP_IN_MEASURED; c++)
        assert_memory_equal(a.s.channel[c], b.s.channel[c], a.s.rows * sizeof(double));
    end(&a);
    end(&b);
}

/* Fine rows that end in a long straight one do not take it into their means. */
static void long_segments_stay(void **state)
{
    (void)state;
    struct drive d;
    begin(&d);
    d.design.solver.merge = 0.5;
    add_text(&d, "time [s],speed [m/s],power [W],engine_speed "
                 "[rev/s]\n0,10,0,30\n0.1,14,0,30\n0.2,10,0,30\n0.3,12,0,30\n"
                 "5,50,0,30\n9,20,0,30");
    build(&d);
    check_close(d.s.distance[d.s.rows - 1], 1.2 + 1.2 + 1.1 + 4.7 * 31.0 + 4.0 * 35.0, 1e-12, 0.0);
    assert_int_equal(d.s.rows, 4);
    check_close(d.s.time[1], 0.3, 0.0, 1e-12);
    check_close(at(&d.s, SP_IN_SPEED, 5.0), 50.0, 1e-12, 0.0);
    check_close(at(&d.s, SP_IN_SPEED, 9.0), 20.0, 1e-12, 0.0);
    check_close(d.s.channel[SP_IN_SPEED][1], 12.0, 0.01, 0.0);
    end(&d);
}

static void straight_rows_go(void **state)
{
    (void)state;
    struct drive d;
    begin(&d);
    d.design.engine.heat_exponent = 1.0;
    d.design.engine.friction_pressure[2] = 0.0;
    FILE *f = add_trace(&d, "time [s],speed [m/s],power [W],engine_speed [rev/s],mark");
    for (int i = 0; i <= 300; i++) {
        double v = i <= 100 ? 0.3 * i : i <= 200 ? 30.0 : 30.0 - 0.1 * (i - 200);
        fprintf(f, "%d,%.17g,%.17g,50,%s\n", i, v, 1e3 + 500.0 * v, i < 150 ? "first" : "second");
    }
    fclose(f);
    build(&d);
    assert_int_equal(d.s.rows, 5); /* ends, two bends, and the mark */
    check_close(d.s.time[2], 150.0, 0.0, 1e-12);
    assert_int_equal(d.s.mark[1].row, 2);
    check_close(d.s.distance[4], 1500.0 + 3000.0 + 2500.0, 1e-9, 0.0);
    end(&d);
}

/* 50 Hz with cuts and full load, merged to 1 s: heat, friction and work stay. */
static void energy_of_real_heat(void **state)
{
    (void)state;
    struct drive raw, merged;
    for (int i = 0; i < 2; i++) {
        struct drive *d = i ? &merged : &raw;
        begin(d);
        d->design.solver.merge = i ? 1.0 : 0.0;
        FILE *f = add_trace(d, "time [s],speed [m/s],power [W],engine_speed [rev/s]");
        for (int k = 0; k <= 5000; k++) {
            double t = 0.02 * k;
            fprintf(f, "%.2f,%.9g,%.9g,%.9g\n", t, 30.0 + 15.0 * sin(t), 45e3 + 60e3 * sin(1.7 * t),
                    60.0 + 20.0 * sin(3.0 * t));
        }
        fclose(f);
        build(d);
    }
    check_close(integral(&merged.s, SP_IN_HEAT_GAS), integral(&raw.s, SP_IN_HEAT_GAS), 1e-6, 0.0);
    check_close(integral(&merged.s, SP_IN_HEAT_FRICTION), integral(&raw.s, SP_IN_HEAT_FRICTION), 1e-6, 0.0);
    check_close(integral(&merged.s, SP_IN_POWER), integral(&raw.s, SP_IN_POWER), 1e-6, 0.0);
    end(&raw);
    end(&merged);
}

/* ---- what is refused -------------------------------------------------------------------------- */

static void complaints(void **state)
{
    (void)state;
    struct drive d;
    begin(&d);
    refused(&d, "no steps");
    begin(&d);
    add_text(&d, "time [s],speed [m/s]\n0,10\n1,11");
    refused(&d, "nothing that tells the power");
    begin(&d);
    add_text(&d, "time [s],speed [m/s],torque [N m]\n0,10,50\n1,11,50");
    refused(&d, "torque without engine speed");
    begin(&d);
    add(&d, SP_STEP_HOLD, 10.0)->speed = 20.0;
    refused(&d, "no power");
    begin(&d);
    add(&d, SP_STEP_HOLD, 10.0);
    refused(&d, "without a time or a speed");
    begin(&d);
    add(&d, SP_STEP_IDLE, NAN);
    refused(&d, "without a time");
    begin(&d);
    d.design.engine.displacement = NAN;
    add(&d, SP_STEP_IDLE, 10.0);
    refused(&d, "an engine");
    begin(&d);
    add(&d, SP_STEP_TRACE, NAN)->trace = d.path[0];
    snprintf(d.path[0], sizeof d.path[0], "%s/none.csv", folder);
    assert_int_equal(sp_schedule_build(units, &d.design, &d.s, &d.complaints, &d.cautions), SP_INPUT);
    assert_int_equal(d.complaints.count, 1);
    end(&d);
    begin(&d);
    FILE *f = add_trace(&d, "time [s],speed [m/s],power [W],engine_speed [rev/s]");
    for (int k = 0; k < 1000; k++)
        fprintf(f, "%d,%d,%d,40\n", k, k * 7919 % 50, k * 7919 % 90000);
    fclose(f);
    d.step[0].repeat = 100000.0;
    refused(&d, "100000 times 1000 rows");
    begin(&d);
    add(&d, SP_STEP_IDLE, 10.0)->repeat = 1e300;
    refused(&d, "1e+300 times 2 rows");
}

/* All faults of a drive in one go. */
static void all_at_once(void **state)
{
    (void)state;
    struct drive d;
    begin(&d);
    add_text(&d, "time [s],speed [m/s]\n0,10\n1,11");
    add(&d, SP_STEP_HOLD, 10.0)->speed = 20.0;
    add(&d, SP_STEP_SOAK, 0.0);
    assert_int_equal(sp_schedule_build(units, &d.design, &d.s, &d.complaints, &d.cautions), SP_INPUT);
    assert_int_equal(d.complaints.count, 3);
    assert_string_equal(d.complaints.list[1].path, "drive[1].power");
    end(&d);
}

static void repairs_are_told(void **state)
{
    (void)state;
    struct drive d;
    begin(&d);
    add_text(&d, "time [s],speed [m/s],power [W],engine_speed "
                 "[rev/s]\n0,10,1,30\n1,10,2,30\n0.5,3,3,30\n2,,1,30\n3,9,1,30");
    d.step[0].format.repair = true;
    d.step[0].format.blank = SP_BLANK_HOLD;
    build(&d);
    assert_int_equal(d.s.repairs.backward_dropped, 1);
    assert_int_equal(d.s.repairs.cells_held, 1);
    assert_true(cautioned(&d, "1 backward"));
    end(&d);
}

/* ---- published cycles ------------------------------------------------------------------------- */

/* UN GTR 15, class 3b: 1800 s and 23.266 km; UN R83: 1180 s and 11.0 km. Driven by the road load alone, with
 * nothing known of the engine but its block. */
static void cycles(void **state)
{
    (void)state;
    const char *named = getenv("SWIRLPOT_DATA"), *data = named ? named : SP_SOURCE_DIR "/../shared/data";
    if (access(data, R_OK) != 0) {
        print_message("skipped: no folder of cycles\n");
        skip();
    }
    const struct {
        const char *file;
        double time, km, slack;
    } cycle[] = {{"cycle_wltc_class3b_1hz.csv", 1800.0, 23.266, 0.001},
                 {"cycle_nedc_1hz.csv", 1180.0, 11.0, 0.03}};
    for (int i = 0; i < 2; i++)
        for (int smooth = 0; smooth < 2; smooth++) {
            struct drive d;
            char path[1024];
            road_load(&d);
            snprintf(path, sizeof path, "%s/%s", data, cycle[i].file);
            struct sp_step *s = add(&d, SP_STEP_TRACE, NAN);
            s->trace = path;
            s->smooth = smooth * 2.0;
            s->format.column[SP_COL_TIME].heading = "time_s", s->format.column[SP_COL_TIME].unit = "s";
            s->format.column[SP_COL_SPEED].heading = "speed_kmh",
            s->format.column[SP_COL_SPEED].unit = "km/h";
            build(&d);
            check_close(d.s.time[d.s.rows - 1], cycle[i].time, 0.0, 1.0);
            check_close(d.s.distance[d.s.rows - 1] / 1e3, cycle[i].km, 0.0, smooth ? 0.03 : cycle[i].slack);
            double spent =
                d.s.work.kinetic + d.s.work.potential + d.s.work.drag + d.s.work.rolling + d.s.work.brakes;
            print_message("%s: wheel %.6g J, off by %.2g\n", cycle[i].file, d.s.work.wheel,
                          spent / d.s.work.wheel - 1.0);
            check_close(spent, d.s.work.wheel, 2e-3, 0.0);
            end(&d);
        }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(idle_hold_soak),
        cmocka_unit_test(lookup_is_exact),
        cmocka_unit_test(joints),
        cmocka_unit_test(sources),
        cmocka_unit_test(gears_and_assumptions),
        cmocka_unit_test(hold_by_road_load),
        cmocka_unit_test(work_adds_up),
        cmocka_unit_test(kinetic_energy),
        cmocka_unit_test(work_does_not_add_up),
        cmocka_unit_test(slopes),
        cmocka_unit_test(pressure_follows_altitude),
        cmocka_unit_test(ambient_and_wake),
        cmocka_unit_test(run_on),
        cmocka_unit_test(run_on_edges),
        cmocka_unit_test(merging_keeps_integrals),
        cmocka_unit_test(merging_merges),
        cmocka_unit_test(coarse_rows_stay),
        cmocka_unit_test(long_segments_stay),
        cmocka_unit_test(straight_rows_go),
        cmocka_unit_test(energy_of_real_heat),
        cmocka_unit_test(complaints),
        cmocka_unit_test(all_at_once),
        cmocka_unit_test(repairs_are_told),
        cmocka_unit_test(cycles),
    };
    return cmocka_run_group_tests(tests, set_up, tear_down);
}
