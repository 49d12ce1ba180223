/* Keys of the duct: inlet, diffuser, exit.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "keys_row.h"

static const struct sp_word lips[] = {{"sheet edge", 1.0},     {"hole in a skin", 0.5}, {"folded", 0.3},
                                      {"rounded 10 mm", 0.18}, {"bellmouth", 0.05},     {NULL, 0}};
static const struct sp_word diffusers[] = {
    {"sudden", SP_DIFFUSER_SUDDEN}, {"conical", SP_DIFFUSER_CONICAL}, {"one plane", SP_DIFFUSER_ONE_PLANE}, {NULL, 0}};
static const struct sp_key_column recovery_columns[] = {{SP_K_NUMBER, "0 to 20"}, {SP_K_NUMBER, "-2 to 1.5"}};

const struct sp_key sp_keys_duct[] = {
    {GROUP("car.duct"), REQUIRED,
     LISTED("ducts", sp_duct_design, SP_DUCTS, "each with an inlet, cores, fans and exits of its own"),
     COUNTED(ducts), SAYS("the air's way through the car")},
    {GROUP("car.duct.inlet"), REQUIRED, SAYS("where the air comes in")},
    {QUANTITY("car.duct.inlet.area", AREA, duct[0].inlet.area), REQUIRED, RANGE("above 0 m2, at most 10 m2"),
     SAYS("area of the inlet at its lip"), OWN},
    {QUANTITY("car.duct.inlet.recovery", NUMBER, duct[0].inlet.recovery), DEFAULT("1"), RANGE("-2 to 1.5"),
     SAYS("total pressure available in the inlet, less ambient, over dynamic pressure; nose 0.98, sealed "
          "grille 0.88, pod behind a wheel 0.75"),
     DEFINITION},
    {WORD("car.duct.inlet.lip", lips, DOUBLE, duct[0].inlet.lip_loss), DEFAULT("sheet edge"),
     RANGE("sheet edge, hole in a skin, folded, rounded 10 mm, bellmouth"),
     SAYS("what the lip is like; gives `lip_loss` 1, 0.5, 0.3, 0.18, 0.05"),
     SOURCE("entrance losses after Idelchik; sheet edge NACA TN 3004")},
    {QUANTITY("car.duct.inlet.lip_loss", NUMBER, duct[0].inlet.lip_loss), WHEN("else by lip"), RANGE("0 to 10"),
     SAYS("k in k rho/2 max(V1 - V, 0)^2, V1 in the inlet, V through the air"), OWN},
    {QUANTITY("car.duct.inlet.screen", NUMBER, duct[0].inlet.screen), DEFAULT("0"), RANGE("0 to 1000"),
     SAYS("loss of a mesh on the inlet's dynamic head; stone mesh 0.6, insect screen 1.0"), DEFINITION},
    {QUANTITY("car.duct.inlet.blocked", NUMBER, duct[0].inlet.blocked), DEFAULT("0"), RANGE("0 to 0.99"),
     SAYS("share of the opening that is taped or filled with grass"), DEFINITION},
    {QUANTITY("car.duct.inlet.layer_thickness", LENGTH, duct[0].inlet.layer_thickness), DEFAULT("0 m"),
     RANGE("0 m to 5 m"), SAYS("of the boundary layer on the wall that a slot of `height` stands on"),
     SOURCE("1/7-power profile, derived")},
    {QUANTITY("car.duct.inlet.height", LENGTH, duct[0].inlet.height), WHEN("with layer_thickness"),
     RANGE("above 0 m, at most 5 m"), SAYS("of the opening over that wall"), OWN},
    {TABLE("car.duct.inlet.recovery_table", recovery_columns, duct[0].inlet.recovery_table),
     WHEN("instead of recovery"), .type = "table of numbers",
     SAYS("V1/V, velocity in the inlet over that through the air, rising, and the recovery there, for submerged "
          "inlets; layer included"),
     OWN},
    {QUANTITY("car.duct.inlet.recirculated", NUMBER, duct[0].inlet.recirculated), DEFAULT("0"), RANGE("0 to 0.5"),
     SAYS("share of the air behind the cores that is drawn in again by a standing car; unsealed 0.1 to 0.2"),
     DEFINITION},
    {QUANTITY("car.duct.inlet.recirculation_ends", SPEED, duct[0].inlet.recirculation_ends), DEFAULT("50 km/h"),
     RANGE("1 km/h to 300 km/h"), SAYS("speed through the air at which that has ceased"), PRACTICE},
    {QUANTITY("car.duct.inlet.preheat_standing", TEMP_DIFF, duct[0].inlet.preheat_standing), DEFAULT("0 K"),
     RANGE("-20 K to 60 K"), SAYS("of the air at the inlet over ambient, standing; sealed 1 K to 5 K"), DEFINITION},
    {QUANTITY("car.duct.inlet.preheat_moving", TEMP_DIFF, duct[0].inlet.preheat_moving), DEFAULT("0 K"),
     RANGE("-20 K to 60 K"), SAYS("the same from 50 km/h on; 0 K to 3 K, low over hot asphalt 3 K to 8 K more"),
     DEFINITION},
    {FLAG("car.duct.inlet.spill", duct[0].inlet.spill), DEFAULT("false"), RANGE("true, false"),
     SAYS("count the drag of air that is spilled ahead of the inlet"), DEFINITION},
    {QUANTITY("car.duct.inlet.lip_suction", NUMBER, duct[0].inlet.lip_suction), DEFAULT("0"), RANGE("0 to 1"),
     SAYS("share of that drag which the suction of the lip gives back: 0 sharp, near 1 well rounded"), DEFINITION},

    {GROUP("car.duct.diffuser"), OPTIONAL, SAYS("between inlet and core; absent: no loss")},
    {QUANTITY("car.duct.diffuser.loss", NUMBER, duct[0].diffuser.loss), DEFAULT("0"), RANGE("0 to 100"),
     SAYS("loss on the inlet's dynamic head; short straight sheets 0.38"), DEFINITION},
    {WORD("car.duct.diffuser.kind", diffusers, ENUM, duct[0].diffuser.kind), WHEN("instead of loss"),
     RANGE("sudden, conical, one plane"), SAYS("shape with a published loss"),
     SOURCE("Borda-Carnot; Rennels & Hudson 2012")},
    {QUANTITY("car.duct.diffuser.length", LENGTH, duct[0].diffuser.length), WHEN("with kind conical or one plane"),
     RANGE("above 0 m, at most 10 m"), SAYS("length along its axis"), OWN},
    {QUANTITY("car.duct.diffuser.height", LENGTH, duct[0].diffuser.height), WHEN("with kind one plane"),
     RANGE("above 0 m, at most 5 m"), SAYS("of the inlet, in the plane that opens; the width stays"), OWN},
    {QUANTITY("car.duct.diffuser.jet_share", NUMBER, duct[0].diffuser.jet_share), DEFAULT("0"), RANGE("0 to 0.95"),
     SAYS("share of the face that it blows upon when it stalls; 0: spread evenly; the inlet's area over the face's "
          "is the least"),
     DEFINITION},
    {FLAG("car.duct.diffuser.core_damping", duct[0].diffuser.core_damping), DEFAULT("false"),
     RANGE("true, false"),
     SAYS("the core's resistance lessens the loss of stall, a proposal without "
          "published coefficients"),
     PRACTICE},

    {GROUP("car.duct.exit"), REQUIRED,
     LISTED("exits", sp_exit, SP_EXITS, "side by side, each with an outside pressure of its own"),
     COUNTED(duct[0].exits), SAYS("where the air goes out")},
    {QUANTITY("car.duct.exit.area", AREA, duct[0].exit[0].area), REQUIRED, RANGE("above 0 m2, at most 10 m2"),
     SAYS("area of the exit"), OWN},
    {QUANTITY("car.duct.exit.loss", NUMBER, duct[0].exit[0].loss), DEFAULT("0"), RANGE("0 to 1000"),
     SAYS("loss on the exit's dynamic head, no contraction besides; holes out of a bay 1.7, vent with vanes "
          "0.6, pod tail 0.2"),
     DEFINITION},
    {QUANTITY("car.duct.exit.pressure_coefficient", NUMBER, duct[0].exit[0].pressure_coefficient), DEFAULT("0"),
     RANGE("-5 to 1.5"),
     SAYS("pressure at the exit, less ambient, over dynamic pressure; wheel arch -0.18, "
          "bonnet vent -0.2 to -0.5"),
     DEFINITION},
    {QUANTITY("car.duct.exit.angle", ANGLE, duct[0].exit[0].angle), DEFAULT("0 deg"), RANGE("0 deg to 180 deg"),
     SAYS("of the jet to the stream, 0 rearwards"), DEFINITION},
    END_OF_KEYS};
