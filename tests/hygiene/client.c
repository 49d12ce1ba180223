/* A stranger's program: only what is installed, only what the headers say. Prints the page of all keys.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <swirlpot/base.h>
#include <swirlpot/circuit.h>
#include <swirlpot/drive.h>
#include <swirlpot/fluid.h>
#include <swirlpot/paper.h>
#include <swirlpot/part.h>
#include <swirlpot/trace.h>

#include <string.h>

int main(void)
{
    double length = 0;
    char why[200];
    struct sp_units *u = sp_units_open();
    bool read = u && sp_quantity_read(u, SP_K_LENGTH, "2 km", &length, why, sizeof why);
    sp_units_close(u);
    if (!read || length < 1999.999 || length > 2000.001 || strlen(sp_version()) < 5) return 1;
    sp_keys_document(stdout);
    return fflush(stdout) != 0;
}
