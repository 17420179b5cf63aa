"""What people hold: labels, bench sheets, calendar file, report. Reads a `Plan` and decides nothing.

words          shared phrases: dates, short genotypes, raised text, signs of sex
choice         which tasks and steps of a plan are printed (days, person, steps)
safety         general safety reminders with their sources
code2d         the square code on a label: its text and its pattern
walk           the tasks of a day as stops, one for what is done to one stock
pdf_page       drawing on PDF pages; the only file that knows the PDF library
sheet_layout   the papers that labels are printed on
labels         vial labels
scheme_drawing crosses drawn with their homologues, for the bench sheet
bench_sheet    the pages for each working day
calendar_file  the same tasks for a calendar program
summary        a plan to read, in Markdown
report         a plan to read, in one HTML file
"""
