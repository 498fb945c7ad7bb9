#!/bin/sh
# All figures, animations and tables of an invented paper, from three
# structures. Run it in the folder of the structures.
set -e
out=paper
mkdir -p "$out"

# Figure 1: the three molecules in their frames.
lobewright figure bipyramid.xyz trans.xyz ring.xyz --width 60 --dpi 600 -o "$out/figure-1-{name}.png"

# Figure 2: what goes with what at the metal of the bipyramid.
lobewright figure bipyramid.xyz --on F:sigma --sheet levels --width 120 -o "$out/figure-2.pdf"

# Figure 3: all pi orbitals of the ring, as vectors.
lobewright figure ring.xyz --on C:pi-out --look ink --width 120 -o "$out/figure-3.svg"

# Figure 4: why b1u of one author is b3u of another.
lobewright figure trans.xyz --sheet frames --second axes-zyx --width 120 -o "$out/figure-4.pdf"

# The supporting information: an operation on one partner, and tables.
lobewright animation ring.xyz --on C:pi-out --irrep "E1''" --operation "C5(z)" --size 400x300 -o "$out/animation-1.gif"
lobewright table bipyramid.xyz trans.xyz ring.xyz --of characters,operations -o "$out/table-{name}.tex"
lobewright table bipyramid.xyz --on F:sigma --of coefficients -o "$out/coefficients.csv"

# A figure of last year, wider, from the figure itself.
lobewright figure "$out/figure-3.svg" --width 180 -o "$out/figure-3-wide.pdf"
