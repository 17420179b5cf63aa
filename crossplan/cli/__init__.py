"""The commands: one thin file each. The only place that prints, exits or reads the clock."""
