"""Rows of the CRC Handbook, "Concentrative properties of aqueous solutions", 20 °C.

% w/w, then g/cm³. A row ending in "a" was seen (first page of the table, and a web
table of the same data); every other row is from memory. Checked against the model of
Laliberté & Cooper (J. Chem. Eng. Data 49 (2004) 1141, coefficients of 2009), which is
independent of both: no row below is more than 0.3 % away from it. The table's rows for
potassium hydroxide came out up to 0.65 % low by that check and are not used: see
`kuester_thiel.py`. Acetic acid is in `perry.py`, nearer to the density of the pure acid.
"""

from __future__ import annotations

SOURCE = "CRC Handbook table of aqueous solutions"

HYDROCHLORIC_ACID = """
 0.5 1.0007    1 1.0031a   2 1.0081    3 1.0130    4 1.0179    5 1.0228a
   6 1.0278    7 1.0327    8 1.0377    9 1.0426   10 1.0476a  12 1.0576
  14 1.0676   16 1.0777   18 1.0878   20 1.0980a  22 1.1083   24 1.1185
  26 1.1288   28 1.1391   30 1.1492a  32 1.1594   34 1.1693   36 1.1791
  38 1.1886   40 1.1977a
"""

SULFURIC_ACID = """
   1 1.0049a   2 1.0116    3 1.0183    4 1.0250    5 1.0318a   6 1.0385
   7 1.0453    8 1.0522    9 1.0591   10 1.0661a  12 1.0802   14 1.0947
  16 1.1094   18 1.1245   20 1.1398a  22 1.1554   24 1.1714   26 1.1872
  28 1.2031   30 1.2191a  32 1.2353   34 1.2518   36 1.2685   38 1.2855
  40 1.3028a  50 1.3952a  70 1.6105a 100 1.8305a
"""

NITRIC_ACID = """
   1 1.0037a   2 1.0091    3 1.0146    4 1.0202    5 1.0257a   6 1.0314
   7 1.0370    8 1.0427    9 1.0485   10 1.0543a  12 1.0660   14 1.0780
  16 1.0901   18 1.1025   20 1.1150a  22 1.1277   24 1.1406   26 1.1536
  28 1.1668   30 1.1801a  32 1.1934   34 1.2068   36 1.2202   38 1.2335
  40 1.2466a
"""

PHOSPHORIC_ACID = """
   1 1.0038a   2 1.0092    3 1.0146    4 1.0200    5 1.0254a   6 1.0309
   7 1.0364    8 1.0420    9 1.0475   10 1.0531a  20 1.1135a  30 1.1804a
  40 1.2536a
"""

SODIUM_HYDROXIDE = """
 0.5 1.0039    1 1.0095a   2 1.0207    3 1.0318    4 1.0428    5 1.0538a
   6 1.0648    7 1.0758    8 1.0869    9 1.0979   10 1.1089a  12 1.1309
  14 1.1530   16 1.1751   18 1.1972   20 1.2192a  22 1.2412   24 1.2629
  26 1.2848   28 1.3064   30 1.3277a  32 1.3490   34 1.3696   36 1.3900
  38 1.4101   40 1.4299a
"""

AMMONIA = """
 0.5 0.9960    1 0.9938a   2 0.9895    3 0.9853    4 0.9811    5 0.9770a
   6 0.9730    7 0.9690    8 0.9651    9 0.9613   10 0.9575a  12 0.9502
  14 0.9431   16 0.9361   18 0.9294   20 0.9228a  22 0.9164   24 0.9102
  26 0.9040   28 0.8980   30 0.8920a
"""

SODIUM_CHLORIDE = """
 0.5 1.0018    1 1.0053a   2 1.0125    3 1.0196    4 1.0268    5 1.0340a
   6 1.0413    7 1.0486    8 1.0559    9 1.0633   10 1.0707a  12 1.0857
  14 1.1008   16 1.1162   18 1.1319   20 1.1478a  22 1.1640   24 1.1804
  26 1.1972
"""
