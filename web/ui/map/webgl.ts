/** Whether this browser can draw the map at all. */
export const hasWebGl = (): boolean => {
  try {
    return document.createElement('canvas').getContext('webgl2') !== null;
  } catch {
    return false;
  }
};
