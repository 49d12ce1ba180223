/* What the circuit is driven by at one instant. Internal.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_CIRCUIT_INPUTS_H
#define SP_CIRCUIT_INPUTS_H

/* Continuous channels. */
enum sp_channel_in {
    SP_IN_SPEED,         /* m/s over the road */
    SP_IN_AIR_SPEED,     /* m/s through the air: speed + wind */
    SP_IN_WAKE,          /* share of dynamic pressure left */
    SP_IN_AMBIENT,       /* K */
    SP_IN_PRESSURE,      /* Pa */
    SP_IN_HEAT_GAS,      /* W */
    SP_IN_HEAT_FRICTION, /* W */
    SP_IN_HEAT_SLOPE,    /* W/W: heat per further brake power */
    SP_IN_ENGINE_SPEED,  /* rev/s */
    SP_IN_POWER,         /* W brake */
    SP_IN_MEASURED,      /* K, measured coolant; NAN when there is none */
    SP_IN_OIL_HEAT,      /* W, engine oil */
    SP_IN_GEARBOX_HEAT,  /* W */
    SP_IN_CHARGE_FLOW,   /* kg/s of charge air */
    SP_IN_CHARGE_HEATING, /* T_out/T_in - 1 of the compressor */
    SP_IN_BLOWER,        /* m3/s that a blower puts into each inlet */
    SP_INPUTS
};

/* What holds over a whole segment. */
enum {
    SP_FLAG_ENGINE = 1, /* the engine runs */
    SP_FLAG_PUMP = 2,   /* an electric pump is allowed to run (engine on, or within its run-on) */
    SP_FLAG_FAN = 4,    /* a fan is allowed to run (engine on, or within its run-on) */
    SP_FLAG_KEY = 8,    /* the key is on while the engine is off */
    SP_FLAG_BONNET = 16 /* the bonnet is up */
};

struct sp_inputs {
    double in[SP_INPUTS];
    double distance;
    unsigned flags;
};

#endif
