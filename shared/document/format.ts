/** The number of the saved format. Raise it with every change that older readers would misread, and add the step to the migrations of `version.ts`. */
export const documentVersion = 1
