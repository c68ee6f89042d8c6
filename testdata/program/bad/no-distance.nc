#= @: found X1; G90 or G91 comes before the first move
%
G21
G0 ▸X1
M30
%