#= @: found the end of the file; a program that starts with % ends with %
%
G21
M30
▸