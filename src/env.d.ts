/// <reference path="../shared/stats/jstat.d.ts" />
