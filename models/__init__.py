"""What the farm is and how nature behaves: pure values in, pure values out.

Nothing in this package reads a file, a clock or a random source, prints, or imports a solver.
"""
