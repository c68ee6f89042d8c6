#= @: found X1; G20 or G21 comes before the first move
%
G90
G0 ▸X1
M30
%