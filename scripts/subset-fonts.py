#!/usr/bin/env python3
"""Makes the files in fonts/ again. Run it only when a font, a weight or the list of signs changes; the results are committed.

    apt-get install python3-fonttools python3-brotli
    /usr/bin/python3 scripts/subset-fonts.py

Sources: npm's packagings of three families, all under the SIL Open Font License 1.1 (kept beside the results).
- @fontsource-variable/*: variable fonts, already split by script. The weight axis is cut to the weights that the interface
  uses, 400 to 600, which saves about a fifth.
- @expo-google-fonts/*: the whole fonts, from which come the mathematical signs that the former leave out.
"""

import io
import pathlib
import shutil
import subprocess
import tarfile
import tempfile

from fontTools.subset import Options, Subsetter, load_font, save_font
from fontTools.ttLib import TTFont
from fontTools.varLib.instancer import instantiateVariableFont

WEIGHTS = (400, 600)
FEATURES = ['ccmp', 'locl', 'mark', 'mkmk', 'kern', 'liga', 'tnum', 'lnum', 'frac', 'zero']
FONTS = pathlib.Path(__file__).resolve().parent.parent / 'fonts'

# package, file in it, the name it gets here
VARIABLE = [
    ('@fontsource-variable/atkinson-hyperlegible-next@5.3.0', 'atkinson-hyperlegible-next-latin-wght-normal', 'next-latin'),
    ('@fontsource-variable/atkinson-hyperlegible-next@5.3.0', 'atkinson-hyperlegible-next-latin-wght-italic', 'next-latin-italic'),
    ('@fontsource-variable/atkinson-hyperlegible-next@5.3.0', 'atkinson-hyperlegible-next-latin-ext-wght-normal', 'next-latin-ext'),
    ('@fontsource-variable/atkinson-hyperlegible-mono@5.3.0', 'atkinson-hyperlegible-mono-latin-wght-normal', 'mono-latin'),
    ('@fontsource-variable/atkinson-hyperlegible-mono@5.3.0', 'atkinson-hyperlegible-mono-latin-ext-wght-normal', 'mono-latin-ext'),
    ('@fontsource-variable/stix-two-text@5.3.0', 'stix-two-text-latin-wght-normal', 'stix-latin'),
    ('@fontsource-variable/stix-two-text@5.3.0', 'stix-two-text-latin-wght-italic', 'stix-latin-italic'),
    ('@fontsource-variable/stix-two-text@5.3.0', 'stix-two-text-greek-wght-normal', 'stix-greek'),
    ('@fontsource-variable/stix-two-text@5.3.0', 'stix-two-text-greek-wght-italic', 'stix-greek-italic'),
]

# What the interface writes beyond Latin: relations, roots, and the superscripts of units and powers of ten.
MATHS = '√π≤≥≈≠∞μΩ∂∑∫◊Δħ†'
RAISED = '⁰⁴⁵⁶⁷⁸⁹⁺⁻₀₁₂₃₄₅₆₇₈₉⅛⅜⅝⅞′″ℏ'
SIGNS = [
    ('@expo-google-fonts/atkinson-hyperlegible-next@0.4.1', '400Regular/AtkinsonHyperlegibleNext_400Regular', 'next-signs', MATHS),
    ('@expo-google-fonts/atkinson-hyperlegible-next@0.4.1', '600SemiBold/AtkinsonHyperlegibleNext_600SemiBold', 'next-signs-600', MATHS),
    ('@expo-google-fonts/atkinson-hyperlegible-mono@0.4.1', '400Regular/AtkinsonHyperlegibleMono_400Regular', 'mono-signs', MATHS),
    ('@expo-google-fonts/stix-two-text@0.4.2', '400Regular/STIXTwoText_400Regular', 'stix-signs', RAISED),
]
LICENCES = {'next': 'atkinson-hyperlegible-next@5.3.0', 'mono': 'atkinson-hyperlegible-mono@5.3.0', 'stix': 'stix-two-text@5.3.0'}


def unpack(package: str, into: pathlib.Path) -> pathlib.Path:
    """The unpacked folder of an npm package, fetched once."""
    folder = into / package.replace('/', '+')
    if not folder.exists():
        folder.mkdir()
        subprocess.run(['npm', 'pack', package], cwd=folder, check=True, capture_output=True)
        with tarfile.open(next(folder.glob('*.tgz'))) as archive:
            archive.extractall(folder)
    return folder / 'package'


def options() -> Options:
    return Options(flavor='woff2', layout_features=FEATURES, hinting=False, desubroutinize=True, notdef_outline=True)


def make_variable(source: pathlib.Path, target: pathlib.Path) -> None:
    whole = TTFont(source, lazy=False)
    whole.flavor = None
    # Through a file in between: the narrowed variation table must be read anew before it can be subset.
    between = io.BytesIO()
    instantiateVariableFont(whole, {'wght': WEIGHTS}).save(between)
    between.seek(0)
    font = TTFont(between)
    subsetter = Subsetter(options())
    subsetter.populate(unicodes=list(font.getBestCmap()))
    subsetter.subset(font)
    save_font(font, str(target), options())


def make_signs(source: pathlib.Path, target: pathlib.Path, signs: str) -> None:
    font = load_font(str(source), options())
    subsetter = Subsetter(options())
    subsetter.populate(text=signs)
    subsetter.subset(font)
    save_font(font, str(target), options())


def main() -> None:
    with tempfile.TemporaryDirectory() as folder:
        packages = pathlib.Path(folder)
        for package, name, target in VARIABLE:
            make_variable(unpack(package, packages) / 'files' / f'{name}.woff2', FONTS / f'{target}.woff2')
        for package, name, target, signs in SIGNS:
            make_signs(unpack(package, packages) / f'{name}.ttf', FONTS / f'{target}.woff2', signs)
        for family, package in LICENCES.items():
            licence = unpack(f'@fontsource-variable/{package}', packages) / 'LICENSE'
            shutil.copy(licence, FONTS / f'{family}-OFL.txt')


if __name__ == '__main__':
    main()
