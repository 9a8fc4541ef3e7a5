/**
 * Two frames of 16 × 8 planar RGB with 10 bits (FFV1 in Matroska, bit for bit reproducible), kept as bytes since nothing in the test
 * tools writes this format. In frame n, sample i of plane p (G, B, R) is (7 i + 301 p + 53 n) mod 1024.
 */
export const planarRgbFile = Buffer.from(
  'GkXfo6NChoEBQveBAULygQRC84EIQoKIbWF0cm9za2FCh4EEQoWBAhhTgGcBAAAAAAADwxFNm3TAv4S4CstGTbuLU6uEFUmp' +
    'ZlOsgaFNu4tTq4QWVK5rU6yBzE27jFOrhBJUw2dTrIICGk27jFOrhBxTu2tTrIIDp+wBAAAAAAAAUwAAAAAAAAAAAAAAAAAA' +
    'AAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAFUmp' +
    'Zqa/hGybThgq17GDD0JATYCETGF2ZldBhExhdmZEiYhANAAAAAAAABZUrmtBSL+EAx+r+K4BAAAAAAABOdeBAXPFiAAAAAAA' +
    'AAABnIEAIrWcg3VuZIiBAIOBASPjg4OYloCGj1ZfTVMvVkZXL0ZPVVJDQ+CNsIEQuoEImoECVLKBBGOiQPDwAAAAEAAAAAgA' +
    'AAABABgARkZWMYABAAAAAAAAAAAAAAAAAAAAAAAAVgYeL/24RtdwlzABhgHu4RzmvUVNtTgndNguEH11xarjPWAs2IaD/ltH' +
    'sQ/FXvF7/4F4tX3BISIhvhnGUdkxDwi2f3qyydzKWZ7H3f3jMwfHh93udIfiZcT7/NTAHM0l5GhK1w7fGlI1vlZn/jBvvpbF' +
    'YAI4TC4XwjNNPWOgedEwClBInbq0bd8gTONlp6IhneeZMhvcn900SW/eLSTRJp4M5bC5PU0AbgjBgvjtmiS+GJHy+iiCnu9b' +
    'THoH0dOD49jCJCpVHUgSVMNn1b+ET94drXNzzGPAi2PFiAAAAAAAAAABZ8iWRaOHRU5DT0RFUkSHiUxhdmMgZmZ2MWfIokWj' +
    'iERVUkFUSU9ORIeUMDA6MDA6MDAuMDIwMDAwMDAwAAAfQ7Z1QS2/hBqmWzbngQCjQKOBAACA79r2azVCak1oyaWVvMz/8fOY' +
    'Q/6dnh/4Al4AABoAC2hNEz245SqVUNJK7Kghk5RSjW04rP/0Ov2AuZSj2M6MJGEAAB8A3EXGLZRQOn2VzzRj+wxi1vY9O80T' +
    'mefdS/p5eHoPPhf/pLFQ2UVSAAAjAISm7p4Z/KJI1JwPp9Vkn7IjK0ShcPMgiv+9rqB+z+IYY2a1H97M0QAAIwBda+7mo/yB' +
    'AAoAcFtsjV7yJYiGAj05KeCLGsAztR8AABQAWdRZ7T25LU6S6pbo4r037N8jLQr/zM0JAAAUAJlkLqaUUKGoe47AERRmjGcp' +
    'N1/1vAj/0IJ7RbQSmAAAGgC2DTy8GfzBWPrhJZSSKux63er6H5pu9WtuRAAAFgA2/P+NHFO7a5e/hOjmbZu7j7OBALeK94EB' +
    '8YICdPCBCQ==',
  'base64',
);

/** @returns sample i of a plane of frame n */
export function planarRgbSample(n: number, plane: 'g' | 'b' | 'r', i: number): number {
  return (7 * i + 301 * 'gbr'.indexOf(plane) + 53 * n) % 1024;
}
