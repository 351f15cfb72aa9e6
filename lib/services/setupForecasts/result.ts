/** Name and version of the computation; a change of figures raises the version. */
export const FORECAST_METHOD = 'setup forecast';
export const FORECAST_METHOD_VERSION = '1.0.0';
