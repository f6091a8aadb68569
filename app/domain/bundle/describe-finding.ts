import type { FindingCode } from './finding-codes'

/** What a finding is called and what the maintainer can do about it, in plain words. */
export type FindingDescription = { title: string; advice: string }

const descriptions: Record<FindingCode, FindingDescription> = {
  'zip-unreadable': {
    title: 'The zip cannot be read',
    advice: 'Make the zip again from the files themselves and upload it once more.'
  },
  'zip-encrypted': {
    title: 'The zip is locked with a password',
    advice: 'Make the zip again without a password: a bundle is open to all.'
  },
  'zip-path-unsafe': {
    title: 'A path leads out of the zip',
    advice: 'Zip the folder with the files from outside it, so that no name starts with a slash, a drive or "..".'
  },
  'zip-link': {
    title: 'A link instead of a file',
    advice: 'Replace the link by the file it points to, then make the zip again.'
  },
  'zip-method': {
    title: 'A rare compression',
    advice: 'Make the zip again with ordinary compression (deflate), which every program opens.'
  },
  'zip-too-large': {
    title: 'Too large, or made to swell',
    advice: 'Leave out what is not needed to make the board, such as renderings and 3D models.'
  },
  'zip-name-clash': {
    title: 'Two files of one name',
    advice: 'Rename or remove one of the two: on some systems one would replace the other.'
  },
  'zip-name-odd': {
    title: 'An odd file name',
    advice: 'Rename the file with letters, digits, dots, dashes and underscores, few folders deep, and make the zip again.'
  },
  'zip-nested': {
    title: 'An archive inside the zip',
    advice: 'Put the files themselves into the bundle. What is inside another archive is neither checked nor shown.'
  },
  'zip-backslash': {
    title: 'Backslashes in names',
    advice: 'Nothing need be done here; some programs show such names without folders.'
  },
  'zip-extra-data': {
    title: 'Bytes that belong to no file',
    advice: 'Nothing need be done as long as programs open it; made again by another program, the zip is free of them.'
  },

  'copper-missing': { title: 'A copper layer is missing', advice: 'Plot every copper layer and put the files into the bundle.' },
  'mask-missing': {
    title: 'A solder mask is missing',
    advice:
      'Plot the solder mask of that side and add it. A side that is to stay bare needs the file too: one that opens all of it.'
  },
  'outline-missing': {
    title: 'The outline is missing',
    advice: 'Plot the board edge as a layer of its own and add it to the bundle.'
  },
  'outline-open': {
    title: 'The outline does not close',
    advice: 'Join the ends of the board edge in the design, then plot the outline again.'
  },
  'layer-clash': {
    title: 'Two files for one layer',
    advice: 'Open both files. Remove the one that is left over, or name it, and its attribute, after the layer it really is.'
  },
  'layer-gap': { title: 'A layer between others is missing', advice: 'Plot the missing inner layer and add it to the bundle.' },
  'layer-count': {
    title: 'The number of layers differs',
    advice:
      'Count the copper layers of the design. Add the file that is missing, or correct the number in the job file or in the details of this draft.'
  },
  'layer-empty': {
    title: 'A layer is empty',
    advice: 'Plot the layer again from the design; a file that is not needed can be left out.'
  },
  'layer-truncated': { title: 'A file is cut off', advice: 'Plot the file again and make the zip from the complete one.' },
  'layer-unreadable': {
    title: 'A layer cannot be read',
    advice: 'Plot the layer again as Gerber with its format statement and apertures.'
  },
  'layer-too-complex': {
    title: 'A layer is far too complex',
    advice: 'Plot filled areas as regions instead of many thin strokes, and avoid nested copies.'
  },
  'layer-misaligned': {
    title: 'A layer does not fit the others',
    advice: 'Plot all layers in one go, from the same board, with the same origin and not mirrored.'
  },
  'layer-conflict': {
    title: 'Name and attribute disagree',
    advice: 'Open the file, see which layer it really is, and mend its name or its attribute.'
  },
  'layer-unknown': {
    title: 'A layer nobody can place',
    advice: 'Name the file after its layer, or leave it out if it is not needed; or say in your answer what it is for.'
  },
  'copper-past-outline': {
    title: 'Copper past the board edge',
    advice:
      'Half-holes on purpose? Say so in your answer and in the note for the order sheet. Otherwise pull the copper back from the edge.'
  },
  'paste-missing': {
    title: 'No paste layer',
    advice:
      'Plot the paste layer of that side, from which the stencil is cut; or answer that these parts are soldered without one.'
  },
  'legend-missing': { title: 'No legend', advice: 'Plot the legend, or say in your answer how parts are told apart without it.' },
  'deprecated-syntax': {
    title: 'Old commands',
    advice: 'Nothing need be done; a newer plot with X2 attributes is read with more certainty.'
  },
  'text-unsafe': {
    title: 'Markup in a text',
    advice: 'Nothing need be done here: it is shown as plain text. Clean it in the design when you can.'
  },

  'drill-missing': { title: 'No drill file', advice: 'Export the drill files and put them into the bundle.' },
  'drill-unreadable': {
    title: 'A drill file cannot be read',
    advice: 'Export the drill file again, with the tool sizes in its header.'
  },
  'drill-units': {
    title: 'Wrong unit in a drill file',
    advice: 'Export the drill file again with the same unit in its header and its coordinates.'
  },
  'drill-misaligned': {
    title: 'The holes miss their pads',
    advice: 'Export drill files and layers together, with the same origin and not mirrored.'
  },
  'drill-too-complex': {
    title: 'Far too many holes',
    advice: 'Look at the repeats in the drill file and export it again without them.'
  },
  'drill-format-assumed': {
    title: 'The drill format had to be guessed',
    advice:
      'Export the drill file again with its unit and with decimal points. Or compare the holes under Facts with your design, and answer that they are right.'
  },
  'hole-on-outline': {
    title: 'Holes on the board edge',
    advice: 'Nothing need be done here. If these are plated half-holes, name them in the note for the order sheet.'
  },

  'bom-missing': { title: 'No bill of materials', advice: 'Export the list of parts as CSV and put it into the bundle.' },
  'bom-unreadable': {
    title: 'The bill of materials cannot be read',
    advice: 'Give the columns headings such as Reference, Value, Footprint and Quantity, and save it as CSV.'
  },
  'bom-quantity': {
    title: 'A quantity does not add up',
    advice: 'Count the designators of the line, then correct the quantity or the designators.'
  },
  'bom-designator-repeated': {
    title: 'A part is listed twice',
    advice: 'Keep the designator in the line of the right part only.'
  },
  'bom-not-placed': {
    title: 'Parts without a place',
    advice: 'Add them to the placement list or mark them as not fitted; or say in your answer that they are fitted by hand.'
  },
  'bom-cell-unsafe': {
    title: 'A cell that would run as a formula',
    advice: 'Write the cell as plain text that does not start with =, +, - or @.'
  },

  'placement-missing': {
    title: 'No placement list',
    advice: 'Export the positions of the parts as CSV and put them into the bundle.'
  },
  'placement-unreadable': {
    title: 'The placement list cannot be read',
    advice: 'Give every part designator, X, Y, rotation and side, and name the columns so.'
  },
  'placement-designator-repeated': { title: 'A part is placed twice', advice: 'Keep one place for each designator.' },
  'placement-not-in-bom': {
    title: 'Placed parts that are not listed',
    advice: 'Add them to the bill of materials, or take them out of the placement list.'
  },
  'placement-outside': {
    title: 'Parts beside the board',
    advice: 'Export the positions with the same origin as the layers, and look at the parts named.'
  },
  'placement-units': {
    title: 'Wrong unit of the places',
    advice: 'Export the positions in millimetres, or write the unit into the headings.'
  },
  'placement-mirrored': {
    title: 'The bottom side is mirrored',
    advice:
      'Export the bottom side as seen from the top. Or leave it, and say in the note for the order sheet that its places are as seen from below.'
  },

  'revision-unchanged': {
    title: 'Changed copper under the same revision',
    advice:
      'Give the board its next revision in the details of this draft. If nothing was meant to change, upload the earlier copper, drill and outline files.'
  },
  'thickness-conflict': {
    title: 'Two thicknesses',
    advice: 'Correct the details of this draft or the job file, so that both state the thickness to order.'
  },
  'thickness-missing': {
    title: 'No thickness',
    advice: 'State the thickness in the details of this draft: connectors and edges depend on it.'
  },
  'source-missing': {
    title: 'No design source',
    advice: 'Add the design files, so that others can mend and change the board; or say in your answer where they are.'
  },
  'licence-missing': { title: 'No licence file', advice: 'Add the licence as LICENSE.txt, so that it travels with the files.' },

  'check-cut-off': {
    title: 'The check was cut off',
    advice: 'Look for a file that is far larger or more complex than a board needs, and plot it again.'
  }
}

export const describeFinding = (code: FindingCode): FindingDescription => descriptions[code]
