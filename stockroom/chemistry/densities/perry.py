"""Rows of Perry's *Chemical Engineers' Handbook*, all from memory: % w/w, then g/cm³.

20 °C, but hydrogen peroxide at 18 °C, which is how its table is printed. Each file of
rows was checked against the model of Laliberté & Cooper (J. Chem. Eng. Data 49 (2004)
1141, coefficients of 2009) as far as it reaches; past that, as told beside the table.
"""

from __future__ import annotations

SOURCE = "Perry's Handbook table of aqueous solutions"

# Within 0.22 % of the model up to its end near 78 %; above, against what was seen:
# 70 % 1.6105 and 100 % 1.8305 (CRC Handbook), 96 % 1.84 (OpenStax, Appendix F).
# The dearest figure here is the maximum: 97 % weighs more than 98 %, and 100 % less.
SULFURIC_ACID = """
  41 1.3116   42 1.3205   43 1.3294   44 1.3384   45 1.3476   46 1.3569
  47 1.3663   48 1.3758   49 1.3854   51 1.4049   52 1.4148   53 1.4248
  54 1.4350   55 1.4453   56 1.4557   57 1.4662   58 1.4768   59 1.4875
  60 1.4983   61 1.5091   62 1.5200   63 1.5310   64 1.5421   65 1.5533
  66 1.5646   67 1.5760   68 1.5874   69 1.5989   71 1.6221   72 1.6338
  73 1.6456   74 1.6574   75 1.6692   76 1.6810   77 1.6927   78 1.7043
  79 1.7158   80 1.7272   81 1.7383   82 1.7491   83 1.7594   84 1.7693
  85 1.7786   86 1.7872   87 1.7951   88 1.8022   89 1.8087   90 1.8144
  91 1.8195   92 1.8240   93 1.8279   94 1.8312   95 1.8337   96 1.8355
  97 1.8364   98 1.8361   99 1.8342
"""

# Within 0.26 % of the model up to its end at 70 %; above, against 71 % 1.42 (OpenStax,
# Appendix F) and 69.6 % 1.41 (handbook reprint), both seen, and for smoothness.
NITRIC_ACID = """
  41 1.2527   42 1.2591   43 1.2655   44 1.2719   45 1.2783   46 1.2847
  47 1.2911   48 1.2975   49 1.3040   50 1.3100   51 1.3160   52 1.3219
  53 1.3278   54 1.3336   55 1.3393   56 1.3449   57 1.3505   58 1.3560
  59 1.3614   60 1.3667   61 1.3719   62 1.3769   63 1.3818   64 1.3866
  65 1.3913   66 1.3959   67 1.4004   68 1.4048   69 1.4091   70 1.4134
  71 1.4176   72 1.4218   73 1.4258   74 1.4298   75 1.4337   76 1.4375
  77 1.4413   78 1.4450   79 1.4486   80 1.4521   81 1.4555   82 1.4589
  83 1.4622   84 1.4655   85 1.4686   86 1.4716   87 1.4745   88 1.4773
  89 1.4800   90 1.4826   91 1.4850   92 1.4873   93 1.4892   94 1.4912
  95 1.4932   96 1.4952   97 1.4974   98 1.5008   99 1.5056  100 1.5129
"""

# Within 0.19 % of the model up to its end at 85 %; three decimals above 40 %, as printed.
PHOSPHORIC_ACID = """
  12 1.0647   14 1.0764   16 1.0884   18 1.1008   22 1.1263   24 1.1395
  26 1.1529   28 1.1665   35 1.2160   45 1.2930   50 1.3350   55 1.3790
  60 1.4260   65 1.4750   70 1.5260   75 1.5790   80 1.6330   85 1.6890
  90 1.7460   92 1.7700   94 1.7940   96 1.8190   98 1.8440  100 1.8700
"""

# Up to 0.6 % above the model, which already runs 0.27 % below the row seen at 40 %. Kept,
# since 50 % 1.53 (OpenStax, Appendix F) and 50.5 % 1.53 (handbook reprint) were seen.
SODIUM_HYDROXIDE = """
  42 1.4494   44 1.4685   46 1.4873   48 1.5065   50 1.5253
"""

# Within 0.18 % of the model throughout. The pure acid's own density, 1.0492 at 20 °C from
# memory, lies nearer to this table than to the CRC Handbook's 1.0477.
ACETIC_ACID = """
   1 0.9996    2 1.0012    3 1.0025    4 1.0040    5 1.0055    6 1.0069
   7 1.0083    8 1.0097    9 1.0111   10 1.0125   12 1.0154   14 1.0182
  16 1.0209   18 1.0236   20 1.0263   22 1.0288   24 1.0313   26 1.0338
  28 1.0361   30 1.0384   32 1.0406   34 1.0428   36 1.0449   38 1.0469
  40 1.0488   42 1.0507   44 1.0525   46 1.0542   48 1.0559   50 1.0575
  52 1.0590   54 1.0604   56 1.0618   58 1.0631   60 1.0642   62 1.0653
  64 1.0662   66 1.0671   68 1.0678   70 1.0685   72 1.0690   74 1.0694
  76 1.0698   78 1.0700   80 1.0700   82 1.0698   84 1.0693   86 1.0685
  88 1.0675   90 1.0661   92 1.0643   94 1.0619   96 1.0588   98 1.0549
  99 1.0524  100 1.0498
"""

# At 18 °C: about 0.0003 more than at 20 °C when weak, 0.001 at 35 %, 0.002 when pure.
# Within 0.17 % of the model at 18 °C; 50 % was seen as 1.19662 on a tutor's page.
HYDROGEN_PEROXIDE_18C = """
   1 1.0022    2 1.0058    4 1.0131    6 1.0204    8 1.0277   10 1.0351
  12 1.0425   14 1.0499   16 1.0574   18 1.0649   20 1.0725   22 1.0802
  24 1.0880   26 1.0959   28 1.1040   30 1.1122   35 1.1327   40 1.1536
  45 1.1749   50 1.1966   55 1.2188   60 1.2416   65 1.2651   70 1.2897
  75 1.3149   80 1.3406   85 1.3667   90 1.3931   95 1.4197  100 1.4465
"""
