"""Heat in the steriliser: substrate, steam, conduction into a bag, the cycle of a run, cooling, lethality.

Times and temperatures are estimates for planning. They are no safety control and no validated sterilisation record.
"""
