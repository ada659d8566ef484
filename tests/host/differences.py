"""Where LibreOffice answers otherwise than xlroot, function by function, and why.

xlroot follows Excel's documentation. A function that differs and is not listed fails the test, and
so does a listed function that no longer differs.
"""

from __future__ import annotations

_REASONS: dict[str, str] = {
    "in a range LibreOffice counts logicals as numbers; Excel leaves them out": """
        AVEDEV CORREL COVAR COVARIANCE.P COVARIANCE.S F.TEST FTEST FORECAST FORECAST.LINEAR
        INTERCEPT KURT MEDIAN MIRR PEARSON PERCENTILE PERCENTILE.INC QUARTILE QUARTILE.EXC
        QUARTILE.INC RSQ SERIESSUM SKEW SKEW.P SLOPE STEYX SUMPRODUCT SUMX2MY2 SUMX2PY2
        SUMXMY2 TRIMMEAN Z.TEST ZTEST
    """,
    "LibreOffice takes a logical as 1 where Excel takes it as the text TRUE": """
        CLEAN CODE CONCAT CONCATENATE FIND HYPERLINK LEFT LEN LOWER MID PROPER REPLACE REPT
        RIGHT SEARCH SUBSTITUTE TEXT TEXTJOIN TRIM UNICODE UPPER
    """,
    "LibreOffice takes a logical as a number where Excel keeps the types apart": """
        ISEVEN ISODD ISNUMBER LOOKUP MATCH TYPE VALUE GESTEP MDETERM MINVERSE MMULT
        FVSCHEDULE COMBINA
    """,
    "LibreOffice takes a text among the arguments as 0; Excel gives #VALUE!": """
        AVERAGEA MAXA MINA STDEVPA VARPA
    """,
    "LibreOffice computes these only to some ten digits": """
        BESSELK
    """,
    "outside the domain that Excel documents as #NUM!": """
        BETA.INV BETADIST BETAINV CHISQ.TEST CHITEST HYPGEOM.DIST LOGNORM.DIST LOGNORMDIST
        DB NPER RECEIVED SYD PRICEMAT TBILLPRICE YIELDMAT TIME MROUND RRI F.INV XNPV RATE
    """,
    "not known to this version of LibreOffice under the name": """
        BINOM.DIST.RANGE SKEWP XLOOKUP XMATCH
    """,
    "LibreOffice needs a second argument in files of this format": """
        CEILING FLOOR
    """,
    "a code below 1 is #VALUE! in Excel": """
        CHAR UNICHAR
    """,
    "LibreOffice takes only a reference": """
        COLUMNS ROWS COUNTBLANK INDEX N T
    """,
    "a criterion that is a fault counts that fault in Excel and is passed on by LibreOffice; a text for a range is refused by both in other ways": """
        COUNTIF COUNTIFS SUMIF SUMIFS MAXIFS MINIFS
    """,
    "the hyperbolic function overflows; LibreOffice gives the limit": """
        CSCH SECH
    """,
    "serial 0 and 1, and times of day, are read by the 1900 system here and from 30 December 1899 there": """
        DATE DAY MONTH YEAR DAYS DAYS360 NETWORKDAYS WORKDAY
    """,
    "actual/actual is averaged over other years": """
        DURATION
    """,
    "LibreOffice limits the digits": """
        FIXED ROUND ROUNDDOWN ROUNDUP TRUNC
    """,
    "LibreOffice wants a range for both arguments": """
        FREQUENCY
    """,
    "LibreOffice reads an array of two dimensions column by column, Excel row by row": """
        NPV GROWTH LINEST LOGEST TREND
    """,
    "an empty text does not match a number in Excel": """
        HLOOKUP VLOOKUP
    """,
    "LibreOffice stops after twenty iterations": """
        IRR
    """,
    "LibreOffice takes a blank as nothing": """
        LCM POISSON POISSON.DIST
    """,
    "LibreOffice takes the decimal separator from the locale or refuses": """
        NUMBERVALUE
    """,
    "Excel cuts the digits off, LibreOffice rounds them": """
        PERCENTRANK PERCENTRANK.EXC PERCENTRANK.INC
    """,
    "LibreOffice refuses rates below -1": """
        PMT PV
    """,
    "LibreOffice gives #NUM! where the power underflows": """
        POWER
    """,
    "LibreOffice rounds 6.999999999999999 up before cutting": """
        QUOTIENT
    """,
    "Excel gives #N/A for a number that is not in the list": """
        RANK RANK.AVG RANK.EQ
    """,
}

DIFFERENCES = {name: reason for reason, names in _REASONS.items() for name in names.split()}
"""The reason by function."""
