import * as z from 'zod/mini'
import { viscosityCups } from '../utils/viscosity-cups'

export const ViscosityCup = z.enum(viscosityCups, 'Name the cup.')
