$SEPTUM rate '5/8X | 2x4@16, R13 | 5/8X'
