$SEPTUM rate 'typex-16 | steel-92-18@610 | typex-16' --csv - --length 24ft --height "9'-0\"" --corners 1 --tees=1 --doors 1
