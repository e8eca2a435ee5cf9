"""Makes the fonts of the page from their npm packages: subsets in WOFF2 under names of their own.

    npm pack source-sans@3.52.0 @fontsource/noto-sans-math@5.3.0
    for archive in *.tgz; do mkdir "${archive%.tgz}" && tar xzf "$archive" -C "${archive%.tgz}"; done
    pip install fonttools==4.68.0 brotli==1.2.1
    python styles/fonts/make.py FOLDER_OF_THE_ABOVE

The same versions give the same bytes. Source Sans reserves its name ("Source"), so what is cut from it must
bear another; both fonts are renamed alike. Licences stand beside the fonts.
"""

import sys
from pathlib import Path

from fontTools.subset import Options, Subsetter
from fontTools.ttLib import TTFont

HERE = Path(__file__).parent

# What text is written in: Latin with Latin-1 and Extended-A, Greek, punctuation, superiors, arrows, signs.
TEXT = [*range(0x20, 0x7F), *range(0xA0, 0x180), *range(0x386, 0x3CF), *range(0x2010, 0x2027), 0x202F, 0x2032, 0x2033]
TEXT += [0x2009, 0x200A, *range(0x2070, 0x2095), 0x20AC, 0x2122, 0x2150, *range(0x2153, 0x215F), *range(0x2190, 0x2196)]
TEXT += [0x2202, 0x2206, 0x2211, 0x2212, 0x2215, 0x221A, 0x221E, 0x222B, 0x2248, 0x2260, 0x2264, 0x2265]
TEXT += [0x25B2, 0x25B6, 0x25BC, 0x25C6, 0x25CF, 0x25CB, 0x2713, 0x2717]

# What formulas are written in: upright, italic, bold and bold italic letters, digits, operators, arrows, fences.
MATHS = [*range(0x20, 0x7F), 0xA0, 0xAC, 0xB0, 0xB1, 0xB7, 0xD7, 0xF7, *range(0x391, 0x3CA), 0x3D1, 0x3D5, 0x3F5]
MATHS += [0x2009, 0x200A, *range(0x2061, 0x2065), 0x2016, 0x2026, *range(0x2032, 0x2035), 0x210E, 0x2113, 0x2146]
MATHS += [*range(0x2190, 0x2196), 0x21D2, 0x21D4, *range(0x2200, 0x2300), *range(0x2308, 0x230C), *range(0x239B, 0x23AF)]
MATHS += [0x25A1, 0x25C7, 0x27E8, 0x27E9, 0x2A7D, 0x2A7E, 0x302, 0x303, 0x304, 0x307, 0x308, 0x305, 0x20D7, 0xAF, 0x5E]
MATHS += [*range(0x1D400, 0x1D49C), *range(0x1D6A4, 0x1D756), *range(0x1D7CE, 0x1D7D8)]

FONTS = [
    ("Spanfolio Text", "Regular", "source-sans-3.52.0/package/WOFF2/TTF/SourceSans3-Regular.ttf.woff2", TEXT),
    ("Spanfolio Text", "Italic", "source-sans-3.52.0/package/WOFF2/TTF/SourceSans3-It.ttf.woff2", TEXT),
    ("Spanfolio Text", "Semibold", "source-sans-3.52.0/package/WOFF2/TTF/SourceSans3-Semibold.ttf.woff2", TEXT),
    (
        "Spanfolio Math",
        "Regular",
        "fontsource-noto-sans-math-5.3.0/package/files/noto-sans-math-latin-400-normal.woff2",
        MATHS,
    ),
]


def make(folder, family, style, source, characters):
    """One subset, written beside this script."""
    options = Options()
    options.flavor = "woff2"
    options.layout_features = ["kern", "liga", "ccmp", "mark", "mkmk", "lnum", "tnum", "ssty", "flac", "dtls"]
    options.hinting = False
    options.notdef_outline = True
    options.name_IDs = [0, 1, 2, 3, 4, 6, 13, 14]
    options.drop_tables += ["FFTM", "DSIG"]
    font = TTFont(folder / source, recalcTimestamp=False)
    subsetter = Subsetter(options)
    subsetter.populate(unicodes=characters)
    subsetter.subset(font)
    post_script = f"{family}-{style}".replace(" ", "")
    for identity, text in {1: family, 2: style, 3: post_script, 4: f"{family} {style}", 6: post_script}.items():
        font["name"].setName(text, identity, 3, 1, 0x409)
    font["name"].names = [name for name in font["name"].names if name.platformID == 3 and name.langID == 0x409]
    if "CFF " in font:
        font["CFF "].cff.fontNames = [post_script]
    font.flavor = "woff2"
    target = HERE / f"{family} {style}.woff2".replace(" ", "-")
    font.save(target)
    print(target.name, target.stat().st_size)


for family, style, source, characters in FONTS:
    make(Path(sys.argv[1]), family, style, source, characters)
