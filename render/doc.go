// Package render draws shapes on the processor: a small rasterizer that knows
// shapes, light and colour and nothing else. It serves a window that is
// turned by hand, figures for print and animations with the same code.
//
// # Words
//
// A Scene is a plain value: a list of Shapes and the Fonts of its texts. A
// Shape is a Geometry (Sphere, Cylinder, Cone, Arrow, Disc, Polygon, Line,
// Text or *Mesh), an optional affine transform and a Material (colour,
// opacity, hatching, number for picking). A Camera sees the scene in
// perspective or without. A Look is the way of shading, its lights, outlines
// and ground: PlainLook, LitLook or InkLook. A Quality is the number of
// samples a pixel and the number of pixels an inch, which gives millimetres
// and points their meaning.
//
// There is one verb:
//
//	err := render.Draw(ctx, dst, &scene, camera, look, quality, render.Band{})
//
// It fills dst, an *image.RGBA, and nothing else. The same input gives the
// same bytes on any number of processors. Whoever draws many frames keeps a
// Renderer and calls its Draw: it holds the buffers and makes no garbage
// once they have grown. A Renderer serves one goroutine at a time.
//
// # Large pictures
//
// A picture too large for memory is drawn in bands: dst.Rect is then the part
// of the picture to draw and Band.Width and Height are the size of the whole,
// up to 16,384 on a side. Bands fit together without a seam.
//
// # While a scene moves
//
// Only edges depend on the number of samples: a window may draw with one
// sample while it is turned and then again with 4, 8 and 16, and nothing jumps.
// Pass a context to give up a drawing that has become stale.
//
// # Parts of the picture
//
// A shape with a Place is fixed to the picture (a triad of axes, a scale bar,
// a panel letter). Its geometry is in millimetres, or in shares of the short
// side, and with Turn it shows the scene's orientation.
//
// # Picking
//
// Pick tells which shape is seen at a pixel by the ID of its material.
//
// # Axes and units
//
// Scenes are right-handed with any unit of length, angles are in radians;
// widths of lines, outlines and halos are millimetres and sizes of type are
// points on the picture. Colours are sRGB bytes; the looks Lit and Ink blend
// them in linear light, Plain takes them as plain numbers.
package render
