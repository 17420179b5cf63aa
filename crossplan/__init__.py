"""crossplan: from a spreadsheet of living fly stocks to crosses that can be carried out tomorrow."""

__version__ = "0.1.0"
