# SPDX-License-Identifier: GPL-3.0-or-later
"""swirlpot's model written a second time from docs/model.md alone. Sections named in the modules are that page's."""
