"""A package with whatever could break a page: long names, long formulas, faults, much text without spaces."""

from __future__ import annotations

from calcgen.site.facts import PackageInput
from tests.site.helpers import FAULTY, FED, STRINGER, package

_SUM = "+".join([r"\frac{N}{A}"] * 10)

LONG = f"""\
# {"Averylongtitlewithoutanyspace" * 3}

```sheet
purpose = {"Purposewithoutspaces" * 6}
```
```assumptions
A1 | {"assumed" * 20} | {"tobeconfirmed" * 9}
```
{"wordwithoutspaces" * 12} and a value {{M_long_result}}.

    {"code that goes on and on, " * 6}

| a table | with many | columns | that | need | much | more | room | than | a | phone | has | to | give |
|---|---|---|---|---|---|---|---|---|---|---|---|---|---|
| 1 | 2 | 3 | 4 | 5 | 6 | 7 | 8 | 9 | 10 | 11 | 12 | 13 | {"fourteen" * 5} |

$$ \\sigma = {_SUM} $$

```inputs
L_span_between_bearings_of_the_east_trestle = 6.0 m | {"note" * 20} | {"reference" * 9}
q = 123456.7 kPa | large
n = 3
text = "{"text" * 30}"
```
```working
M_long_result [kN·m] = q*L_span_between_bearings_of_the_east_trestle^3/8 + q*(2 m)^3*(1 + n^2 + n^3)/(1 + n)
κ = 1/(n + sqrt(n^2 - 1)) when n >= 1 and n < 10 and not (n == 5 or n == 6) and n != 7
  = (n + 1)*(n + 2)*(n + 3)*(n + 4)*(n + 5)*(n + 6)*(n + 7) otherwise
r = (n*n + n*n/2 + n*n/3 + n*n/4 + n*n/5 + n*n/6 + n*n/7 + n*n/8 + n*n/9)/(n + n^2 + n^3 + n^4)
abs(M_long_result)/(n*100000000 kN·m) + sqrt(n*n + 1)/(n*100) + κ/(1 + n + n^2) <= 1.0 | {"label" * 12}
n <= 0.001 | far beyond
```
"""


def extreme() -> PackageInput:
    """Return the package."""
    return package(STRINGER, FED, FAULTY, LONG, "")
