// A little help where a browser can give it; every page works without.
"use strict";
