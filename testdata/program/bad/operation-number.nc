#= found program number O7; allowed: those of the 1 operations of cam.yaml; say which one with --operation
%
O7
G21 G90
G0 X1
M30
%
