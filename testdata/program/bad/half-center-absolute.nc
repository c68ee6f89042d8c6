#= @: found X2; under G90.1 an arc needs both I and J
%
G20
G90.1 G90 G0 X1 Y1
G2 ▸X2 I2
M30
%