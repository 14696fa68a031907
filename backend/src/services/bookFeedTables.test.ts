import { describe, expect, it } from 'vitest'
import { parseBookFeeds } from './bookFeedTables'

const sources =
  'key,citation,address\nhandbook,A handbook of feeds,https://example.org/feeds\nhabit,"common practice, no source",\n'
const heading =
  'key,name,class,forage,dm_pct,dm_source_key,dm_status,ifn,test_weight_kg_per_bushel,bulk_density_kg_per_l,ruminant_origin,npn_fraction,added_copper,ionophore,note'
const barley = 'barley,Barley grain,grain,no,88,handbook,read,4-00-549,21.8,,no,0,no,no,'
const feeds = `${heading}\n${barley}\n`
const valueHeading = 'feed_key,nutrient,value,sd,source_key,status,note'
const values = `${valueHeading}\nbarley,crudeProtein,125,9,handbook,read,\nbarley,copper,0,,habit,practice,estimate\n`

describe('the library’s tables of feeds', () => {
  it('are read with their sources; what has no line is unknown', () => {
    expect(parseBookFeeds({ feeds, values, sources })).toEqual([
      {
        key: 'barley',
        name: 'Barley grain',
        class: 'grain',
        forage: false,
        dryMatter: 0.88,
        dryMatterSource: 'A handbook of feeds; https://example.org/feeds',
        dryMatterStatus: 'read',
        internationalFeedNumber: '4-00-549',
        testWeightKg: 21.8,
        ruminantOrigin: 'no',
        nonProteinNitrogen: 0,
        addedCopper: false,
        ionophore: false,
        values: {
          crudeProtein: {
            value: 125,
            sd: 9,
            source: 'A handbook of feeds; https://example.org/feeds',
            status: 'read',
          },
          copper: { value: 0, source: 'common practice, no source; estimate', status: 'practice' },
        },
      },
    ])
  })

  it.each([
    {
      name: 'a number that is none',
      change: { values: values.replace('125', 'many') },
      why: 'feed-values, line 2: value "many" is no number',
    },
    {
      name: 'a nutrient that is none',
      change: { values: values.replace('copper', 'gold') },
      why: 'feed-values, line 3: nutrient "gold"',
    },
    {
      name: 'a value twice',
      change: { values: values.replace('copper', 'crudeProtein') },
      why: 'is there twice',
    },
    {
      name: 'a source that is none',
      change: { values: values.replace(',habit,', ',hearsay,') },
      why: 'source_key "hearsay" is no key',
    },
    {
      name: 'values of no feed',
      change: { values: values.replaceAll('barley,', 'rye,') },
      why: 'values of "rye"',
    },
    {
      name: 'a feed without dry matter',
      change: { feeds: feeds.replace(',88,', ',,') },
      why: 'feeds, line 2: dm_pct "" is missing',
    },
    {
      name: 'neither yes nor no',
      change: { feeds: feeds.replace(',grain,no,', ',grain,perhaps,') },
      why: 'forage "perhaps"',
    },
    {
      name: 'a line with too few cells',
      change: { feeds: `${heading}\nbarley,Barley\n` },
      why: 'feeds, line 2',
    },
  ])('are refused with the place: $name', ({ change, why }) => {
    expect(() => parseBookFeeds({ feeds, values, sources, ...change })).toThrow(why)
  })
})
