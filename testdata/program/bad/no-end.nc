#= @: found the end of the file; a program ends with M2, M30 or %
G21
G90
▸