"""Days and numbers from biology: how fast flies develop, how they are handled, how many there will be.

Pure: hours and counts only, no calendar dates, no files.

    course       the temperatures that a culture sees, hour by hour
    development  the clock: stages, hatching, eclosion along a course
    handling     rules of the fly room: virgins, parents, collecting, stock transfers, ages, feeding
    tails        sums of binomial and negative binomial probabilities
    counting     how many flies to look through
    yields       how many vials to set up, how many virgins a day's visits catch
    report       what `crossplan rear --json` and `crossplan count --json` print
"""
