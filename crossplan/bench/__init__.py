"""What people hold: labels, bench sheets, calendar file, report, drawings, methods table. Reads a `Plan` and decides
nothing.

words          shared phrases: dates, short genotypes, raised text, signs of sex
choice         which tasks and steps of a plan are printed (days, person, steps)
walk           the tasks of a day as stops, one for what is done to one stock, emptying vials told apart
safety         general safety reminders with their sources
code2d         the square code on a label: its text and its pattern
pdf_page       drawing on PDF pages; the only file that knows the PDF library
fitting        making a text fit a box without losing any of it unseen
sheet_layout   the papers that labels are printed on
label_face     one vial label;  stock_label  one stock label;  labels  sheets and rolls of them
paper          pages that fill from top to bottom: paragraphs, boxes to tick, cells to write in
scheme_drawing crosses drawn with their homologues
bench_sheet    the pages for each working day
figure         a scheme as SVG and PNG
calendar_file  the same tasks for a calendar program
summary        a plan to read, in Markdown
report         a plan to read, in one HTML file;  report_chart  its chart of days
terminal       a cross, a target or a day in plain text
methods_table  every genotype for the methods section of a paper: CSV, Markdown, LaTeX
plan_folder    the folder of a plan, written whole
"""
