"""Rows of the Küster-Thiel logarithmic tables for chemists, 20 °C, all from memory.

% w/w, then g/cm³. The table is printed by density, so its per cents are not round.
Checked against the model of Laliberté & Cooper (J. Chem. Eng. Data 49 (2004) 1141,
coefficients of 2009).
"""

from __future__ import annotations

SOURCE = "Küster-Thiel table"

# Within 0.14 % of the model throughout, where the CRC Handbook's rows are up to 0.65 % low.
POTASSIUM_HYDROXIDE = """
 1.295 1.010   2.38 1.020   3.48 1.030   4.58 1.040   5.66 1.050   6.74 1.060
  7.82 1.070   8.89 1.080   9.96 1.090  11.03 1.100  12.08 1.110  13.14 1.120
 14.19 1.130  15.22 1.140  16.26 1.150  17.29 1.160  18.32 1.170  19.35 1.180
 20.37 1.190  21.38 1.200  22.38 1.210  23.38 1.220  24.37 1.230  25.36 1.240
 26.34 1.250  27.32 1.260  28.29 1.270  29.25 1.280  30.21 1.290  31.15 1.300
 32.09 1.310  33.03 1.320  33.97 1.330  34.90 1.340  35.82 1.350  36.735 1.360
 37.65 1.370  38.56 1.380  39.46 1.390  40.37 1.400  41.26 1.410  42.155 1.420
 43.04 1.430  43.92 1.440  44.79 1.450  45.66 1.460  46.53 1.470  47.39 1.480
 48.25 1.490  49.10 1.500  49.95 1.510  50.80 1.520  51.64 1.530  52.05 1.535
"""

# Carries the CRC Handbook's table on from 30 %, which this one repeats (30.00 % 0.892).
# Drifts from 0.17 to 0.34 % above the model; but the row seen at 30 % is 0.15 % above it
# already, and 35 % 0.88 was seen in the British Pharmacopoeia. The last row is not printed:
# it carries the slope of the three before it on to the strength of the trade's bottle.
AMMONIA = """
 30.685 0.890  31.37 0.888  32.09 0.886  32.84 0.884  33.595 0.882  34.35 0.880
 35 0.8783
"""
