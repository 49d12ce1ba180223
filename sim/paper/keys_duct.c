/* Keys of the duct: inlet, diffuser, exit.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "keys_row.h"

static const struct sp_word lips[] = {{"sheet edge", 1.0},     {"hole in a skin", 0.5}, {"folded", 0.3},
                                      {"rounded 10 mm", 0.18}, {"bellmouth", 0.05},     {NULL, 0}};
static const struct sp_word diffusers[] = {
    {"sudden", SP_DIFFUSER_SUDDEN}, {"conical", SP_DIFFUSER_CONICAL}, {NULL, 0}};

const struct sp_key sp_keys_duct[] = {
    {GROUP("car.duct"), REQUIRED, SAYS("the air's way through the car")},
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

    {GROUP("car.duct.diffuser"), OPTIONAL, SAYS("between inlet and core; absent: no loss")},
    {QUANTITY("car.duct.diffuser.loss", NUMBER, duct[0].diffuser.loss), DEFAULT("0"), RANGE("0 to 100"),
     SAYS("loss on the inlet's dynamic head; short straight sheets 0.38"), DEFINITION},
    {WORD("car.duct.diffuser.kind", diffusers, ENUM, duct[0].diffuser.kind), WHEN("instead of loss"),
     RANGE("sudden, conical"), SAYS("shape with a published loss"),
     SOURCE("Borda-Carnot; Rennels & Hudson 2012")},
    {QUANTITY("car.duct.diffuser.length", LENGTH, duct[0].diffuser.length), WHEN("with kind conical"),
     RANGE("above 0 m, at most 10 m"), SAYS("length along its axis"), OWN},
    {FLAG("car.duct.diffuser.core_damping", duct[0].diffuser.core_damping), DEFAULT("false"),
     RANGE("true, false"),
     SAYS("the core's resistance lessens the loss of stall, a proposal without "
          "published coefficients"),
     PRACTICE},

    {GROUP("car.duct.exit"), REQUIRED, SAYS("where the air goes out")},
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
