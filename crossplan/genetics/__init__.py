"""What flies are: chromosomes, elements, meiosis, survival and appearance.

Pure: no dates, no files but the data beside this module.

    chromosome   the five chromosomes and their arms
    element      what is written on a homologue, and what it does (traits)
    fly          homologues, pairs of them, and the fly
    catalogue    balancers, markers, landing sites, component classes, map: the data with their sources
    notation     genotype text to flies and back
    meiosis      which gametes a fly makes
    survival     which zygotes live, and which flies are fertile
    appearance   what a person can see on a fly with the means that the lab has
    progeny      a cross: its classes, shares and look-alikes
"""
