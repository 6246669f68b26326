/** All routes of the API. A noun's table is added here once. */
export const apiRoutes = {} as const;
