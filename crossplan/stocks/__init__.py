"""The shelf: reading people's spreadsheets, the inventory, the audit.

table      a spreadsheet as rows of text with their row numbers, whatever the file
columns    which column is which
dates      the dates that people type
shelf      stocks with what was understood of them
keeping    how often a stock is flipped
audit      what is wrong with a shelf, a function for each rule
"""
