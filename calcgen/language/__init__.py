"""Text -> Calc: lines, expressions and blocks, with every fault at its place."""
