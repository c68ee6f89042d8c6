#= @: found B4; the rotary axis of this program is A; one is read
%
O1
N10 G21 G17 G90 G40 G49 G80 G94 G54
G0 A3 ▸B4
M30
%
