"""The command line: parse, call one function, hand the result to a view."""
