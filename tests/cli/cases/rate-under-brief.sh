$SEPTUM rate --brief $EXAMPLES/heavy-fastening.json 'typex-16 | rc@610 | wood-89@406, glass-89 | typex-16'
