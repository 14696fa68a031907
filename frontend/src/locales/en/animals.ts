export default {
  species: {
    sheep: 'Sheep',
    goat: 'Goats',
    beefCattle: 'Beef cattle',
    dairyCattle: 'Dairy cattle',
    pig: 'Pigs',
    poultry: 'Poultry',
    horse: 'Horses',
  },
} as const
